/** The product's side: the same kernel as in the browser, in this process, one thread. */
import { readFileSync } from 'node:fs'
import { compilePlan } from '../../shared/walk/plan'
import { seedWords } from '../../shared/walk/streams'
import type { Scenario } from '../../shared/schemas/scenario'
import type { Algorithm, ReplicateBlock } from '../../shared/walk/types'
import { createKernel } from '../../workers/engine'
import type { PreparedWalk } from '../../workers/protocol'

export const SEED = 'speed'
/** Short calls: WASM moves to its optimising tier between calls, never within one. */
const CHUNK = 25

let module: WebAssembly.Module | undefined

/** Compiles the kernel once. */
export async function kernelModule(): Promise<WebAssembly.Module> {
  module ??= await WebAssembly.compile(readFileSync(new URL('../../workers/kernel/kernel.wasm', import.meta.url)))
  return module
}

/** A prepared walk on a fresh instance, so that no table is left from before. */
export async function freshWalk(scenario: Scenario, algorithm: Algorithm): Promise<PreparedWalk> {
  const kernel = await createKernel(await kernelModule())
  return kernel.prepare(compilePlan(scenario), algorithm)
}

/** Walks replicates [from, to) in short calls. */
export function walk(prepared: PreparedWalk, from: number, to: number): ReplicateBlock[] {
  const [low, high] = seedWords(SEED)
  const blocks: ReplicateBlock[] = []
  for (let at = from; at < to; at += CHUNK) blocks.push(prepared.run(low, high, at, Math.min(to, at + CHUNK)))
  return blocks
}

/** FNV-1a over whole numbers, low 32 bits of each; tally.h folds the same numbers in the same order. */
function fold(hash: number, rows: number[][]): number {
  for (const row of rows) for (const value of row) hash = Math.imul(hash ^ (value >>> 0), 16777619) >>> 0
  return hash
}

/** One number for the counts of a single call, equal to the C reference's where the same walk was walked. */
export function checkOf(prepared: PreparedWalk, from: number, to: number): number {
  const [low, high] = seedWords(SEED)
  const { filledSum, filledSumSq, events, exposureSteps } = prepared.run(low, high, from, to)
  return [filledSum, filledSumSq, events, exposureSteps].reduce(fold, 2166136261)
}
