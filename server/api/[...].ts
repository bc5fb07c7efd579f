/** What no other file answers: 405 where the address takes another method, else 404. */
export default defineEventHandler((event) => {
  const allowed = methodsOf(getRequestURL(event).pathname)
  if (allowed.length) throw problem('wrong_method', { allow: allowed.join(', ') })
  throw problem('not_found')
})
