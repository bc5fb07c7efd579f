/** The one desk of the application that makes outcomes, in a worker of its own, started on first need. */
import { wrap } from 'comlink'
import { OutcomeDesk } from '~/utils/outcomeDesk'

type Asked = 'open' | 'add' | 'outcome' | 'body' | 'blocks' | 'close'
/** The desk as its callers see it, in the worker or on the page: every answer is waited for. */
export type Desk = { [name in Asked]: (...given: Parameters<OutcomeDesk[name]>) => Promise<Awaited<ReturnType<OutcomeDesk[name]>>> }
let desk: Promise<Desk> | undefined
/** A worker script that does not answer in this time is given up, and outcomes are made on the page [ms]. */
const START_LIMIT_MS = 10_000

/** The same desk on the page itself, for browsers where the worker does not start. */
function onPage(): Desk {
  const here = new OutcomeDesk()
  return {
    open: async (...given) => here.open(...given),
    add: async (...given) => here.add(...given),
    outcome: async (...given) => here.outcome(...given),
    body: async (...given) => here.body(...given),
    blocks: async runId => here.blocks(runId),
    close: async runId => here.close(runId),
  }
}

async function start(): Promise<Desk> {
  let worker: Worker | undefined
  try {
    worker = new Worker(new URL('../workers/outcome.worker.ts', import.meta.url), { type: 'module', name: 'outcome' })
    const remote = wrap<OutcomeDesk>(worker)
    const failed = new Promise<never>((_, refuse) => {
      worker!.onerror = () => refuse(new Error('The outcome worker did not start.'))
      setTimeout(() => refuse(new Error('The outcome worker did not answer.')), START_LIMIT_MS)
    })
    await Promise.race([remote.close('no-run'), failed])
    return remote as Desk
  } catch {
    worker?.terminate()
    return onPage()
  }
}

export const useOutcomeDesk = (): Promise<Desk> => desk ??= start()
