/** One run: hands chunks to members, takes chunks back, replaces lost workers, stops on abort or at its target. */
import { frameOf } from '../shared/walk/frame'
import { estimateCost } from '../shared/walk/cost'
import { blockRanges, blockSize } from '../shared/walk/merge'
import type { Algorithm, ReplicateBlock } from '../shared/walk/types'
import { KERNEL_VERSION } from './kernel/version'
import type { Member } from './member'
import { Pace } from './pace'
import type { RunOrder, RunProgress, RunResult, WalkJob } from './protocol'
import { RunBook, type Task } from './run-book'
import { regroup, Target, targetRanges } from './target'

/** Replicates that take this many workers down with them are not the workers' fault. */
const MOST_FAILURES = 3
/** Fewer replicates than this are not worth another worker. */
const LEAST_PER_MEMBER = 5

export class RunUnderWay {
  private readonly book: RunBook
  private readonly job: WalkJob
  private readonly target: Target | null
  private readonly started = performance.now()
  readonly pace: Pace
  private readonly setupMs: number
  private stopped = false
  private aborted = false
  private blocksWanted: number | null = null
  private landingError = 0
  private tables: Promise<ArrayBuffer | null> | undefined

  constructor(private readonly order: RunOrder, algorithm: Algorithm, private readonly members: readonly Member[], paceFactor: number, private readonly onProgress?: (progress: RunProgress) => void) {
    const { scenario, replicates, targetStandardError, ranges } = order
    this.target = targetStandardError !== undefined && !ranges ? new Target(frameOf(scenario), targetStandardError) : null
    this.book = new RunBook(ranges ?? (this.target ? targetRanges(replicates) : blockRanges(replicates)))
    this.job = { scenario, algorithm, seed: order.seed }
    const cost = estimateCost(scenario, replicates, order.algorithm, paceFactor)
    this.pace = new Pace(cost.secondsPerReplicate * 1000)
    this.setupMs = cost.setupSeconds * 1000
  }

  private get asked(): number {
    return this.book.ranges[this.book.ranges.length - 1]!.to
  }

  async go(signal?: AbortSignal): Promise<RunResult> {
    const stop = () => {
      this.stopped = this.aborted = true
      for (const member of this.members) member.end('the run was stopped')
    }
    if (signal?.aborted) this.stopped = this.aborted = true
    signal?.addEventListener('abort', stop, { once: true })
    try {
      const crew = this.members.slice(0, Math.min(this.members.length, Math.ceil(this.asked / LEAST_PER_MEMBER)))
      await Promise.all(crew.map(member => this.work(member).catch((fault) => {
        this.stopped = true // the others end after their chunk
        throw fault
      })))
    } finally {
      signal?.removeEventListener('abort', stop)
    }
    return this.result()
  }

  /** A member's share: chunk after chunk until none is left. */
  private async work(member: Member): Promise<void> {
    for (let task = this.next(); task; task = this.next()) {
      try {
        if (!member.has(this.job)) await this.prepare(member)
        await this.walk(member, task)
      } catch (fault) {
        if (this.stopped) return
        this.recover(member, task, fault)
      }
    }
  }

  private next(): Task | undefined {
    return this.stopped ? undefined : this.book.take(this.pace.chunk())
  }

  private recover(member: Member, task: Task, fault: unknown): void {
    // A trap leaves the kernel's memory in an unknown state: whatever the fault, the worker goes.
    member.end('lost')
    task.failures++
    if (task.failures >= MOST_FAILURES) {
      const reason = fault instanceof Error ? fault.message : String(fault)
      throw new Error(`Replicates ${task.from} to ${task.to - 1} were lost with ${task.failures} workers in a row: ${reason}`, { cause: fault })
    }
    this.book.giveBack(task)
  }

  /** The first member builds tables, the others wait for them and adopt. */
  private async prepare(member: Member): Promise<void> {
    const patienceMs = Math.max(60_000, 20 * this.setupMs)
    const hasTables = this.job.algorithm === 'attempt' || this.job.algorithm === 'touch'
    if (!hasTables || this.tables) {
      const ready = await member.prepare(this.job, patienceMs, await this.tables)
      this.landingError = ready.landingError
      return
    }
    let hand: (tables: ArrayBuffer | null) => void = () => {}
    this.tables = new Promise((resolve) => {
      hand = resolve
    })
    try {
      const ready = await member.prepare(this.job, patienceMs)
      this.landingError = ready.landingError
      hand(this.members.length > 1 ? await member.exportTables(patienceMs) : null)
    } finally {
      hand(null) // no effect once handed over; after a fault the others build their own
    }
  }

  private async walk(member: Member, task: Task): Promise<void> {
    if (this.stopped) return
    const { from, to } = task, asked = performance.now()
    const chunk = await member.walk(from, to, this.pace.patienceMs(to - from))
    if (this.aborted) return
    this.pace.note(to - from, performance.now() - asked)
    this.book.enter(task, chunk)
    this.judge()
    this.report()
  }

  private judge(): void {
    if (!this.target || this.blocksWanted !== null) return
    this.blocksWanted = this.target.met(this.book.wholeBlocks())
    if (this.blocksWanted !== null) this.stopped = true
  }

  private report(): void {
    const { replicatesDone } = this.book
    this.onProgress?.({
      replicatesDone, replicates: this.asked, blocks: this.book.prefix(), elapsedMs: performance.now() - this.started,
      remainingMs: this.pace.remainingMs(this.asked - replicatesDone, this.members.length), workers: this.members.length,
    })
  }

  private blocks(): ReplicateBlock[] {
    if (!this.target) return this.book.prefix()
    if (this.blocksWanted !== null || !this.aborted) {
      const met = this.book.wholeBlocks().slice(0, this.blocksWanted ?? undefined)
      return regroup(met, blockSize(met[met.length - 1]!.to))
    }
    const cut = this.book.prefix(), last = cut[cut.length - 1]
    return last ? regroup(cut, blockSize(Math.min(this.asked, Math.max(20_000, 2 ** Math.ceil(Math.log2(last.to / 20_000)) * 20_000)))) : []
  }

  private result(): RunResult {
    const blocks = this.blocks(), replicates = blocks[blocks.length - 1]?.to ?? 0
    const { seed } = this.order
    return {
      engine: { name: 'moorage-walk', version: KERNEL_VERSION, algorithm: this.job.algorithm }, seed, replicates, replicatesAsked: this.asked,
      partial: this.blocksWanted === null && replicates < this.asked, blocks, durationMs: performance.now() - this.started,
      workers: this.members.length, landingError: this.landingError,
    }
  }
}
