/** The sentences of the bench's home, made from what the server lists. */
import type { BenchHome } from '#shared/schemas/api/bench'
import type { Outcome } from '#shared/schemas/outcome'
import type { Role } from '#shared/permissions'
import { formatInterval, formatNumber, formatWithError, type NumberStyle } from '#shared/units'
import type { SentencePart } from './sentenceParts'

type Verdict = Outcome['agreement']['verdict']
export type HomeScenario = BenchHome['scenarios'][number]
export type HomeChange = BenchHome['changes'][number]

export const VERDICT_CLASS: Record<Verdict, string> = { agrees: 'good', slower: 'caution', faster: 'caution', undecided: 'caution' }

/** `1.129 ± 0.024`; an interval that is clearly uneven stands as its two ends. */
export function plusMinus(given: { value: number | null, low: number | null, high: number | null }, style: NumberStyle = {}): { value: string, error: string } {
  if (given.value === null) return { value: '–', error: '' }
  if (given.low === null || given.high === null) return { value: formatNumber(given.value, style), error: '' }
  const [below, above] = [given.value - given.low, given.high - given.value]
  if (Math.max(below, above) > 1.5 * Math.min(below, above)) return { value: formatNumber(given.value, style), error: `(${formatInterval(given.low, given.high, style)})` }
  const [value = '', error] = formatWithError(given.value, (below + above) / 2, style).split(' ± ')
  return { value, error: error ? `± ${error}` : '' }
}

/** What the newest run of the bench found, in one sentence; before any run, what stands here. */
export function homeSentence(home: BenchHome, style: NumberStyle = {}): SentencePart[] {
  const ran = home.scenarios.filter(one => one.lastRun).sort((a, b) => b.lastRun!.number - a.lastRun!.number)[0]
  if (!ran?.lastRun) {
    const count = home.scenarioCount === 1 ? 'One scenario stands' : `${home.scenarioCount} scenarios stand`
    return [{ text: `${count} on this bench; ` }, { text: 'none has been run yet.', strong: true }]
  }
  const { ratio, verdict, number } = ran.lastRun
  const interval = ratio.low === null || ratio.high === null ? '' : ` (${formatInterval(ratio.low, ratio.high, style)})`
  const value = ratio.value === null ? 'an unknown ratio' : formatNumber(ratio.value, style)
  const start = { text: `Run ${number} of ${ran.title}: ` }
  const tail = { text: interval, quiet: true }
  if (verdict === 'agrees') return [start, { text: 'the walk ' }, { text: 'agrees with the closed form', strong: true }, { text: `, ratio ${value}` }, tail, { text: '.' }]
  if (verdict === 'undecided') return [start, { text: 'ratio ' }, { text: value, strong: true }, tail, { text: ' leaves it ' }, { text: 'undecided', strong: true }, { text: ' whether the closed form holds.' }]
  return [start, { text: 'refill takes ' }, { text: `${value} times as long`, strong: true }, { text: ' as the closed form says' }, tail, { text: '.' }]
}

const CHANGES: Record<HomeChange['kind'], (change: HomeChange) => { does: string, link: string, to: string, rest: string }> = {
  'scenario-created': change => ({ does: 'made', link: change.title, to: `/scenarios/${change.scenarioId}`, rest: '' }),
  'revision-saved': change => ({ does: `saved revision ${change.revision} of`, link: change.title, to: `/scenarios/${change.scenarioId}`, rest: '' }),
  'scenario-binned': change => ({ does: 'put', link: change.title, to: '/scenarios?bin=1', rest: ' in the bin' }),
  'scenario-restored': change => ({ does: 'took', link: change.title, to: `/scenarios/${change.scenarioId}`, rest: ' out of the bin' }),
  'run-saved': change => ({ does: 'saved', link: `Run ${change.runNumber}`, to: `/runs/${change.runId}`, rest: ` of ${change.title}` }),
  'run-binned': change => ({ does: 'put', link: `Run ${change.runNumber}`, to: '/runs?bin=1', rest: ` of ${change.title} in the bin` }),
  'recording-kept': change => ({ does: 'kept the recording', link: change.title, to: `/recordings/${change.recordingId}`, rest: '' }),
  'recording-changed': change => ({ does: 'changed the recording', link: change.title, to: `/recordings/${change.recordingId}`, rest: '' }),
  'recording-binned': change => ({ does: 'put the recording', link: change.title, to: '/recordings?bin=1', rest: ' in the bin' }),
  'weigh-up-saved': change => ({ does: change.revision === 1 ? 'weighed' : 'weighed again', link: change.title, to: `/weigh-ups/${change.weighUpId}`, rest: '' }),
  'weigh-up-binned': change => ({ does: 'put the weigh-up', link: change.title, to: '/weigh-ups?bin=1', rest: ' in the bin' }),
}
/** Whatever lies in the bin now is looked for there. */
const BINS = { 'scenario': '/scenarios?bin=1', 'run': '/runs?bin=1', 'recording': '/recordings?bin=1', 'weigh-up': '/weigh-ups?bin=1' } as const
export function changeWords(change: HomeChange) {
  const words = CHANGES[change.kind](change)
  return change.binned ? { ...words, to: BINS[change.binned] } : words
}

/** People by role, one line a role: `Tomasz Birk, Ngozi Hale` · `members`. */
export function peopleByRole(members: BenchHome['members']): { names: string, role: string }[] {
  const plural: Record<Role, [string, string]> = { lead: ['lead', 'leads'], member: ['member', 'members'], trainee: ['trainee', 'trainees'], guest: ['guest', 'guests'] }
  return (Object.keys(plural) as Role[]).flatMap((role) => {
    const names = members.filter(one => one.role === role).map(one => one.name)
    return names.length ? [{ names: names.join(', '), role: plural[role][names.length === 1 ? 0 : 1] }] : []
  })
}
