/** The outcome in words: whole sentences, a number never without its interval. */
import { describe, expect, it } from 'vitest'
import type { Outcome } from '../../../shared/schemas/outcome'
import { exactTestText, kindText, partsText, unfilledText, verdictText } from '../../../shared/walk/sentences'
import { smallScenario, walkOutcome } from './walked'

const base = walkOutcome(smallScenario(), 'stirred', 'words', 100)
const plain = (text: string) => text.replace(/[\u00A0\u202F]/g, ' ').replaceAll('\u2212', '-')
const saying = (ratio: Outcome['ratio'], agreement: Partial<Outcome['agreement']>, more: Partial<Outcome> = {}) => plain(verdictText({ ...base, ratio, agreement: { ...base.agreement, ...agreement }, ...more }))

describe('verdictText', () => {
  it.each([
    [saying({ value: 1.129, low: 1.105, high: 1.153 }, { verdict: 'slower', reason: 'own-neighbourhood' }), 'Refill takes 1.13 times as long as the closed form says (95 % interval 1.10 to 1.15), because the ribbon empties its own neighbourhood.'],
    [saying({ value: 1.004, low: 0.98, high: 1.029 }, { verdict: 'agrees', reason: 'none' }), 'The walk agrees with the closed form within ±5 %: ratio 1.00 (0.98 to 1.03).'],
    [saying({ value: 1.029, low: 1.007, high: 1.0504 }, { verdict: 'undecided', reason: 'none', replicatesToDecide: 460 }, { replicates: 200 }), 'Undecided: 1.029 (1.01 to 1.05) touches the margin of 5 %; 260 replicates more would probably decide.'],
    [saying({ value: 1.2, low: null, high: null }, { verdict: 'undecided', reason: 'too-few' }, { replicates: 1 }), 'Undecided: ratio 1.20 from a single replicate; an interval needs at least two.'],
    [saying({ value: null, low: null, high: null }, { verdict: 'undecided', reason: 'too-few' }), 'Undecided: no vesicle attached in the time that was walked.'],
    [saying({ value: 0.9, low: 0.88, high: 0.92 }, { verdict: 'faster', reason: 'exclusion' }), 'Refill takes 0.900 times as long as the closed form says (95 % interval 0.88 to 0.92), because vesicles that keep each other apart arrive more evenly.'],
    [saying({ value: 1.5, low: 1.4, high: 1.6 }, { verdict: 'slower', reason: 'finite-pool' }), 'Refill takes 1.50 times as long as the closed form says (95 % interval 1.40 to 1.60), because the vesicles of the terminal are used up.'],
  ])('%s', (said, wanted) => expect(said).toBe(wanted))
})

it('says τ of a kind with its interval and the closed form, and what did not happen', () => {
  const [kind] = base.classes
  expect(plain(kindText({ ...kind!, tau: { valueS: 0.842, lowS: 0.82, highS: 0.87 }, closedFormTauS: 0.8333 }))).toBe('The 20 site sites refill with τ 842 ms (820 to 870); the closed form says 833 ms.')
  expect(kindText({ ...kind!, tau: { valueS: null, lowS: null, highS: null } })).toMatch(/did not refill/)
  expect(kindText({ ...kind!, sites: 0 })).toMatch(/rounds away/)
})

it('says parts, rest and test', () => {
  expect(partsText(base)).toMatch(/waiting for a hit .* hits that fail .* what the walk adds .*\(.* to .*\)/)
  expect(plain(unfilledText(base))).toMatch(/^At 1\.50 s, \d.* % of the sites are empty\.$/)
  expect(exactTestText(base)).toMatch(/p = 0\.\d+/)
  expect(exactTestText({ ...base, agreement: { ...base.agreement, pValue: 1e-9 } })).toContain('p < 10⁻⁶')
})
