/** How the commands speak: whole sentences on the terminal, and one way to end with a reason. */

/** A reason that a person can act on; printed without a stack. */
export class Refusal extends Error {
  /**
   * @param {string} sentence what is wrong and what to do
   * @param {number} [exitCode] what the process ends with
   */
  constructor(sentence, exitCode = 1) {
    super(sentence)
    this.exitCode = exitCode
  }
}

/** @param {string} sentence */
export function say(sentence) {
  process.stdout.write(`${sentence}\n`)
}

/** @param {string} sentence */
export function warn(sentence) {
  process.stderr.write(`${sentence}\n`)
}

/** Prints a refusal's sentence, or a fault with its stack, and says the exit code. @param {unknown} error */
export function reasonToExit(error) {
  if (error instanceof Refusal) {
    warn(error.message)
    return error.exitCode
  }
  warn(error instanceof Error ? (error.stack ?? error.message) : String(error))
  return 1
}

/**
 * "12 s" or "2 min 5 s".
 * @param {number} milliseconds elapsed
 */
export function duration(milliseconds) {
  const seconds = milliseconds / 1000
  if (seconds < 10) return `${seconds.toFixed(1)} s`
  if (seconds < 100) return `${Math.round(seconds)} s`
  return `${Math.floor(seconds / 60)} min ${Math.round(seconds % 60)} s`
}
