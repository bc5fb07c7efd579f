/** Two worker threads against one, on a job that one needs ten seconds for. */
import { runInNode } from '../../workers/node'
import { exclusiveLong } from './jobs'
import { freshWalk, SEED, walk } from './ours'
import { pairUp, timed } from './pairs'
import type { Measured } from './rows'

const JOB_MS = 10_500
/** Replicates that tell the pace of this machine. */
const TRIAL = 20

/** Replicates that one thread needs about ten seconds for. */
async function sizeOfJob(): Promise<number> {
  const prepared = await freshWalk(exclusiveLong, 'step')
  walk(prepared, 0, TRIAL)
  const milliseconds = await timed(() => walk(prepared, 0, TRIAL))
  return Math.ceil(JOB_MS / milliseconds * TRIAL / 100) * 100
}

export async function twoWorkers(): Promise<Measured> {
  const replicates = await sizeOfJob()
  const crewOf = (workers: number) => () => timed(() => runInNode({ scenario: exclusiveLong, seed: SEED, replicates, algorithm: 'step' }, { workers }))
  const paired = await pairUp(crewOf(2), crewOf(1), 5)
  return { ...paired, note: `${replicates} replicates, threads started within the time` }
}
