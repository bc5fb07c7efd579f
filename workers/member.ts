/** One worker of a crew: started on first need, ended on a fault, replaced on the next need. */
import { releaseProxy, transfer, wrap, type Endpoint, type Remote } from 'comlink'
import type { Walker, WalkJob, WalkReady } from './protocol'
import type { ReplicateBlock } from '../shared/walk/types'

/** A started worker, whoever started it. */
export interface WorkerHandle {
  endpoint: Endpoint
  terminate(): void
  /** Calls back once when the worker dies or cannot be started. */
  onFailure(listener: (reason: string) => void): void
}
/** The worker is gone or gave no sign; its range is walked again elsewhere. */
export class WorkerLost extends Error {}

interface Running { handle: WorkerHandle, walker: Remote<Walker>, lost: Promise<never>, lose: (reason: string) => void, ended: boolean }

export class Member {
  private running: Running | undefined
  private prepared: WalkJob | undefined

  constructor(private readonly createWorker: () => WorkerHandle) {}

  private start(): Running {
    if (this.running) return this.running
    const handle = this.createWorker()
    let lose: (reason: string) => void = () => {}
    const lost = new Promise<never>((_, reject) => {
      lose = reason => reject(new WorkerLost(reason))
    })
    lost.catch(() => {}) // a worker may die while nobody waits for it
    const running: Running = { handle, walker: wrap<Walker>(handle.endpoint), lost, lose, ended: false }
    handle.onFailure(reason => this.end(reason, running))
    return this.running = running
  }

  /** Ends the worker; calls under way reject with `WorkerLost`. */
  end(reason: string, running = this.running): void {
    if (!running || running.ended) return
    running.ended = true
    if (running === this.running) this.running = this.prepared = undefined
    running.lose(reason)
    running.walker[releaseProxy]()
    running.handle.terminate()
  }

  /** Asks the worker; rejects when it dies, or gives no sign for `patienceMs`. */
  private async ask<T>(call: (walker: Remote<Walker>) => Promise<T>, patienceMs: number): Promise<T> {
    const running = this.start()
    let timer: ReturnType<typeof setTimeout> | undefined
    const silence = new Promise<never>((_, reject) => {
      timer = setTimeout(() => {
        this.end('gave no sign', running)
        reject(new WorkerLost(`The worker gave no sign for ${Math.round(patienceMs / 1000)} s.`))
      }, patienceMs)
    })
    try {
      return await Promise.race([call(running.walker), running.lost, silence])
    } finally {
      clearTimeout(timer)
      silence.catch(() => {})
    }
  }

  /** Prepares a job unless it is prepared already; `tables` are copied, so that others may have them too. */
  async prepare(job: WalkJob, patienceMs: number, tables?: ArrayBuffer | null): Promise<WalkReady> {
    const own = tables ? tables.slice(0) : null
    const ready = await this.ask(walker => walker.prepare(job, own ? transfer(own, [own]) : null) as Promise<WalkReady>, patienceMs)
    this.prepared = job
    return ready
  }

  /** True while the worker lives and has this job prepared. */
  has(job: WalkJob): boolean {
    return this.prepared === job
  }

  exportTables(patienceMs: number): Promise<ArrayBuffer | null> {
    return this.ask(walker => walker.exportTables() as Promise<ArrayBuffer | null>, patienceMs)
  }

  walk(from: number, to: number, patienceMs: number): Promise<ReplicateBlock> {
    return this.ask(walker => walker.walk(from, to) as Promise<ReplicateBlock>, patienceMs)
  }

  conclude(...input: Parameters<Walker['conclude']>): ReturnType<Remote<Walker>['conclude']> {
    return this.ask(walker => walker.conclude(...input), 120_000)
  }

  exact(...input: Parameters<Walker['exact']>): Promise<ReturnType<Walker['exact']>> {
    return this.ask(walker => walker.exact(...input) as Promise<ReturnType<Walker['exact']>>, 120_000)
  }
}
