/** The `moorage-scenario` document, version 1: the one schema that form, API, command line and worker read. */
import { z } from 'zod'
import { neutraliseText } from './text'

/** Ranges of single fields; joint limits (cost, tables) are judged in `walk/cost.ts`. Units stand in the names. */
export const SCENARIO_LIMITS = {
  spacingNm: [5, 500], diffusionUm2PerS: [1e-5, 100], densityPerUm3: [1, 30_000],
  rows: [1, 200], columns: [1, 200], sites: 10_000, marginSites: [4, 64], sizeUm: [0.02, 100], count: [1, 10_000],
  durationS: 3600, minSteps: 20, samples: 20_000, releases: 50, replicates: [1, 1_000_000], seedLength: 200,
  titleLength: 200, notesLength: 10_000, classNameLength: 60, ratePerS: 10_000,
} as const

/** Why a text cannot be a seed; null when it can. An emoji counts as one character. */
export function seedProblem(text: string): string | null {
  const length = [...text].length
  return length > SCENARIO_LIMITS.seedLength ? `A seed has at most ${SCENARIO_LIMITS.seedLength} characters; this has ${length}.` : null
}

/** Tells what is missing from what is no number. */
const numberWanted = (issue: { input?: unknown }) => issue.input === undefined ? 'Missing: a number is wanted here.' : 'A finite number is wanted here.'
const between = (range: readonly [number, number], unit: string) =>
  z.number({ error: numberWanted }).min(range[0], `Allowed: ${range[0]} to ${range[1]} ${unit}.`).max(range[1], `Allowed: ${range[0]} to ${range[1]} ${unit}.`)
const whole = (range: readonly [number, number], unit: string) =>
  between(range, unit).int(`A whole number of ${unit} is wanted here.`)
const fraction = (what: string) =>
  z.number({ error: numberWanted }).min(0, `${what} lies between 0 and 1.`).max(1, `${what} lies between 0 and 1.`)
const share = z.number({ error: numberWanted }).gt(0, 'A share is above 0.').lte(1, 'A share is at most 1.')
const className = z.string().transform(neutraliseText).pipe(z.string().min(1, 'A class needs a name.').max(SCENARIO_LIMITS.classNameLength))

export const MediumSchema = z.strictObject({
  spacingNm: between(SCENARIO_LIMITS.spacingNm, 'nm'),
  diffusionUm2PerS: between(SCENARIO_LIMITS.diffusionUm2PerS, 'µm²/s'),
  densityPerUm3: between(SCENARIO_LIMITS.densityPerUm3, '1/µm³'),
  crowding: z.enum(['independent', 'exclusive']),
})

const count = whole(SCENARIO_LIMITS.count, 'ribbons').default(1)
export const RibbonSchema = z.discriminatedUnion('shape', [
  z.strictObject({
    shape: z.literal('plate'),
    rows: whole(SCENARIO_LIMITS.rows, 'rows'),
    columns: whole(SCENARIO_LIMITS.columns, 'columns'),
    faces: z.union([z.literal(1), z.literal(2)], { error: 'A plate has 1 face (on a wall) or 2 (free).' }),
    classLayout: z.enum(['interleaved', 'rows']),
    count,
  }),
  z.strictObject({ shape: z.literal('isolated'), count }),
], { error: 'One of: plate, isolated.' })

const marginSites = whole(SCENARIO_LIMITS.marginSites, 'voxels')
const length = between(SCENARIO_LIMITS.sizeUm, 'µm')
export const ReservoirSchema = z.discriminatedUnion('supply', [
  z.strictObject({ supply: z.literal('stirred') }),
  z.strictObject({ supply: z.literal('held'), marginSites }),
  z.strictObject({ supply: z.literal('sealed'), sizeUm: z.tuple([length, length, length]) }),
], { error: 'One of: stirred, held, sealed.' })

export const SiteClassSchema = z.strictObject({
  name: className,
  share,
  attachProbability: fraction('A probability'),
  detachPerS: between([0, SCENARIO_LIMITS.ratePerS], '1/s').default(0),
  readyPerS: between([1e-6, SCENARIO_LIMITS.ratePerS], '1/s').nullable().default(null),
})
export const VesicleClassSchema = z.strictObject({
  name: className,
  share,
  attachFactor: fraction('A factor').default(1),
  mobilityFactor: fraction('A factor').default(1),
})
export const ScheduleSchema = z.strictObject({
  durationS: z.number({ error: numberWanted }).gt(0, 'A duration is above 0 s.').max(SCENARIO_LIMITS.durationS, `At most ${SCENARIO_LIMITS.durationS} s.`),
  sampleEveryMs: z.number({ error: numberWanted }).gt(0, 'An interval is above 0 ms.').max(SCENARIO_LIMITS.durationS * 1000),
  initialFill: fraction('The initial fill').default(0),
  releases: z.array(z.strictObject({
    atMs: z.number({ error: numberWanted }).gt(0, 'A release comes after the start.'),
    fraction: fraction('A fraction'),
  })).max(SCENARIO_LIMITS.releases).default([]),
  decline: z.strictObject({
    restFactor: fraction('A factor'),
    timeConstantS: between([1e-6, SCENARIO_LIMITS.durationS], 's'),
  }).nullable().default(null),
})

