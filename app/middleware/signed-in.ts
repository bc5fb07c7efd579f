/** For a page that names it: signed-in people only. The global rule says the same for every page that is not open. */
export default defineNuxtRouteMiddleware((to) => {
  const away = turnAway(to, useSessionStore())
  if (away) return navigateTo(away)
})
