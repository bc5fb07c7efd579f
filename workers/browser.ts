/** How a browser starts a worker; app code calls `createCrew({ createWorker: browserWorker, size: crewSize(navigator.hardwareConcurrency) })`. */
import type { WorkerHandle } from './member'

export function browserWorker(): WorkerHandle {
  const worker = new Worker(new URL('./walk.worker.ts', import.meta.url), { type: 'module', name: 'walk' })
  return {
    endpoint: worker,
    terminate: () => worker.terminate(),
    onFailure(listener) {
      worker.addEventListener('error', event => listener(event.message || 'The worker could not be started.'), { once: true })
      worker.addEventListener('messageerror', () => listener('A message could not be read.'), { once: true })
    },
  }
}
