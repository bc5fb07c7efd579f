/** The rows of the table: what is timed against what, with which goal. Larger ratios are better for the product. */
import { compilePlan } from '../../shared/walk/plan'
import type { Scenario } from '../../shared/schemas/scenario'
import type { Algorithm } from '../../shared/walk/types'
import type { PreparedWalk } from '../../workers/protocol'
import { exclusiveHeld, longSealed, shortSealed } from './jobs'
import { checkOf, freshWalk, SEED, walk } from './ours'
import { median, pairUp, timed, type Paired, type Side } from './pairs'
import { planFile } from './plan-file'
import type { Reference, Workshop } from './references'
import { attemptAgainstC } from './attempt-row'
import { twoWorkers } from './workers-row'

export type Need = 'gcc' | 'numpy' | 'idle'
/** `note` says what was scaled or how equal work was shown. */
export interface Measured extends Paired { note: string }
export interface Row {
  id: string
  name: string
  goal: number
  needs: Need[]
  measure(tools: Tools): Promise<Measured>
}
export interface Tools { workshop: Workshop, python: string | null }

const REPLICATES = 200

/** Time of a reference for replicates [0, few), scaled to all of them [ms]. */
const scaled = (reference: Reference, few: number): Side => async () => (await reference.ask(0, few)).milliseconds * REPLICATES / few

const plainWalk = (workshop: Workshop, scenario: Scenario) => workshop.c('walk', [planFile(compilePlan(scenario), SEED)])

async function refuseOtherWork(prepared: PreparedWalk, reference: Reference, few: number): Promise<void> {
  const mine = checkOf(prepared, 0, few), { check } = await reference.ask(0, few)
  if (mine !== check) throw new Error('The kernel and the C reference did not count the same; their times are of different work.')
}

/** The step-by-step walk in both languages; equal counts are demanded first. */
async function stepAgainstC({ workshop }: Tools, scenario: Scenario, replicates: number): Promise<Measured> {
  const prepared = await freshWalk(scenario, 'step'), reference = plainWalk(workshop, scenario)
  await refuseOtherWork(prepared, reference, 5)
  const paired = await pairUp(() => timed(() => walk(prepared, 0, replicates)), async () => (await reference.ask(0, replicates)).milliseconds)
  return { ...paired, note: `${replicates} replicates on both sides, counts equal bit for bit` }
}

/** Tables and 200 replicates from nothing [ms]. */
const cold = (scenario: Scenario, algorithm: Algorithm): Side => () => timed(async () => walk(await freshWalk(scenario, algorithm), 0, REPLICATES))

/** Whichever of the two samplers is sooner done with the short job from nothing. */
async function soonerCold(scenario: Scenario): Promise<Algorithm> {
  const times = { attempt: [] as number[], touch: [] as number[] }
  for (let i = 0; i < 4; i++)
    for (const algorithm of ['attempt', 'touch'] as const) {
      const milliseconds = await cold(scenario, algorithm)(i)
      if (i > 0) times[algorithm].push(milliseconds)
    }
  return median(times.attempt) <= median(times.touch) ? 'attempt' : 'touch'
}

async function shortCold({ workshop }: Tools): Promise<Measured> {
  const algorithm = await soonerCold(shortSealed)
  const paired = await pairUp(cold(shortSealed, algorithm), scaled(plainWalk(workshop, shortSealed), REPLICATES))
  return { ...paired, note: `by ${algorithm}, its tables included` }
}

async function shortWarm({ workshop }: Tools): Promise<Measured> {
  const prepared = await freshWalk(shortSealed, 'attempt')
  // Some milliseconds a call: fifty calls a round keep the clock's and the collector's grain out of it.
  const ours = async () => await timed(() => {
    for (let i = 0; i < 50; i++) walk(prepared, 0, REPLICATES)
  }) / 50
  const paired = await pairUp(ours, scaled(plainWalk(workshop, shortSealed), REPLICATES))
  return { ...paired, note: 'by attempt, tables cached; mean of fifty calls a round' }
}

async function shortNumpy({ workshop, python }: Tools): Promise<Measured> {
  const algorithm = await soonerCold(shortSealed)
  const numpy = workshop.numpy(python!, planFile(compilePlan(shortSealed), SEED))
  const paired = await pairUp(cold(shortSealed, algorithm), scaled(numpy, 40))
  return { ...paired, note: `by ${algorithm}, its tables included; numpy scaled from 40 replicates` }
}

async function longCold({ workshop }: Tools): Promise<Measured> {
  const paired = await pairUp(cold(longSealed, 'attempt'), scaled(plainWalk(workshop, longSealed), 6))
  return { ...paired, note: 'C scaled from 6 replicates' }
}

async function longTouch(): Promise<Measured> {
  const attempt = await freshWalk(longSealed, 'attempt'), touch = await freshWalk(longSealed, 'touch')
  walk(touch, 0, 1)
  const few = 6
  const paired = await pairUp(() => timed(() => walk(attempt, 0, REPLICATES)), async () => await timed(() => walk(touch, 0, few)) * REPLICATES / few)
  return { ...paired, note: `tables cached on both sides; touch scaled from ${few} replicates` }
}

export const ROWS: Row[] = [
  { id: 'attempt-c', name: 'attempt in WASM : the same in C, long sealed recovery, walk only', goal: 0.75, needs: ['gcc'], measure: attemptAgainstC },
  { id: 'step-c', name: 'plain walk in WASM : C, 54 sites, sealed 44³', goal: 0.6, needs: ['gcc'], measure: tools => stepAgainstC(tools, shortSealed, 50) },
  { id: 'exclusion-c', name: 'exclusion walk in WASM : C, 54 sites, held', goal: 0.7, needs: ['gcc'], measure: tools => stepAgainstC(tools, exclusiveHeld, 200) },
  { id: 'short-cold', name: '200 × 54 sites × 2 s with tables : plain C walk', goal: 18, needs: ['gcc'], measure: shortCold },
  { id: 'short-warm', name: '200 × 54 sites × 2 s, tables cached : plain C walk', goal: 400, needs: ['gcc'], measure: shortWarm },
  { id: 'short-numpy', name: '200 × 54 sites × 2 s with tables : numpy walk', goal: 60, needs: ['numpy'], measure: shortNumpy },
  { id: 'long-cold', name: 'long sealed recovery with tables : plain C walk', goal: 80, needs: ['gcc'], measure: longCold },
  { id: 'long-touch', name: 'long sealed recovery, tables cached : touch in WASM', goal: 100, needs: [], measure: longTouch },
  { id: 'workers-two', name: 'two workers : one, exclusion job', goal: 1.7, needs: ['idle'], measure: twoWorkers },
]
