/** `simulate`: the outcome document on one stream, problems on the other, and the exit code that says which. */
import { describe, expect, it, vi } from 'vitest'
import { OutcomeSchema, type Outcome } from '../../../shared/schemas/outcome'
import { CONTROL } from '../../fixtures/control'
import { buildOutcome } from '../../../shared/walk/outcome'
import { seedWords } from '../../../shared/walk/streams'
import { compilePlan } from '../../../shared/walk/plan'
import { engineOf, kernel, smallScenario, walkOutcome } from '../outcome/walked'
import { fileWith, run } from './support'

// A busy machine takes seconds to start a thread or a process.
vi.setConfig({ testTimeout: 180_000 })

const small = smallScenario()
const file = fileWith(small)

describe('a run', () => {
  it('prints the outcome document, the same with one worker and two', async () => {
    const [one, two] = await Promise.all(['1', '2'].map(workers => run('simulate', [file, '--seed', 'kp-14', '--replicates', '120', '--workers', workers, '--json'])))
    expect(one).toMatchObject({ code: 0, problems: '' })
    expect(two!.out).toBe(one!.out)
    const outcome = OutcomeSchema.parse(JSON.parse(one!.out))
    expect(outcome).toMatchObject({ seed: 'kp-14', replicates: 120, partial: false })
    expect(outcome.digest).toBe(walkOutcome(small, 'stirred', 'kp-14', 120).digest)
  })

  it('without a seed makes and prints one, that gives the same again; 200 replicates by default; notes on the error stream', async () => {
    const never = fileWith({ ...CONTROL, reservoir: { supply: 'stirred' }, sites: [{ name: 'never', share: 1, attachProbability: 0 }] })
    const { code, out, problems } = await run('simulate', [never])
    expect(code).toBe(0)
    expect(out).toContain('no vesicle attached')
    expect(out).toMatch(/200 replicates, seed “[0-9a-z]{10}”, engine stirred/)
    expect(problems).toMatch(/Note, sites\.0\.attachProbability: No vesicle attaches/)
  })

  it('walks by the algorithm asked for', async () => {
    const held = fileWith({ ...small, reservoir: { supply: 'held', marginSites: 4 } })
    const outcomes = await Promise.all(['touch', 'step'].map(algorithm => run('simulate', [held, '--replicates', '20', '--algorithm', algorithm, '--json'])))
    expect(outcomes.map(({ out }) => (JSON.parse(out) as Outcome).engine.algorithm)).toEqual(['touch', 'step'])
  })
})

describe('bad input ends with 2 and names the path', () => {
  const bent = (bend: object) => fileWith({ ...CONTROL, ...bend })
  const [site] = CONTROL.sites
  it.each([
    ['no such file', ['nowhere.json'], /nowhere\.json: There is no such file/],
    ['not JSON', [fileWith('{"format": ')], /This is not JSON/],
    ['not a number in JSON', [fileWith('{"medium": {"spacingNm": NaN}}')], /This is not JSON/],
    ['another document', [fileWith([1])], /A scenario document is wanted/],
    ['a probability above 1 and an unknown key', [bent({ sites: [{ ...site, share: 1, attachProbability: 1.0001, speed: 3 }] })], /sites\.0\.attachProbability: .*\n.*sites\.0\.speed: Unknown field/],
    ['text for a number', [bent({ medium: { ...CONTROL.medium, diffusionUm2PerS: '0,30' } })], /medium\.diffusionUm2PerS: A finite number/],
    ['occupancy of 1', [bent({ medium: { ...CONTROL.medium, densityPerUm3: 8000 } })], /medium\.densityPerUm3: Occupancy ρa³ = 1\.00/],
    ['a terminal that is too large', [bent({ reservoir: { supply: 'sealed', sizeUm: [40, 40, 40] } })], /reservoir\.sizeUm: .*at most 256 MB.* For example/],
    ['a terminal too small for its ribbon', [bent({ reservoir: { supply: 'sealed', sizeUm: [0.2, 2, 2] } })], /reservoir\.sizeUm\.0: The ribbon needs 6 voxels/],
    ['no replicates', [file, '--replicates', '0'], /replicates: .*“0” was read/],
    ['too many replicates', [file, '--replicates', '10000000'], /replicates: .*1 to 1000000/],
    ['half a replicate', [file, '--replicates', '12.5'], /replicates: A whole number/],
    ['a seed of 5,000 characters', [file, '--seed', 'x'.repeat(5000)], /seed: A seed has at most 200 characters/],
    ['an unknown algorithm', [file, '--algorithm', 'fast'], /algorithm: One of auto/],
    ['exclusion sampled from touch to touch', [bent({ medium: { ...CONTROL.medium, crowding: 'exclusive' } }), '--algorithm', 'touch'], /algorithm: Exclusive crowding needs the step-by-step walk/],
    ['an unknown option', [file, '--sead', 'x'], /--sead/],
    ['no file', [], /A scenario file is wanted/],
  ])('%s', async (_what, options, problem) => {
    const { code, out, problems } = await run('simulate', [...options, '--json'])
    expect({ code, out }).toEqual({ code: 2, out: '' })
    expect(problems).toMatch(problem)
    expect(problems).not.toMatch(/at .*\.ts:\d/)
  })
})

it('interrupted: the partial outcome, 130, equal to the same replicates walked in this process', async () => {
  const long = smallScenario({ reservoir: { supply: 'held', marginSites: 12 }, schedule: { durationS: 4, sampleEveryMs: 100 } })
  const held = fileWith(long)
  for (let waitMs = 4000; ; waitMs *= 2) {
    const { code, out } = await run('simulate', [held, '--seed', 'cut', '--replicates', '200000', '--workers', '2', '--algorithm', 'step', '--json'], waitMs)
    expect(code).toBe(130)
    if (out === '' && waitMs < 32_000) continue // a busy machine: not one replicate was done yet
    const outcome = OutcomeSchema.parse(JSON.parse(out))
    expect(outcome.partial).toBe(true)
    expect(outcome.blocks.at(-1)!.to).toBe(outcome.replicates)
    const walk = kernel.prepare(compilePlan(long), 'step'), [low, high] = seedWords('cut')
    const blocks = outcome.blocks.map(({ from, to }) => walk.run(low, high, from, to))
    expect(buildOutcome({ scenario: long, seed: 'cut', engine: engineOf('step'), blocks, partial: true, landingError: 0 }).digest).toBe(outcome.digest)
    return
  }
}, 180_000)
