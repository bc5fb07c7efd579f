/** Attachment probability from a fitted time constant, with the uncertainty of everything that goes into it. */
import { attachProbabilityFor, isolatedAttachProbabilityFor, type Measured } from './inverse'
import { faceResistance } from './lattice-constants'

/** Relative standard deviations of what the medium was taken to be [1]. */
export interface MediumErrors { diffusion: number, density: number, spacing: number }
/** A time constant with its 95 % interval; an end that the data leave open is null [s]. */
export interface FittedTau { valueS: number, lowS: number | null, highS: number | null }

export interface Matched {
  /** At stirred supply, s = 1/(D·ρ·a·τ) [1]. */
  probability: number
  /** 95 % interval, all errors taken together [1]. */
  low: number
  high: number
  /** With the returns to a just-missed isolated site taken off; null where no s ≤ 1 gives this τ so [1]. */
  isolated: number | null
  /** `too-fast`: even the lower end lies above 1. `edge`: 1 lies inside the interval. */
  verdict: 'possible' | 'edge' | 'too-fast'
  /** 1/(D·ρ·a): no site refills faster at stirred supply [s]. */
  fastestTauS: number
}

/** 97.5 % point of the normal distribution. */
const Z = 1.959963984540054

/**
 * Propagates errors on logarithms: var ln s = var ln τ + σ²(D) + σ²(ρ) + σ²(a), for independent relative errors.
 * @param medium - D [µm²/s], ρ [1/µm³], a [nm]
 * @param tau - fitted [s]
 * @param errors - relative standard deviations [1]
 * @returns s with its interval and what it means
 * @throws RangeError on a value that is not positive
 */
export function matchAttachment(medium: Omit<Measured, 'tauS'>, tau: FittedTau, errors: MediumErrors): Matched {
  const { diffusionUm2PerS, densityPerUm3, spacingNm } = medium, measured = { diffusionUm2PerS, densityPerUm3, spacingNm, tauS: tau.valueS }, { probability } = attachProbabilityFor(measured)
  const half = tau.lowS !== null && tau.highS !== null
    ? Math.log(tau.highS / tau.lowS) / 2
    : tau.lowS !== null ? Math.log(tau.valueS / tau.lowS) : tau.highS !== null ? Math.log(tau.highS / tau.valueS) : Infinity
  const spread = Math.sqrt((half / Z) ** 2 + errors.diffusion ** 2 + errors.density ** 2 + errors.spacing ** 2)
  const low = probability * Math.exp(-Z * spread), high = probability * Math.exp(Z * spread)
  const isolated = isolatedAttachProbabilityFor(measured, faceResistance())
  return {
    probability, low, high, isolated: isolated.kind === 'possible' ? isolated.probability : null,
    verdict: low > 1 ? 'too-fast' : high > 1 ? 'edge' : 'possible', fastestTauS: probability * tau.valueS,
  }
}
