/** Outcome pages: sentences, series, files, parts, comparison, what would be lost. On real walks of the reference kernel. */
import { describe, expect, it } from 'vitest'
import { ScenarioSchema } from '../../../shared/schemas/scenario'
import { buildOutcome } from '../../../shared/walk/outcome'
import { compilePlan } from '../../../shared/walk/plan'
import { seedWords } from '../../../shared/walk/streams'
import { OutcomeDesk } from '../../../app/utils/outcomeDesk'
import { isSettled, newLocalRun, makeLocalId, makeSeed, wantedReplicates, wouldBeLost } from '../../../app/utils/localRun'
import { compareOutcomes } from '../../../app/utils/outcomeComparison'
import { curvesCsv, firstAttachmentCsv, replicatesCsv } from '../../../app/utils/outcomeFiles'
import { outcomeClosedForm, outcomeKinds, outcomeWalk } from '../../../app/utils/outcomeSeries'
import { subjectNames, subjectOfLocal, type OutcomeSubject } from '../../../app/utils/outcomeSubject'
import { outcomeMethods, outcomeNumbers, pText, soFarSentence, verdictSentence } from '../../../app/utils/outcomeWords'
import { layParts, partLabels, partsOfOutcome } from '../../../app/utils/partsBar'
import { stepCheck } from '../../../app/utils/stepCheck'
import { tauMoves } from '../../../app/utils/tauMoves'
import { walkReference } from '../../../workers/reference/walk'

const scenario = ScenarioSchema.parse({
  format: 'moorage-scenario', version: 1, title: 'Small plate',
  medium: { spacingNm: 50, diffusionUm2PerS: 0.1, densityPerUm3: 800, crowding: 'independent' },
  ribbon: { shape: 'plate', rows: 2, columns: 3, faces: 2, classLayout: 'interleaved' }, reservoir: { supply: 'held', marginSites: 4 },
  sites: [{ name: 'quick', share: 0.5, attachProbability: 0.6 }, { name: 'reluctant', share: 0.5, attachProbability: 0.1 }],
  vesicles: [{ name: 'vesicle', share: 1 }], schedule: { durationS: 4, sampleEveryMs: 40, initialFill: 0.1 },
})
const plan = compilePlan(scenario)
const engine = { name: 'moorage-walk', version: '1.0.0', algorithm: 'step' } as const
function walked(seed: string, replicates: number, partial = false) {
  const [low, high] = seedWords(seed)
  const blocks = [walkReference(plan, low, high, 0, replicates)]
  return { blocks, outcome: buildOutcome({ scenario, seed, engine, blocks, partial, landingError: 0 }) }
}
const { outcome, blocks } = walked('a', 40)
const one = walked('a', 1).outcome
const text = (parts: readonly { text: string }[]) => parts.map(part => part.text).join('')
const subject = (of: typeof outcome, more: Partial<OutcomeSubject> = {}): OutcomeSubject => ({
  outcome: of, scenario, title: scenario.title, scenarioId: 's', revision: 1, number: null, runId: null, localId: 'l', replicatesAsked: of.replicates, durationMs: 1, workers: 2, who: null, at: '2026-12-01T12:00:00Z', audit: null, ...more,
})

describe('sentences', () => {
  it('put the finding first, then its interval, then the reason', () => {
    const sentence = text(verdictSentence({ ...outcome, ratio: { value: 1.129, low: 1.105, high: 1.153 }, agreement: { ...outcome.agreement, verdict: 'slower', reason: 'own-neighbourhood' } }))
    expect(sentence).toBe('Refill takes 1.13 times as long as the closed form says (95\u00A0% interval 1.10 to 1.15), because the ribbon empties its own neighbourhood.')
  })
  it('say how many replicates more would decide', () => {
    const sentence = text(verdictSentence({ ...outcome, ratio: { value: 1.029, low: 1.007, high: 1.05 }, agreement: { ...outcome.agreement, verdict: 'undecided', reason: 'none', replicatesToDecide: 240 } }))
    expect(sentence).toContain('touches the margin of 5 %')
    expect(sentence).toContain('200 replicates more would probably decide.')
  })
  it('claim no interval for one replicate, and no band', () => {
    expect(text(verdictSentence(one))).toContain('from one replicate: it has no interval and decides nothing')
    const series = outcomeWalk(one)
    expect(series.inner).toBeUndefined()
    expect(series.outer).toBeUndefined()
    expect(series.note).toBe('one replicate has no band')
  })
  it('name each kind with its number of sites, and what is still empty', () => {
    const sentence = text(outcomeNumbers(outcome))
    expect(sentence).toContain('The 6 quick sites refill with τ')
    expect(sentence).toContain('the 6 reluctant ones with τ')
    expect(sentence).toMatch(/At 4\u00A0s, .* of the sites are still empty\.$/)
  })
  it('give a methods sentence with seed, digests, step and replicates, marked when partial', () => {
    const methods = outcomeMethods(scenario, { ...outcome, partial: true }, 3)
    for (const part of ['2 × 3 sites on each of two faces', 'engine step 1.0.0', '0.6 at 6 quick sites and 0.1 at 6 reluctant sites', '40 replicates (partial)', 'seed ‘a’', '4.17\u00A0ms', outcome.scenarioDigest.slice(0, 12), '(revision 3)'])
      expect(methods).toContain(part)
  })
  it('write a small p as a power and a large one as a number', () => {
    expect(pText(0.31)).toEqual({ sign: '=', text: '0.31', power: null })
    expect(pText(4e-7)).toEqual({ sign: '<', text: '10', power: -6 })
    expect(pText(null)).toBeNull()
  })
  it('tell how far a run is in units that people use', () => {
    expect(text(soFarSentence(122, 200, 7_000, null))).toBe('122 of 200 replicates done, about 7\u00A0s left. The first numbers come with the first replicates.')
    expect(text(soFarSentence(1, 2, 331_000, null))).toContain('about 6\u00A0min left')
  })
})

