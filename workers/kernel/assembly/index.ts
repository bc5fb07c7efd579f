/** What the kernel offers its host. Pointers are byte addresses in the kernel's memory; see README.md beside this folder for the layout. */
import { geometricRows, makeEarlyRow, makeRow, makeWaitRow, solveFar, solveLandings, solveWaits, walkAttempt } from './attempt-exports'
import { planBytes } from './plan'
import { walkStep } from './step'
import { walkStirred } from './stirred'
import { walkTouch } from './touch'
import { fillAlias, sumOfTable } from './touch-alias'
import { solveFirstTouch } from './touch-table'

export { geometricRows, makeEarlyRow, makeRow, makeWaitRow, solveFar, solveLandings, solveWaits, walkAttempt }
export { fillAlias, planBytes, solveFirstTouch, sumOfTable, walkStep, walkStirred, walkTouch }

/** Memory for the host, 16-byte aligned. */
export function allocate(bytes: usize): usize {
  return heap.alloc(bytes)
}

export function release(pointer: usize): void {
  heap.free(pointer)
}
