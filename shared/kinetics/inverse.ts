/** The inverse problem: what a measured time constant says about one unknown when the others are known. */

export interface Measured {
  /** Diffusion coefficient [µm²/s]. */
  diffusionUm2PerS: number
  /** Vesicles per volume [1/µm³]. */
  densityPerUm3: number
  /** Lattice spacing, the vesicle diameter [nm]. */
  spacingNm: number
  /** Time constant of refill [s]. */
  tauS: number
}
export type Inverse = { kind: 'possible', probability: number } | { kind: 'too-fast', probability: number, fastestTauS: number }

const positive = (measured: Measured) => {
  for (const [name, value] of Object.entries(measured))
    if (!(value > 0 && value < Infinity)) throw new RangeError(`inverse: ${name} = ${value} is not a positive number`)
}

/**
 * Attachment probability from a measured time constant, s = 1/(D·ρ·a·τ), at stirred supply.
 * Above 1 the measurement is faster than every hit attaching: D, ρ or a must then be larger than typed, or refill has another source.
 * @param measured - D [µm²/s], ρ [1/µm³], a [nm], τ [s]
 * @returns s [1]; with the fastest possible τ = 1/(D·ρ·a) [s] where s would exceed 1
 * @throws RangeError on a value that is not positive
 */
export function attachProbabilityFor(measured: Measured): Inverse {
  positive(measured)
  const hitsPerS = measured.diffusionUm2PerS * measured.densityPerUm3 * measured.spacingNm / 1000
  const probability = 1 / (hitsPerS * measured.tauS)
  return probability <= 1 ? { kind: 'possible', probability } : { kind: 'too-fast', probability, fastestTauS: 1 / hitsPerS }
}

/**
 * Attachment probability of an isolated site from its long-time rate, with the returns of a just-missed vesicle taken off:
 * rate = D·ρ·a·s/(1 + g·s) gives s = x/(1 − g·x), x = 1/(D·ρ·a·τ), g = 0.338795 (lattice constant of one face on a reflecting wall).
 * @param measured - D [µm²/s], ρ [1/µm³], a [nm], τ of the late phase [s]
 * @param resistance - g [1]
 * @returns s [1], `too-fast` where s would exceed 1
 * @throws RangeError on a value that is not positive
 */
export function isolatedAttachProbabilityFor(measured: Measured, resistance: number): Inverse {
  positive(measured)
  const hitsPerS = measured.diffusionUm2PerS * measured.densityPerUm3 * measured.spacingNm / 1000
  const x = 1 / (hitsPerS * measured.tauS)
  const probability = resistance * x < 1 ? x / (1 - resistance * x) : Infinity
  return probability <= 1 ? { kind: 'possible', probability } : { kind: 'too-fast', probability, fastestTauS: (1 + resistance) / hitsPerS }
}
