/** Where a stranger goes who asked for a page of a bench: to the sign-in, with the way back. */
export function turnAway(to: { fullPath: string }, session: { known: boolean, me: unknown }): { path: string, query: { to: string } } | undefined {
  return session.known && !session.me ? { path: '/sign-in', query: { to: to.fullPath } } : undefined
}
