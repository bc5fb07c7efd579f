/** Asks once who is signed in, before the first page is drawn; every page but the open ones turns a stranger to the sign-in. */
export default defineNuxtRouteMiddleware(async (to) => {
  const session = useSessionStore()
  if (!session.known && !useNuxtApp().isHydrating) await session.load()
  const away = to.matched.length > 0 && !to.meta.open ? turnAway(to, session) : undefined
  if (away) return navigateTo(away)
})
