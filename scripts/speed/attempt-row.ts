/** The attempt sampler against the same in C, on the same tables, walk only. */
import { attemptCeiling } from '../../shared/walk/attempt-size'
import { compilePlan } from '../../shared/walk/plan'
import { TableCache } from '../../workers/attempt-cache'
import { placeAttempt } from '../../workers/attempt-placing'
import { KernelHost } from '../../workers/host'
import { longSealed } from './jobs'
import { checkOf, freshWalk, kernelModule, SEED, walk } from './ours'
import { pairUp, timed } from './pairs'
import { planFile } from './plan-file'
import type { Measured, Tools } from './rows'

const REPLICATES = 200

/** The kernel's memory after the tables of the job have been built in it, the sampler's argument address first. */
async function memoryWithTables(): Promise<Buffer> {
  const host = new KernelHost(await WebAssembly.instantiate(await kernelModule(), {}))
  const plan = compilePlan(longSealed)
  const set = new TableCache(host).tablesOf(plan, attemptCeiling(plan, 1), 1)
  const { pointer } = placeAttempt(host, plan, [set])
  return Buffer.concat([Buffer.from(Uint32Array.of(pointer, 0).buffer), Buffer.from(host.exports.memory.buffer)])
}

/** Both sides count the same, or it is a fault; then they are timed. */
export async function attemptAgainstC({ workshop }: Tools): Promise<Measured> {
  const prepared = await freshWalk(longSealed, 'attempt')
  const reference = workshop.c('attempt', [planFile(compilePlan(longSealed), SEED), await memoryWithTables()])
  const mine = checkOf(prepared, 0, 20), { check } = await reference.ask(0, 20)
  if (mine !== check) throw new Error('The kernel and the C reference did not count the same; their times are of different work.')
  const paired = await pairUp(() => timed(() => walk(prepared, 0, REPLICATES)), async () => (await reference.ask(0, REPLICATES)).milliseconds)
  return { ...paired, note: `${REPLICATES} replicates on both sides, the kernel's tables, counts equal bit for bit` }
}
