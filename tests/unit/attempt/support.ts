/** Plans of stated boxes, a kernel, and full lattice solves in f64 that the attempt sampler's tables are held against. */
import { readFileSync } from 'node:fs'
import { FLAG, hopOffsets, plateInBox } from '../../../shared/walk/geometry'
import { classesOfSites } from '../../../shared/walk/layout'
import type { WalkPlan } from '../../../shared/walk/types'
import type { TableSet } from '../../../workers/attempt-tables'
import { KernelHost } from '../../../workers/host'

const kernelBytes = () => readFileSync(new URL('../../../workers/kernel/kernel.wasm', import.meta.url))

/** A bare instance of the kernel. */
export async function kernelHost(): Promise<KernelHost> {
  return new KernelHost(await WebAssembly.instantiate(await WebAssembly.compile(kernelBytes()), {}))
}

export interface BoxSpec {
  size: [number, number, number]
  /** Columns, rows, faces. */
  plate: [number, number, 1 | 2]
  supply: 'held' | 'sealed'
  occupancy: number
  /** Attachment probability per site class; with two classes the first has `share` of the sites. */
  probabilities: number[]
  share?: number
  steps: number
  sampleEvery?: number
  layout?: 'interleaved' | 'rows'
}

/** A plan of a stated box, one vesicle class. */
export function planOf(spec: BoxSpec, more: Partial<WalkPlan> = {}): WalkPlan {
  const { size, plate: [columns, rows, faces], supply, steps } = spec
  const box = plateInBox(size, {
    columns, rows, faces, x: Math.floor((size[0] - columns) / 2), y: Math.floor((size[1] - rows) / 2), z: faces === 1 ? 0 : Math.floor((size[2] - 1) / 2),
  }, supply)
  const siteCount = columns * rows * faces, first = spec.probabilities.length === 2 ? Math.round(siteCount * (spec.share ?? 0.6)) : siteCount
  const sitesPerClass = spec.probabilities.length === 2 ? [first, siteCount - first] : [siteCount], every = spec.sampleEvery ?? 5
  const histogramBinSteps = Math.ceil(steps / 512)
  return {
    supply, crowding: 'independent', ...box, siteCount, sitesPerClass, classOfSite: classesOfSites(sitesPerClass, spec.layout ?? 'interleaved'),
    stepS: 1e-3, steps, sampleSteps: Uint32Array.from({ length: Math.floor(steps / every) + 1 }, (_, i) => i * every), occupancy: spec.occupancy,
    vesicles: [{ share: 1, attachFactor: 1, mobilityFactor: 1, number: supply === 'sealed' ? Math.round(spec.occupancy * box.freeVoxels) : null }],
    attachProbability: spec.probabilities.map(p => [p]), initialFill: 0, releases: [],
    detachPerStep: spec.probabilities.map(() => 0), readyPerStep: spec.probabilities.map(() => null), decline: null,
    histogramBinSteps, histogramBins: Math.ceil(steps / histogramBinSteps), ...more,
  }
}

/** [step − 1][site]: chance of the next effective attempt at that step and site, by walking the expectation of one vesicle through the whole box in f64. */
export function fullLaw(plan: WalkPlan, start: number, steps: number, attemptChance: number, mobility = 1): Float64Array[] {
  const offsets = hopOffsets(plan.nx, plan.ny), { flags } = plan, free: number[] = [], blocked = new Float64Array(flags.length)
  flags.forEach((flag, p) => {
    if (flag !== FLAG.free) return
    free.push(p)
    offsets.forEach((offset, d) => {
      const beyond = flags[p + offset]!
      if (beyond === FLAG.reflecting || beyond === FLAG.sites) blocked[p] = blocked[p]! + (plan.siteBehind[6 * p + d]! >= 0 ? 1 - attemptChance : 1)
    })
  })
  let here = new Float64Array(flags.length), next = new Float64Array(flags.length)
  const laws: Float64Array[] = [], [a, b, c, d, e, f] = offsets as unknown as [number, number, number, number, number, number]
  here[plan.voxelOfSite[start]!] = 1
  for (let step = 1; step <= steps; step++) {
    laws.push(Float64Array.from(plan.voxelOfSite, p => here[p]! * attemptChance / 6 * mobility))
    for (const p of free) {
      const sum = here[p + a]! + here[p + b]! + here[p + c]! + here[p + d]! + here[p + e]! + here[p + f]! + blocked[p]! * here[p]!
      next[p] = mobility * sum / 6 + (1 - mobility) * here[p]!
    }
    [here, next] = [next, here]
  }
  return laws
}