describe('series and files', () => {
  it('draw the walk inside its inner band inside its outer band', () => {
    const { values, inner, outer } = outcomeWalk(outcome)
    values.forEach((value, i) => {
      expect(inner!.low[i]!).toBeLessThanOrEqual(value)
      expect(inner!.high[i]!).toBeGreaterThanOrEqual(value)
      expect(outer!.low[i]!).toBeLessThanOrEqual(inner!.low[i]! + 1e-12)
    })
    expect(outcomeKinds(outcome)).toHaveLength(2)
    expect(outcomeClosedForm(outcome).values.at(-1)!).toBeGreaterThan(0.5)
  })
  it('write every sample, every replicate and every bin', () => {
    expect(curvesCsv(outcome).trimEnd().split('\r\n')).toHaveLength(5 + 1 + outcome.timesS.length)
    const raw = replicatesCsv(outcome, blocks, plan.stepS).trimEnd().split('\r\n')
    expect(raw).toHaveLength(2 + 1 + 40)
    const sums = raw.slice(3).map(line => line.split(',').map(Number)).reduce((sum, row) => sum + row[1]! + row[4]!, 0)
    expect(sums).toBe(outcome.classes.reduce((sum, kind) => sum + kind.events, 0))
    expect(firstAttachmentCsv(outcome).trimEnd().split('\r\n')).toHaveLength(1 + outcome.firstAttachment.histogram.length)
  })
  it('moves τ by 1/1.2 and 1/0.8 with each factor, and ends a probability at 1', () => {
    const moves = tauMoves(scenario)
    for (const move of moves.slice(0, 2)) {
      expect(move.higher).toBeCloseTo(1 / 1.2, 9)
      expect(move.lower).toBeCloseTo(1 / 0.8, 9)
    }
    const certain = tauMoves({ ...scenario, sites: scenario.sites.map(site => ({ ...site, attachProbability: 1 })) })
    expect(certain[3]).toMatchObject({ higher: 1, note: 'a probability ends at 1' })
  })
})

describe('what slows refill', () => {
  const classes = partsOfOutcome(outcome)
  it('parts τ so that the three add up to it', () => {
    expect(classes).toHaveLength(2)
    for (const kind of classes) expect(kind.collisionS + kind.failedHitsS + kind.depletion.valueS).toBeCloseTo(kind.tauS, 9)
  })
  it('draws bars inside the width and names every part once', () => {
    for (const width of [358, 860]) {
      const layout = layParts(classes, width)
      for (const kind of layout.classes) {
        const last = kind.parts.at(-1)!
        expect(last.left + last.width).toBeLessThanOrEqual(width + 1e-9)
        expect(partLabels(kind, width - 8).map(label => label.key)).toEqual(['collision', 'failed', 'depletion'])
      }
    }
  })
  it('says when depletion is not resolved', () => {
    const [kind] = layParts([{ name: 'x', tauS: 20.3, collisionS: 0.25, failedHitsS: 19.75, depletion: { valueS: 0.3, lowS: -0.3, highS: 0.9 } }], 860).classes
    expect(kind!.parts[2]!.value).toBe('0.3 ± 0.6 s, not resolved')
  })
})

