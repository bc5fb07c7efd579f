/** What no other file answers: HEAD as GET without its body, 405 where the address takes another method, else 404. */
export default defineEventHandler(async (event) => {
  const allowed = methodsOf(getRequestURL(event).pathname)
  if (event.method === 'HEAD' && allowed.includes('GET')) {
    const answer = await event.fetch(event.path, { headers: event.headers })
    setResponseStatus(event, answer.status)
    for (const [name, value] of answer.headers) if (name !== 'content-length' && name !== 'transfer-encoding') setResponseHeader(event, name, value)
    return ''
  }
  if (allowed.length) throw problem('wrong_method', { allow: (allowed.includes('GET') ? ['HEAD', ...allowed] : allowed).join(', ') })
  throw problem('not_found')
})
