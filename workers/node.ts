/** The same kernel under Node: a crew of worker threads for command lines, and a walk in this thread where none can be started. */
import { readFileSync } from 'node:fs'
import { Worker } from 'node:worker_threads'
import { nodeEndpoint } from './node-endpoint'
import { threadScript } from './node-script'
import type { Scenario } from '../shared/schemas/scenario'
import type { EngineId, ReplicateBlock } from '../shared/walk/types'
import { createCrew, crewSize } from './crew'
import { KERNEL_VERSION } from './kernel/version'
import type { WorkerHandle } from './member'
import type { Crew, RunOrder, RunProgress, RunResult, Walker } from './protocol'
import { createWalker } from './walker'

export { createCrew, crewSize }

/** Bytes of the committed kernel, for callers that run from the source tree. */
export const kernelFromSource = (): Uint8Array<ArrayBuffer> => new Uint8Array(readFileSync(new URL('./kernel/kernel.wasm', import.meta.url)))

/** A worker thread running this source tree's script. */
export function threadFromSource(kernelBytes = kernelFromSource()): WorkerHandle {
  return threadHandle(new Worker(threadScript(), { eval: true, workerData: { kernelBytes } }))
}

/** Wraps a started thread for a crew. */
export function threadHandle(thread: Worker): WorkerHandle {
  return {
    endpoint: nodeEndpoint(thread),
    terminate: () => void thread.terminate(),
    onFailure(listener) {
      thread.once('error', fault => listener(fault instanceof Error ? fault.message : String(fault)))
      thread.once('exit', code => listener(`The worker thread ended with code ${code}.`))
      thread.unref() // a crew at rest must not keep the process alive; a run under way does by its timers
    },
  }
}

/** A crew of worker threads. */
export function nodeCrew(size: number, createWorker: () => WorkerHandle = threadFromSource): Crew {
  return createCrew({ createWorker, size })
}

/** One run on worker threads, which are ended afterwards. */
export async function runInNode(order: RunOrder, options: { workers: number, signal?: AbortSignal, onProgress?: (progress: RunProgress) => void, createWorker?: () => WorkerHandle }): Promise<RunResult> {
  const crew = nodeCrew(options.workers, options.createWorker)
  try {
    return await crew.run(order, options)
  } finally {
    crew.dismiss()
  }
}

/** A walker in this very thread; it blocks while it walks. */
export const inlineWalker = (kernelBytes = kernelFromSource()): Walker => createWalker(async () => kernelBytes)

/**
 * Walks one block again, as an audit does.
 * @param walker - of this thread or a worker's
 * @returns the block; null when this build has another kernel version
 */
export async function replayBlock(walker: Pick<Walker, 'prepare' | 'walk'>, scenario: Scenario, engine: EngineId, seed: string, from: number, to: number): Promise<ReplicateBlock | null> {
  if (engine.version !== KERNEL_VERSION) return null
  await walker.prepare({ scenario, algorithm: engine.algorithm, seed })
  return walker.walk(from, to)
}
