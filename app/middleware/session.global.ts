/** Asks once who is signed in, before the first page is drawn; then only pages marked `signedIn` turn a stranger away. */
export default defineNuxtRouteMiddleware(async (to) => {
  const session = useSessionStore()
  if (!session.known) await session.load()
  if (to.meta.signedIn && session.known && !session.me) return navigateTo({ path: '/sign-in', query: { to: to.fullPath } })
})
