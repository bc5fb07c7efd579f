/** Crews of real worker threads, and threads that fail on purpose: the real walker behind a script that dies when told. */
import { mkdtempSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { Worker } from 'node:worker_threads'
import { kernelFromSource, threadFromSource, threadHandle } from '../../../workers/node'
import type { WorkerHandle } from '../../../workers/member'
import { smallScenario } from '../outcome/walked'

const kernelBytes = kernelFromSource()

/** A walk of the step kernel, a few milliseconds a replicate. */
export const heldScenario = smallScenario({
  reservoir: { supply: 'held', marginSites: 10 }, schedule: { durationS: 3, sampleEveryMs: 100 },
  sites: [{ name: 'a', share: 0.5, attachProbability: 0.6 }, { name: 'b', share: 0.5, attachProbability: 0.05 }],
})

/** Starts threads and counts them; `spoil` may change a started one. */
export function countedThreads(spoil: (thread: WorkerHandle, number: number) => WorkerHandle = handle => handle) {
  const count = { started: 0, alive: 0 }
  return {
    count,
    createWorker: (): WorkerHandle => {
      const handle = spoil(threadFromSource(kernelBytes), ++count.started)
      count.alive++
      return { ...handle, terminate: () => {
        count.alive--
        handle.terminate()
      } }
    },
  }
}

/** A handle whose thread is killed after so many messages to it: a crash in the middle of a block. */
export function dyingAfter(handle: WorkerHandle, messages: number): WorkerHandle {
  let left = messages
  return { ...handle, endpoint: { ...handle.endpoint, postMessage(message, transfer) {
    if (left-- > 0) handle.endpoint.postMessage(message, transfer)
    else handle.terminate()
  } } }
}

/** A thread whose script throws while it starts. */
export function brokenThread(): WorkerHandle {
  const file = join(mkdtempSync(join(tmpdir(), 'moorage-crew-')), 'broken.mjs')
  writeFileSync(file, 'throw new Error("this script is broken")\n')
  return threadHandle(new Worker(file))
}

/** A thread that never answers. */
export function silentThread(): WorkerHandle {
  return threadHandle(new Worker('setInterval(() => {}, 1000)', { eval: true }))
}
