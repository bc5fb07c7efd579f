/** The application's one worker for fits, started on first need; where none starts, fits are made on the page. */
import { wrap, type Remote } from 'comlink'
import { FittingDesk } from '~/utils/fittingDesk'

let desk: Remote<FittingDesk> | FittingDesk | undefined

function start(): Remote<FittingDesk> | FittingDesk {
  try {
    const worker = new Worker(new URL('../workers/fitting.worker.ts', import.meta.url), { type: 'module', name: 'fitting' })
    worker.onerror = () => {
      desk = new FittingDesk()
    }
    return wrap<FittingDesk>(worker)
  } catch {
    return new FittingDesk()
  }
}
export const useFitting = () => desk ??= start()
