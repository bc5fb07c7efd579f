/** The sample of the front page: a few numbers of one scenario, its closed form at once. Nothing of it leaves the browser. */
import { SAMPLE_SCENARIO } from '#shared/almanac/demo-scenarios'
import { closedForm, closedFormFilled, siteTotal } from '#shared/kinetics/closed-form'
import { fieldProblems } from '#shared/schemas/problem'
import { ScenarioSchema, type Scenario, type ScenarioInput } from '#shared/schemas/scenario'

export type Supply = Scenario['reservoir']['supply']
export interface SampleNumbers {
  diffusion: number | undefined
  density: number | undefined
  spacing: number | undefined
  quickShare: number | undefined
  quick: number | undefined
  reluctant: number | undefined
  depletion: number | undefined
  supply: Supply
}

const RESERVOIRS: Record<Supply, Scenario['reservoir']> = {
  stirred: { supply: 'stirred' },
  held: { supply: 'held', marginSites: 12 },
  sealed: { supply: 'sealed', sizeUm: [2, 2, 2] },
}
/** Path of each field in the document, for what the schema says of it. */
export const SAMPLE_PATHS: Record<Exclude<keyof SampleNumbers, 'supply'>, string> = {
  diffusion: 'medium.diffusionUm2PerS', density: 'medium.densityPerUm3', spacing: 'medium.spacingNm',
  quickShare: 'sites.0.share', quick: 'sites.0.attachProbability', reluctant: 'sites.1.attachProbability', depletion: 'schedule.initialFill',
}

const start = (): SampleNumbers => ({
  diffusion: SAMPLE_SCENARIO.medium.diffusionUm2PerS, density: SAMPLE_SCENARIO.medium.densityPerUm3, spacing: SAMPLE_SCENARIO.medium.spacingNm,
  quickShare: SAMPLE_SCENARIO.sites[0]!.share, quick: SAMPLE_SCENARIO.sites[0]!.attachProbability, reluctant: SAMPLE_SCENARIO.sites[1]!.attachProbability,
  depletion: Number((1 - SAMPLE_SCENARIO.schedule.initialFill).toFixed(6)), supply: SAMPLE_SCENARIO.reservoir.supply,
})

/** The document that the numbers describe; a share of 1 or 0 leaves one kind of site. */
function documentOf(numbers: SampleNumbers): ScenarioInput {
  const share = numbers.quickShare ?? Number.NaN
  const sites = [
    { name: 'quick', share, attachProbability: numbers.quick ?? Number.NaN },
    { name: 'reluctant', share: Number((1 - share).toFixed(9)), attachProbability: numbers.reluctant ?? Number.NaN },
  ].filter(site => !(site.share === 0))
  return {
    ...SAMPLE_SCENARIO,
    medium: { ...SAMPLE_SCENARIO.medium, diffusionUm2PerS: numbers.diffusion ?? Number.NaN, densityPerUm3: numbers.density ?? Number.NaN, spacingNm: numbers.spacing ?? Number.NaN },
    reservoir: RESERVOIRS[numbers.supply], sites,
    schedule: { ...SAMPLE_SCENARIO.schedule, initialFill: Number((1 - (numbers.depletion ?? Number.NaN)).toFixed(9)) },
  }
}

/** Time at which half of the emptied sites are filled by the closed form [s]; null within the watched time. */
export function halfRefillS(scenario: Scenario): number | null {
  const total = siteTotal(scenario.ribbon)
  const wanted = total * (1 + scenario.schedule.initialFill) / 2
  const filledAt = (timeS: number) => closedFormFilled(scenario, [timeS]).filled.reduce((sum, row) => sum + row[0]!, 0)
  if (filledAt(scenario.schedule.durationS) < wanted) return null
  let low = 0, high = scenario.schedule.durationS
  for (let i = 0; i < 50; i++) {
    const middle = (low + high) / 2
    if (filledAt(middle) < wanted) low = middle
    else high = middle
  }
  return high
}

export function useSample() {
  const numbers = reactive(start())
  const parsed = computed(() => ScenarioSchema.safeParse(documentOf(numbers)))
  const problems = computed(() => parsed.value.success ? [] : fieldProblems(parsed.value.error.issues))
  /** The last numbers that make a scenario: curves never vanish while one is being typed. */
  const scenario = shallowRef<Scenario>(SAMPLE_SCENARIO)
  watch(parsed, (now) => {
    if (now.success) scenario.value = now.data
  }, { immediate: true })
  const form = computed(() => closedForm(scenario.value))
  const sites = computed(() => siteTotal(scenario.value.ribbon))
  const changed = computed(() => JSON.stringify(numbers) !== JSON.stringify(start()))
  const putBack = () => Object.assign(numbers, start())
  return { numbers, problems, scenario, form, sites, halfS: computed(() => halfRefillS(scenario.value)), changed, putBack }
}
