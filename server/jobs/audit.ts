/** Walks blocks of a saved run again, drawn after it was received, and compares digests: who sends must not know which. */
import { randomInt } from 'node:crypto'
import { KERNEL_VERSION } from '../../workers/kernel/version'
import type { AuditedRun, AuditFinding } from '../services/run-audit'

export interface Replayer {
  prepare(run: AuditedRun): Promise<void>
  /** Digest of the block as this machine walks it. */
  walk(from: number, to: number): Promise<string>
}

/** Positions 0…n−1 in an order that nobody can foresee. */
export function drawOrder(count: number): number[] {
  const order = Array.from({ length: count }, (_, i) => i)
  for (let i = count - 1; i > 0; i -= 1) {
    const j = randomInt(i + 1)
    ;[order[i], order[j]] = [order[j]!, order[i]!]
  }
  return order
}

/**
 * A short run is walked whole, a longer one as far as the budget lasts; at least one block is always walked.
 * The chance that a single forged block is among k of n drawn ones is k/n.
 */
export async function auditRun(run: AuditedRun, replayer: Replayer, budgetMs: number): Promise<AuditFinding> {
  if (run.engineVersion !== KERNEL_VERSION) return { state: 'cannot', blocksRedrawn: 0, detection: 0 }
  await replayer.prepare(run)
  const started = performance.now()
  let redrawn = 0
  for (const position of drawOrder(run.blocks.length)) {
    if (redrawn > 0 && performance.now() - started > budgetMs) break
    const block = run.blocks[position]!
    const digest = await replayer.walk(block.from, block.to)
    redrawn += 1
    if (digest !== block.digest)
      return { state: 'refused', blocksRedrawn: redrawn, detection: redrawn / run.blocks.length, note: `Block ${position} (replicates ${block.from} to ${block.to}) is not what this seed gives.` }
  }
  return { state: 'audited', blocksRedrawn: redrawn, detection: redrawn / run.blocks.length }
}