describe('comparison', () => {
  it('agrees within both intervals together and not beyond', () => {
    const at = (value: number, half: number) => ({ ratio: { value, low: value - half, high: value + half } })
    expect(stepCheck(at(1.129, 0.024), at(1.109, 0.044))).toMatchObject({ agree: true })
    expect(stepCheck(at(1.0, 0.03), at(1.06, 0.04))!.half).toBeCloseTo(0.05, 12)
    expect(stepCheck(at(1.0, 0.03), at(1.06, 0.04))!.agree).toBe(false)
    expect(stepCheck(at(1, 0.1), { ratio: { value: 1, low: null, high: null } })).toBeNull()
  })
  it('names chance, scenario, engine and identity as causes', () => {
    const other = walked('b', 40).outcome
    const changed = { ...scenario, medium: { ...scenario.medium, diffusionUm2PerS: 0.2 } }
    const cases = [subject(outcome, { number: 1 }), subject(outcome, { number: 2 }), subject(other, { number: 3 }), subject({ ...other, scenarioDigest: 'x' }, { number: 4, scenario: changed }), subject({ ...other, engine: { ...engine, algorithm: 'touch' } }, { number: 5 })]
    const found = compareOutcomes(cases, subjectNames(cases))
    expect(found.against.map(row => row.cause)).toEqual(['identical', 'chance', 'scenario', 'engine'])
    expect(found.against[2]!.name).toBe('Run 4')
    const field = found.fields.find(row => row.values[3] !== row.values[0] && row.values[3]!.startsWith('0.2'))
    expect(field?.values[0]).toContain('0.1')
  })
  it('tells runs on this device apart by seed where titles are equal', () => {
    const names = subjectNames([subject(outcome), subject(walked('b', 20).outcome)])
    expect(new Set(names).size).toBe(2)
  })
})

describe('runs on this device', () => {
  const start = { scenario, scenarioId: null, revision: null, title: 'x', replicates: 200, algorithm: 'auto' } as const
  it('make a readable seed when none is given, and keep a given one as it is', () => {
    expect(makeSeed()).toMatch(/^[a-z2-9]{4}-[a-z2-9]{4}$/)
    expect(makeLocalId()).toMatch(/^[0-9a-f]{32}$/)
    expect(newLocalRun({ ...start, seed: ' kp-14 ' }, 'u', '').asked.seed).toBe('kp-14')
    expect(newLocalRun(start, 'u', '').asked.seed).not.toBe(newLocalRun(start, 'u', '').asked.seed)
  })
  it('would be lost while they go, or when neither device nor bench keeps them', () => {
    const run = newLocalRun(start, 'u', '')
    expect(wouldBeLost(run)).toBe(true)
    expect(wouldBeLost({ ...run, state: 'done', outcome, kept: 'memory' })).toBe(true)
    expect(wouldBeLost({ ...run, state: 'done', outcome, kept: 'device' })).toBe(false)
    expect(wouldBeLost({ ...run, state: 'done', outcome, kept: 'memory', send: { ...run.send, state: 'sent' } })).toBe(false)
    expect(wouldBeLost({ ...run, state: 'failed', outcome: null })).toBe(false)
  })
  it('are settled only when it is known where their outcome went', () => {
    const own = newLocalRun({ ...start, scenarioId: 's', revision: 1 }, 'u', '')
    const done = { ...own, state: 'done' as const, outcome }
    expect(own.send.state).toBe('unsent')
    expect(isSettled({ ...own, outcome })).toBe(false)
    expect(isSettled(done)).toBe(false)
    expect(isSettled({ ...done, send: { ...done.send, state: 'sending' } })).toBe(false)
    for (const state of ['sent', 'refused', 'file'] as const) expect(isSettled({ ...done, send: { ...done.send, state } })).toBe(true)
    expect(isSettled({ ...done, send: { ...done.send, reason: 'No connection.' } })).toBe(true)
    expect(isSettled({ ...done, outcome: null })).toBe(true)
    expect(isSettled({ ...newLocalRun(start, 'u', ''), state: 'done', outcome })).toBe(true)
    expect(newLocalRun({ ...start, scenarioId: 's', revision: 1, purpose: 'again' }, 'u', '').send.state).toBe('local')
  })
  it('repeat the blocks of an outcome that stopped early', () => {
    expect(wantedReplicates({ replicates: 200, ranges: [{ from: 0, to: 50 }, { from: 50, to: 81 }] })).toBe(81)
    expect(subjectOfLocal({ ...newLocalRun(start, 'u', ''), outcome: null })).toBeNull()
  })
  it('get the same outcome from the desk as from all blocks at once, and a body that carries them', () => {
    const desk = new OutcomeDesk()
    const [low, high] = seedWords('a')
    const parts = [walkReference(plan, low, high, 0, 25), walkReference(plan, low, high, 25, 40)]
    desk.open('r', scenario, 'a')
    desk.add('r', [parts[0]!])
    const looked = desk.outcome('r', { engine, partial: true, landingError: 0 }, parts[1])
    expect(looked.replicates).toBe(40)
    desk.add('r', [parts[1]!])
    const whole = desk.outcome('r', { engine, partial: false, landingError: 0 })
    expect(whole).toEqual(buildOutcome({ scenario, seed: 'a', engine, blocks: parts, partial: false, landingError: 0 }))
    const body = JSON.parse(desk.body('r', { revision: 1, engine, replicatesAsked: 40, partial: false, digest: whole.digest, durationMs: 1, workers: 1 })) as { blocks: unknown[], seed: string }
    expect(body).toMatchObject({ seed: 'a', blocks: [{ from: 0, to: 25 }, { from: 25, to: 40 }] })
    desk.close('r')
    expect(() => desk.blocks('r')).toThrow(/no books/)
  })
})
