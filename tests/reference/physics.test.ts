/** Values of the almanac that follow from formulas: H-23, H-36, H-38, H-60. */
import { describe, expect, it } from 'vitest'
import { freeDiffusion, vesicleCapacitance } from '../../shared/kinetics/free-solution'
import { hitRates } from '../../shared/kinetics/rates'
import { rateFrom } from '../../shared/kinetics/waiting'
import { expectRelative } from './support'

describe('almanac values that are computed', () => {
  it('H-23 capacitance of a vesicle, πδ² at 1 µF/cm² (membrane constant from memory)', () => {
    expect([30, 35, 40, 45].map(diameter => Number(vesicleCapacitance(diameter).toFixed(1)))).toEqual([28.3, 38.5, 50.3, 63.6])
  })
  it('H-36 free sphere in water, Stokes–Einstein (viscosities of water from memory)', () => {
    expectRelative([freeDiffusion(45, 22, 0.9544), freeDiffusion(45), freeDiffusion(45, 37, 0.6913), freeDiffusion(30)], [10.067, 10.905, 14.605, 16.358], 5e-5)
  })
  it('H-38 collisions from Dρδ × sites: the order of the published 900 /s (Holt et al. 2004 Curr Biol 14:173)', () => {
    const collisions = [12, 10].map((diameter) => {
      const densityPerUm3 = 300_000 / (Math.PI * diameter ** 3 / 6)
      const [perSite] = hitRates({ medium: { spacingNm: 30, diffusionUm2PerS: 0.015, densityPerUm3, crowding: 'independent' }, vesicles: [{ name: 'vesicle', share: 1, attachFactor: 1, mobilityFactor: 1 }] })
      return perSite! * 55 * 110
    })
    expectRelative(collisions, [902.7, 1559.9], 1e-4)
  })
  it('H-60 95 % after 200 ms is a time constant of 0.06676 s (Spassova et al. 2004 JARO 5:376)', () => expect(1 / rateFrom(0.95, 0.2)).toBeCloseTo(0.06676, 5))
})