const sumsToOne = (classes: { share: number }[]) => Math.abs(classes.reduce((sum, one) => sum + one.share, 0) - 1) < 1e-9

/** Time step of the lattice, a²/(6D) [s], for a spacing [nm] and a diffusion coefficient [µm²/s]. */
export const stepSeconds = (medium: { spacingNm: number, diffusionUm2PerS: number }) =>
  (medium.spacingNm / 1000) ** 2 / (6 * medium.diffusionUm2PerS)
/** Occupancy of a voxel, ρa³ [1]. */
export const occupancyOf = (medium: { spacingNm: number, densityPerUm3: number }) =>
  medium.densityPerUm3 * (medium.spacingNm / 1000) ** 3

export const ScenarioSchema = z.strictObject({
  format: z.literal('moorage-scenario'),
  version: z.literal(1),
  title: z.string().transform(neutraliseText).pipe(z.string().min(1, 'A scenario needs a title.').max(SCENARIO_LIMITS.titleLength, `At most ${SCENARIO_LIMITS.titleLength} characters.`)),
  notes: z.string().max(SCENARIO_LIMITS.notesLength).default(''),
  medium: MediumSchema,
  ribbon: RibbonSchema,
  reservoir: ReservoirSchema,
  sites: z.array(SiteClassSchema).min(1, 'One or two kinds of site.').max(2, 'One or two kinds of site.'),
  vesicles: z.array(VesicleClassSchema).min(1, 'One or two kinds of vesicle.').max(2, 'One or two kinds of vesicle.'),
  schedule: ScheduleSchema,
}).superRefine((scenario, context) => {
  const refuse = (path: (string | number)[], message: string) => context.addIssue({ code: 'custom', path, message })
  const { medium, ribbon, sites, vesicles, schedule } = scenario
  const occupancy = occupancyOf(medium)
  if (occupancy >= 1) refuse(['medium', 'densityPerUm3'], `Occupancy ρa³ = ${occupancy.toPrecision(3)}; it must stay below 1: one vesicle a voxel at most.`)
  if (!sumsToOne(sites)) refuse(['sites'], 'The shares of the kinds of site must sum to 1.')
  if (!sumsToOne(vesicles)) refuse(['vesicles'], 'The shares of the kinds of vesicle must sum to 1.')
  if (ribbon.shape === 'isolated' && sites.length > 1) refuse(['sites'], 'An isolated site is of one kind.')
  if (ribbon.shape === 'plate' && ribbon.rows * ribbon.columns * ribbon.faces > SCENARIO_LIMITS.sites)
    refuse(['ribbon', 'rows'], `rows × columns × faces = ${ribbon.rows * ribbon.columns * ribbon.faces} sites; at most ${SCENARIO_LIMITS.sites}.`)
  const step = stepSeconds(medium)
  if (schedule.durationS < SCENARIO_LIMITS.minSteps * step * (1 - 1e-9))
    refuse(['schedule', 'durationS'], `At least ${SCENARIO_LIMITS.minSteps} steps of ${(step * 1000).toPrecision(3)} ms, that is ${(SCENARIO_LIMITS.minSteps * step).toPrecision(3)} s.`)
  if (schedule.sampleEveryMs > schedule.durationS * 1000)
    refuse(['schedule', 'sampleEveryMs'], 'The sampling interval is longer than the duration.')
  else if (schedule.durationS * 1000 / schedule.sampleEveryMs > SCENARIO_LIMITS.samples)
    refuse(['schedule', 'sampleEveryMs'], `At most ${SCENARIO_LIMITS.samples} samples; this asks for ${Math.ceil(schedule.durationS * 1000 / schedule.sampleEveryMs)}.`)
  schedule.releases.forEach((release, i) => {
    if (release.atMs >= schedule.durationS * 1000) refuse(['schedule', 'releases', i, 'atMs'], 'A release comes before the end.')
    if (i > 0 && release.atMs <= schedule.releases[i - 1]!.atMs) refuse(['schedule', 'releases', i, 'atMs'], 'Releases stand in order of time.')
  })
})

/** A scenario with every default filled in. */
export type Scenario = z.output<typeof ScenarioSchema>
/** A scenario as a person or a file may give it. */
export type ScenarioInput = z.input<typeof ScenarioSchema>
