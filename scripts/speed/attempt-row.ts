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

/**
 * Both sides count the same, or it is a fault; then they are timed. Where in physical memory the tables come to lie changes either side's
 * time by up to a half, so every round has an instance and a reference of its own, each warmed by one call.
 */
export async function attemptAgainstC({ workshop }: Tools): Promise<Measured> {
  const plan = planFile(compilePlan(longSealed), SEED), memory = await memoryWithTables()
  const place = async () => ({ prepared: await freshWalk(longSealed, 'attempt'), reference: workshop.c('attempt', [plan, memory]) })
  let here = await place()
  const mine = checkOf(here.prepared, 0, 20), { check } = await here.reference.ask(0, 20)
  if (mine !== check) throw new Error('The kernel and the C reference did not count the same; their times are of different work.')
  const ours = async (round: number) => {
    if (round > 0) {
      here.reference.end()
      here = await place()
      walk(here.prepared, 0, REPLICATES)
      await here.reference.ask(0, REPLICATES)
    }
    return timed(() => walk(here.prepared, 0, REPLICATES))
  }
  const paired = await pairUp(ours, async () => (await here.reference.ask(0, REPLICATES)).milliseconds)
  return { ...paired, note: `${REPLICATES} replicates on both sides, the kernel's tables laid out anew for each round, counts equal bit for bit` }
}
