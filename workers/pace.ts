/** How fast replicates come, how many to ask for at a time, and how long the rest will take. */

/** A chunk is meant to take this long: long enough to be worth asking for, short enough to show progress [ms]. */
const CHUNK_MS = 150
/** Longer calls would stay in the slow tier of a cold WASM engine. */
const MOST_PER_CHUNK = 50
/** Weight of the newest chunk in the running pace. */
const NEWEST = 0.3

export class Pace {
  private msPerReplicate: number | null = null
  private measured = 0

  /** @param estimatedMs - expected time of one replicate before any was walked [ms] */
  constructor(private readonly estimatedMs: number, private readonly mostPerChunk = MOST_PER_CHUNK) {}

  note(replicates: number, ms: number): void {
    const pace = ms / replicates
    this.msPerReplicate = this.msPerReplicate === null ? pace : NEWEST * pace + (1 - NEWEST) * this.msPerReplicate
    this.measured += replicates
  }

  private get current(): number {
    return this.msPerReplicate ?? this.estimatedMs
  }

  /** Replicates to ask for next; the first chunk is small, its pace being a guess. */
  chunk(): number {
    const wanted = Math.floor(CHUNK_MS / Math.max(this.current, 1e-6))
    return Math.max(1, Math.min(wanted, this.measured === 0 ? Math.min(10, this.mostPerChunk) : this.mostPerChunk))
  }

  /** How long to wait for a chunk before the worker counts as lost [ms]. */
  patienceMs(replicates: number): number {
    return Math.max(30_000, 20 * replicates * this.current)
  }

  /** Time that the rest takes with so many workers; null before the first chunk [ms]. */
  remainingMs(replicates: number, workers: number): number | null {
    return this.msPerReplicate === null ? null : replicates * this.msPerReplicate / Math.max(1, workers)
  }

  /** Measured over estimated; null before the first chunk [1]. */
  get factor(): number | null {
    return this.msPerReplicate === null ? null : this.msPerReplicate / this.estimatedMs
  }
}
