/** How the command lines end: 0 done, 2 bad input with the field's path, 1 fault, 130 interrupted. */
import type { FieldProblem } from '../../shared/schemas/problem'

export const EXIT = { done: 0, fault: 1, badInput: 2, interrupted: 130 } as const

/** What a person can put right: named by the path of a field, or by the file. */
export class BadInput extends Error {
  constructor(readonly problems: readonly FieldProblem[]) {
    super(problems.map(lineOf).join('\n'))
  }
}
export const badInput = (path: string, message: string): BadInput => new BadInput([{ path, message }])
const lineOf = ({ path, message }: FieldProblem) => path === '' ? message : `${path}: ${message}`

/** Runs a command and exits with its code once everything written has left; stack traces are for faults only. */
export async function runCommand(command: () => Promise<number>): Promise<void> {
  let code: number
  try {
    code = await command()
  } catch (thrown) {
    if (thrown instanceof BadInput) {
      process.stderr.write(`${thrown.message}\n`)
      code = EXIT.badInput
    } else {
      process.stderr.write(`Fault: ${thrown instanceof Error ? thrown.stack ?? thrown.message : String(thrown)}\n`)
      code = EXIT.fault
    }
  }
  process.exitCode = code
  // A reader that went away (head, less) is no fault.
  process.stdout.on('error', () => process.exit(code))
  process.stdout.write('', () => process.exit(code))
}
