/** The application's one crew of walk workers: made on first need, shared by runs, previews and checks. */
import { browserWorker } from '~~/workers/browser'
import { createCrew, crewSize } from '~~/workers/crew'
import type { Crew } from '~~/workers/protocol'

let crew: Crew | undefined
const made = (): Crew => {
  if (import.meta.server) throw new Error('Walks run in the browser.')
  return crew ??= createCrew({ createWorker: browserWorker, size: crewSize(navigator.hardwareConcurrency) })
}

/** Safe to call while a page is drawn on the server: workers start when a walk is asked for. */
export const useCrew = (): Crew => ({
  run: (order, options) => made().run(order, options),
  preview: (scenario, replicates, onGrowth) => made().preview(scenario, replicates, onGrowth),
  conclude: (scenario, result) => made().conclude(scenario, result),
  exact: scenario => made().exact(scenario),
  dismiss() {
    crew?.dismiss()
    crew = undefined
  },
  get size() {
    return made().size
  },
  get pace() {
    return crew?.pace ?? 1
  },
})
