/** Tells a database that went away from a fault of ours: the first answers 503 and is worth a retry. */

/** PostgreSQL classes: 08 connection, 57P01–03 shutting down or starting up, 53300 too many connections, 57014 statement timed out. */
const SQL_STATES = /^(08...|57P0[1-3]|53300|57014)$/
const SYSTEM_CODES = new Set(['ECONNREFUSED', 'ECONNRESET', 'EPIPE', 'ETIMEDOUT', 'ENOTFOUND', 'EHOSTUNREACH', 'EAI_AGAIN', 'ENOENT'])
/** pg gives these no code. */
const MESSAGES = /Connection terminated|timeout exceeded when trying to connect|Query read timeout|Client has encountered a connection error|not queryable|server closed the connection/i

/** Looks through the causes, as Drizzle wraps what pg throws. */
export function isDatabaseAway(error: unknown): boolean {
  for (let one = error, depth = 0; one instanceof Error && depth < 5; one = one.cause, depth += 1) {
    const { code } = one as { code?: unknown }
    if (typeof code === 'string' && (SQL_STATES.test(code) || (SYSTEM_CODES.has(code) && isOfDatabase(one)))) return true
    if (MESSAGES.test(one.message)) return true
    if (one instanceof AggregateError && one.errors.some(isDatabaseAway)) return true
  }
  return false
}

/** A missing file is not a missing database: system codes count only from a socket. */
const isOfDatabase = (error: Error): boolean => {
  const { syscall } = error as { syscall?: string }
  return syscall === undefined || ['connect', 'read', 'write', 'getaddrinfo'].includes(syscall)
}
