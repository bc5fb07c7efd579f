/** What a worker does, whatever starts it: compiles a plan, prepares the kernel, walks ranges, makes outcomes. */
import { exactIsolatedFilled, notExactBecause } from '../shared/kinetics/isolated'
import { scenarioDigest } from '../shared/walk/digest'
import { buildOutcome } from '../shared/walk/outcome'
import { compilePlan } from '../shared/walk/plan'
import { seedWords } from '../shared/walk/streams'
import { createKernel } from './engine'
import type { Kernel, PreparedWalk, Walker } from './protocol'

/** Prepared scenarios kept for a person who goes back and forth between a few. */
const KEPT = 4
/** Tables that took less than this to build are not worth a hand-over [ms]. */
const WORTH_HANDING_OVER_MS = 20

/** A walker over a kernel that is loaded once, on first need. */
export function createWalker(load: () => Promise<WebAssembly.Module | BufferSource>): Walker {
  let kernel: Promise<Kernel> | undefined
  const kept = new Map<string, PreparedWalk>()
  let current: { walk: PreparedWalk, words: [number, number], prepareMs: number } | undefined

  function remember(key: string, walk: PreparedWalk): void {
    kept.delete(key)
    kept.set(key, walk)
    if (kept.size > KEPT) kept.delete(kept.keys().next().value!)
  }

  return {
    async prepare({ scenario, algorithm, seed }, tables) {
      const ready = await (kernel ??= load().then(createKernel))
      const started = performance.now()
      const key = `${algorithm} ${scenarioDigest(scenario)}`
      const known = kept.get(key)
      const walk = known ?? ready.prepare(compilePlan(scenario), algorithm)
      if (!known && tables) walk.adoptTables(tables)
      remember(key, walk)
      const words = seedWords(seed)
      walk.run(words[0], words[1], 0, 0) // no replicate, but tables that were not adopted are built here and not in the first chunk
      const { tableBytes, landingError } = walk
      current = { walk, words, prepareMs: performance.now() - started }
      return { version: ready.version, tableBytes, landingError, prepareMs: current.prepareMs }
    },
    exportTables() {
      return current && current.prepareMs >= WORTH_HANDING_OVER_MS ? current.walk.exportTables() : null
    },
    walk(from, to) {
      if (!current) throw new Error('walk: nothing is prepared')
      return current.walk.run(current.words[0], current.words[1], from, to)
    },
    conclude(scenario, { seed, engine, blocks, partial, landingError }) {
      return buildOutcome({ scenario, seed, engine, blocks, partial, landingError })
    },
    exact(scenario) {
      if (notExactBecause(scenario) !== null) return null
      const plan = compilePlan(scenario)
      const found = exactIsolatedFilled(scenario, plan)
      return found && { timesS: Array.from(plan.sampleSteps, step => step * plan.stepS), filled: found.filled, tauS: found.tauS }
    },
  }
}
