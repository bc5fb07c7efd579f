/** `expect`: closed form and preview, or the reason why there is none. */
import { describe, expect, it, vi } from 'vitest'
import type { Expectation } from '../../../scripts/support/expectation'
import { smallScenario, walkOutcome } from '../outcome/walked'
import { fileWith, run } from './support'

// A busy machine takes seconds to start a thread or a process.
vi.setConfig({ testTimeout: 180_000 })

const documentOf = async (content: unknown) => {
  const { code, out } = await run('expect', [fileWith(content), '--json'])
  expect(code).toBe(0)
  return JSON.parse(out) as Expectation
}

describe('expect --json', () => {
  it('an isolated site is solved exactly: 1.2957 times the closed form at ρa³ = 0.201386, s = 1 (own lattice solve)', async () => {
    const found = await documentOf(smallScenario({
      medium: { spacingNm: 45, diffusionUm2PerS: 0.11, densityPerUm3: 2210, crowding: 'independent' }, ribbon: { shape: 'isolated' },
      reservoir: { supply: 'held', marginSites: 10 }, sites: [{ name: 'one', share: 1, attachProbability: 1 }], schedule: { durationS: 2, sampleEveryMs: 20 },
    }))
    expect(found.preview).toMatchObject({ method: 'exact-linear', replicates: null })
    expect(Math.abs(found.preview!.tauS! / found.closedForm.tauS! - 1.29567)).toBeLessThan(5e-4)
    expect(found.preview!.filled).toHaveLength(found.timesS.length)
    expect(found.closedForm.filled).toHaveLength(found.timesS.length)
    expect(found.preview!.filled.at(-1)!).toBeLessThan(found.closedForm.filled.at(-1)!)
  })

  it('a plate is walked: seed “preview”, 400 replicates', async () => {
    const scenario = smallScenario({ reservoir: { supply: 'held', marginSites: 4 } })
    const found = await documentOf(scenario)
    expect(found.preview).toMatchObject({ method: 'walk-preview', replicates: 400 })
    const outcome = walkOutcome(scenario, 'attempt', 'preview', 400)
    expect(found.preview!.tauS).toBe(outcome.tau.valueS)
    expect(found.preview!.filled).toEqual(outcome.classes[0]!.meanFilled)
    expect(found.timesS).toEqual(outcome.timesS)
  })

  it('above 1,000 sites there is no preview, and a reason', async () => {
    const found = await documentOf(smallScenario({ ribbon: { shape: 'plate', rows: 40, columns: 30, faces: 1, classLayout: 'rows' }, reservoir: { supply: 'held', marginSites: 4 } }))
    expect(found.preview).toBeNull()
    expect(found.reason).toMatch(/1,?000 sites; this ribbon has 1,?200/)
    expect(found.closedForm.filled[0]).toBe(0)
  })
})

it('says it in words without --json, and refuses a wrong field with its path', async () => {
  const [words, wrong] = await Promise.all([run('expect', [fileWith(smallScenario())]), run('expect', [fileWith({ ...smallScenario(), version: 2 })])])
  expect(words).toMatchObject({ code: 0 })
  expect(words!.out).toMatch(/Closed form: τ 500.?ms/)
  expect(wrong).toMatchObject({ code: 2, out: '' })
  expect(wrong!.problems).toMatch(/^version: /m)
})
