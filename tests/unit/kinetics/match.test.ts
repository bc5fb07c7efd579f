// The inverse problem with its errors: worked by hand, and against sampling.
import { describe, expect, it } from 'vitest'
import { matchAttachment } from '../../../shared/kinetics/match'
import { seedWords, stateOf, Stream } from '../../../shared/walk/streams'
import { normalDeviates } from '../../../shared/fitting/deviates'

const MEDIUM = { diffusionUm2PerS: 0.1, densityPerUm3: 800, spacingNm: 50 } // 4 hits a second
const NONE = { diffusion: 0, density: 0, spacing: 0 }

describe('attachment from a fitted time constant', () => {
  it('is 1/(D·ρ·a·τ), with the interval of τ turned over', () => {
    const found = matchAttachment(MEDIUM, { valueS: 5 / 6, lowS: 0.75, highS: 25 / 27 }, NONE)
    expect(found.probability).toBeCloseTo(0.3, 12)
    expect([found.low, found.high]).toEqual([expect.closeTo(0.27, 6), expect.closeTo(1 / 3, 6)])
    expect([found.verdict, found.fastestTauS]).toEqual(['possible', expect.closeTo(0.25, 12)])
    // SCIENCE L-07: rate s/(1 + 0.338795 s); so s′ = x/(1 − 0.338795 x) gives the same rate.
    expect(found.isolated! / (1 + 0.3387953531 * found.isolated!)).toBeCloseTo(0.3, 8)
  })
  it('takes the medium of a scenario as it is', () => {
    expect(matchAttachment({ ...MEDIUM, crowding: 'independent' } as typeof MEDIUM, { valueS: 1, lowS: null, highS: 2 }, NONE).probability).toBeCloseTo(0.25, 12)
  })
  it('says where no attachment probability explains it', () => {
    expect(matchAttachment(MEDIUM, { valueS: 0.1, lowS: 0.09, highS: 0.11 }, NONE)).toMatchObject({ verdict: 'too-fast', isolated: null })
    expect(matchAttachment(MEDIUM, { valueS: 0.24, lowS: 0.2, highS: 0.29 }, NONE).verdict).toBe('edge')
    expect(matchAttachment(MEDIUM, { valueS: 0.2, lowS: null, highS: null }, NONE).high).toBe(Infinity)
  })
  it('has the interval that sampling gives where D, ρ and a are uncertain', () => {
    const errors = { diffusion: 0.2, density: 0.15, spacing: 0.05 }, found = matchAttachment(MEDIUM, { valueS: 1, lowS: 0.8, highS: 1.25 }, errors)
    const sd = [Math.log(1.25 / 0.8) / 2 / 1.959964, errors.diffusion, errors.density, errors.spacing], [low, high] = seedWords('match'), stream = new Stream(stateOf(low, high, 0))
    const draws = Array.from({ length: 40_000 }, () => {
      const z = new Float64Array(4)
      normalDeviates(stream, z)
      return 0.25 * Math.exp(z.reduce((sum, one, i) => sum + one * sd[i]!, 0))
    }).sort((a, b) => a - b)
    expect(found.low / draws[1000]!).toBeCloseTo(1, 1)
    expect(found.high / draws[39_000]!).toBeCloseTo(1, 1)
  })
})
