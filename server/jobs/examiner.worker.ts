/** The thread that judges runs and walks them again, so that neither holds up a request. One job at a time. */
import { parentPort } from 'node:worker_threads'
import kernelBase64 from 'virtual:moorage-kernel'
import type { RunSave } from '../../shared/schemas/api/run'
import type { Scenario } from '../../shared/schemas/scenario'
import { blockDigest } from '../../shared/walk/digest'
import { createWalker } from '../../workers/walker'
import { Refusal } from '../utils/problem'
import { examineRun, parseRun } from './examine'
import type { ExaminerAnswer, ExaminerJob } from './examiner-protocol'

const walker = createWalker(async () => Uint8Array.from(Buffer.from(kernelBase64, 'base64')))
/** The body parsed last: its scenario is fetched in between. */
let held: RunSave | undefined

async function landingErrorOf(scenario: Scenario, run: RunSave): Promise<number> {
  const { algorithm } = run.engine
  if (algorithm === 'stirred' || algorithm === 'step') return 0
  const ready = await walker.prepare({ scenario, algorithm, seed: run.seed }, null)
  return ready.landingError
}

async function answer(job: ExaminerJob): Promise<unknown> {
  if (job.kind === 'parse') {
    held = parseRun(job.raw)
    return { revision: held.revision }
  }
  if (job.kind === 'examine') {
    const run = held!
    held = undefined
    return { run, outcome: await examineRun(job.scenario, run, () => landingErrorOf(job.scenario, run)) }
  }
  if (job.kind === 'prepare') return walker.prepare({ scenario: job.scenario, algorithm: job.algorithm, seed: job.seed }, null)
  return { digest: blockDigest(await walker.walk(job.from, job.to)) }
}

parentPort!.on('message', async (job: ExaminerJob & { id: number }) => {
  let reply: ExaminerAnswer
  try {
    reply = { id: job.id, value: await answer(job) }
  } catch (error) {
    reply = error instanceof Refusal
      ? { id: job.id, refused: { code: error.code, parts: error.parts } }
      : { id: job.id, failed: error instanceof Error ? error.message : String(error) }
  }
  parentPort!.postMessage(reply)
})