/** Probabilities that a row of alias cells stands for. */
export function rowLaw(cells: Uint32Array): Float64Array {
  const law = new Float64Array(cells.length)
  cells.forEach((cell, i) => {
    const own = (cell >>> 16) / 65536
    law[i]! += own / cells.length
    law[cell & 0xFFFF]! += (1 - own) / cells.length
  })
  return law
}

const slice = (host: KernelHost, set: TableSet, section: keyof TableSet['offsets'], from: number, count: number) => host.words(set.pointer + set.offsets[section] + 4 * from, count).slice()

/** The tabulated waiting law of a class of starts: explicit steps, then late first, late second, gone. */
export function waitLaw(host: KernelHost, set: TableSet, kind: number): Float64Array {
  return rowLaw(slice(host, set, 'waits', kind * (set.waitSteps + 3), set.waitSteps + 3))
}

/** The tabulated landing law of a class of starts after a wait, by site. */
export function landingLaw(host: KernelHost, set: TableSet, kind: number, wait: number): Float64Array {
  const bin = host.bytes(set.pointer + set.offsets.binOf, set.landingSteps + 1)[Math.min(wait, set.landingSteps)]!
  const [offset, length] = slice(host, set, 'rows', 2 * (2 * set.bins * kind + 2 * bin + wait % 2), 2) as unknown as [number, number]
  const order = new Uint16Array(host.bytes(set.pointer + set.offsets.order + 2 * kind * set.sites, 2 * set.sites).slice().buffer)
  const law = new Float64Array(set.sites)
  rowLaw(slice(host, set, 'cells', offset, length)).forEach((p, rank) => law[order[rank]!] = p)
  return law
}

/** One site of each class of starts. */
export function representatives(host: KernelHost, set: TableSet): number[] {
  const classOf = new Uint16Array(host.bytes(set.pointer + set.offsets.classOf, 2 * set.sites).slice().buffer)
  return Array.from({ length: set.classes }, (_, kind) => classOf.indexOf(kind))
}

/** Total-variation error per jump of the tables against full solves of `steps` steps. */
export function totalVariation(host: KernelHost, plan: WalkPlan, set: TableSet, kind: number, steps: number, mobility = 1): { landing: number, waiting: number, later: number } {
  const start = representatives(host, set)[kind]!, laws = fullLaw(plan, start, steps, set.attemptChance, mobility), waits = waitLaw(host, set, kind)
  const binOf = host.bytes(set.pointer + set.offsets.binOf, set.landingSteps + 1).slice(), known = new Map<string, Float64Array>()
  let landing = 0, waiting = 0, total = 0
  laws.forEach((law, i) => {
    const wait = i + 1, mass = law.reduce((sum, p) => sum + p, 0), bin = `${binOf[Math.min(wait, set.landingSteps)]} ${wait % 2}`
    const tabulated = known.get(bin) ?? landingLaw(host, set, kind, wait)
    known.set(bin, tabulated)
    law.forEach((p, site) => landing += Math.abs(p - mass * tabulated[site]!) / 2)
    if (i < set.waitSteps) waiting += Math.abs(mass - waits[i]!) / 2
    total += mass
  })
  return { landing, waiting, later: 1 - total }
}
