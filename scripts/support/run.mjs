/** Runs a program in the checkout's folder to its end. */
import { spawn } from 'node:child_process'
import { fileURLToPath } from 'node:url'

/** The checkout. */
export const ROOT = fileURLToPath(new URL('../../', import.meta.url)).replace(/\/$/, '')

const living = new Set()
process.on('exit', () => {
  for (const child of living) child.kill('SIGTERM')
})

/** Asks first, so that a test's database is stopped; insists 20 seconds later. */
function endWithin(child, timeoutMs) {
  if (!timeoutMs) return () => undefined
  let insist
  const limit = setTimeout(() => {
    child.kill('SIGTERM')
    insist = setTimeout(() => child.kill('SIGKILL'), 20_000)
  }, timeoutMs)
  return () => {
    clearTimeout(limit)
    clearTimeout(insist)
  }
}

/**
 * Runs to the end; standard input is closed, so that nothing can ask a question.
 * @param {string} program name or path
 * @param {string[]} argumentList arguments
 * @param {{ env?: Record<string, string | undefined>, quiet?: boolean, timeoutMs?: number }} [options] quiet keeps the output for the answer only
 * @returns {Promise<{ status: number, output: string }>} exit status (127: it could not be started) and, when quiet, what it printed
 */
export function run(program, argumentList, { env = process.env, quiet = false, timeoutMs = 0 } = {}) {
  return new Promise((resolve) => {
    const child = spawn(program, argumentList, { cwd: ROOT, env, stdio: ['ignore', quiet ? 'pipe' : 'inherit', quiet ? 'pipe' : 'inherit'] })
    let output = ''
    const keep = (piece) => {
      output = (output + piece).slice(-200_000)
    }
    child.stdout?.on('data', keep)
    child.stderr?.on('data', keep)
    living.add(child)
    const withdraw = endWithin(child, timeoutMs)
    const over = () => {
      withdraw()
      living.delete(child)
    }
    child.once('error', (error) => {
      over()
      resolve({ status: 127, output: error.message })
    })
    child.once('close', (status, signal) => {
      over()
      resolve({ status: status ?? (signal === 'SIGINT' ? 130 : 1), output: output.trim() })
    })
  })
}

/** The last lines of a long output, for a sentence that quotes it. */
export const lastLines = (output, count = 6) => output.split('\n').slice(-count).join('\n')

/** A tool of node_modules, run by this very Node. */
export const tool = name => `${ROOT}/node_modules/.bin/${name}`
