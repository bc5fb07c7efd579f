/** What the attempt sampler offers the host. */
import { geometricRows } from './alias'
import { walkAttempt } from './attempt-run'
import { makeEarlyRow, makeRow, makeWaitRow } from './attempt-tables'
import { solveFar, solveLandings } from './solve-landings'
import { solveWaits } from './solve-waits'

export { geometricRows, makeEarlyRow, makeRow, makeWaitRow, solveFar, solveLandings, solveWaits, walkAttempt }
