/** The main thread's side of the examining threads: started on first need, replaced after a fault, ended when idle. */
import { Worker } from 'node:worker_threads'
import examinerUrl from 'virtual:moorage-examiner'
import { problem } from '../utils/problem'
import type { ExaminerAnswer, ExaminerJob, ExaminerValues } from './examiner-protocol'

/** A thread holds tables of up to 256 MB: it is not kept for nothing [ms]. */
const IDLE_MS = 60_000

type Pending = { resolve: (value: unknown) => void, reject: (error: Error) => void, timer: NodeJS.Timeout }

export class Examiner {
  private worker: Worker | undefined
  private readonly pending = new Map<number, Pending>()
  private last = 0
  private idle: NodeJS.Timeout | undefined
  private turn: Promise<unknown> = Promise.resolve()

  /** Runs several jobs of one matter without another's in between. */
  alone<T>(work: () => Promise<T>): Promise<T> {
    const mine = this.turn.then(work)
    this.turn = mine.catch(() => {})
    return mine
  }

  ask<Kind extends ExaminerJob['kind']>(job: Extract<ExaminerJob, { kind: Kind }>, patienceMs: number): Promise<ExaminerValues[Kind]> {
    clearTimeout(this.idle)
    const worker = this.worker ??= this.start()
    const id = ++this.last
    return new Promise<ExaminerValues[Kind]>((resolve, reject) => {
      const timer = setTimeout(() => this.end(new Error(`examiner: no answer within ${patienceMs} ms`)), patienceMs)
      this.pending.set(id, { resolve: value => resolve(value as ExaminerValues[Kind]), reject, timer })
      worker.postMessage({ ...job, id })
    })
  }

  private start(): Worker {
    const worker = new Worker(examinerUrl())
    worker.unref()
    worker.on('message', (answer: ExaminerAnswer) => this.settle(answer))
    worker.on('error', error => this.worker === worker && this.end(error))
    worker.on('exit', () => this.worker === worker && this.end(new Error('examiner: the thread ended')))
    return worker
  }

  private settle({ id, value, refused, failed }: ExaminerAnswer) {
    const waiting = this.pending.get(id)
    if (!waiting) return
    this.pending.delete(id)
    clearTimeout(waiting.timer)
    if (refused) waiting.reject(problem(refused.code, refused.parts))
    else if (failed !== undefined) waiting.reject(new Error(failed))
    else waiting.resolve(value)
    if (this.pending.size === 0) this.idle = setTimeout(() => this.end(new Error('examiner: idle')), IDLE_MS).unref()
  }

  /** Ends the thread; what waits for it is told why. */
  end(reason: Error) {
    const { worker } = this
    this.worker = undefined
    clearTimeout(this.idle)
    for (const { reject, timer } of this.pending.values()) {
      clearTimeout(timer)
      reject(reason)
    }
    this.pending.clear()
    void worker?.terminate()
  }
}
