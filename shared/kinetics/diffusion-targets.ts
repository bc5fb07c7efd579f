/** Diffusion to small targets in the continuum: spheres, disks, patches. Letters as in the papers; D in µm²/s, lengths in µm, c in 1/µm³. */
import { erfcx } from './special'

/** Medium around a target: D [µm²/s], far concentration c [1/µm³]. */
export interface Bath { diffusionUm2PerS: number, perUm3: number }

/**
 * Flux to an absorbing sphere, 4πDRc·(1 + R/√(πDt)) (Smoluchowski 1917); the first term alone in the long run.
 * @param bath - D [µm²/s], c [1/µm³]
 * @param radiusUm - R [µm]
 * @param timeS - time since the start; Infinity = steady [s]
 * @returns arrivals [1/s]
 */
export function sphereFlux(bath: Bath, radiusUm: number, timeS = Infinity): number {
  return 4 * Math.PI * bath.diffusionUm2PerS * radiusUm * bath.perUm3 * (1 + radiusUm / Math.sqrt(Math.PI * bath.diffusionUm2PerS * timeS))
}

/**
 * Arrivals at an absorbing sphere by a time, 4πDRc·(t + 2R√(t/(πD))).
 * @param bath - D [µm²/s], c [1/µm³]
 * @param radiusUm - R [µm]
 * @param timeS - t [s]
 * @returns arrivals [1]
 */
export function sphereUptake(bath: Bath, radiusUm: number, timeS: number): number {
  return 4 * Math.PI * bath.diffusionUm2PerS * radiusUm * bath.perUm3 * (timeS + 2 * radiusUm * Math.sqrt(timeS / (Math.PI * bath.diffusionUm2PerS)))
}

/**
 * Flux to a partly reactive sphere (Collins & Kimball 1949): steady kD·ka/(kD + ka), times 1 + (ka/kD)·erfcx(X), X = (1 + ka/kD)·√(Dt)/R.
 * @param bath - D [µm²/s], c [1/µm³]
 * @param radiusUm - R [µm]
 * @param ratio - ka/kD, reaction over diffusion [1]
 * @param timeS - time since the start; Infinity = steady [s]
 * @returns captures [1/s]
 */
export function reactiveSphereFlux(bath: Bath, radiusUm: number, ratio: number, timeS = Infinity): number {
  const steady = sphereFlux(bath, radiusUm) * ratio / (1 + ratio)
  if (timeS === Infinity) return steady
  return steady * (1 + ratio * erfcx((1 + ratio) * Math.sqrt(bath.diffusionUm2PerS * timeS) / radiusUm))
}

/**
 * Steady flux to an absorbing disk on a reflecting wall, 4Dac (Hill 1975; Berg & Purcell 1977).
 * @param bath - D [µm²/s], c [1/µm³]
 * @param radiusUm - a [µm]
 * @returns arrivals [1/s]
 */
export function diskFlux(bath: Bath, radiusUm: number): number {
  return 4 * bath.diffusionUm2PerS * radiusUm * bath.perUm3
}

/**
 * The constant-flux approximation for the same disk, (3π²/8)·Dac (Shoup, Lipari & Szabo 1981): 7.5 % lower, not to be taken for the exact value.
 * @param bath - D [µm²/s], c [1/µm³]
 * @param radiusUm - a [µm]
 * @returns arrivals [1/s]
 */
export function diskFluxConstant(bath: Bath, radiusUm: number): number {
  return 3 * Math.PI ** 2 / 8 * bath.diffusionUm2PerS * radiusUm * bath.perUm3
}

/** N absorbing disks of radius b on a sphere of radius R [µm]. */
export interface Patches { sphereRadiusUm: number, patchRadiusUm: number, count: number }

/**
 * Flux to a sphere with absorbing disks as a fraction of the all-absorbing sphere: Nb/(Nb + πR) (Berg & Purcell 1977), or with the overlap correction Nb/(Nb + πR(1 − φ)), φ = Nb²/(4R²) (Zwanzig 1990).
 * @param patches - R, b [µm], N [1]
 * @param overlap - whether to use the correction
 * @returns fraction of 4πDRc [1]
 */
export function patchySphereFraction(patches: Patches, overlap = false): number {
  const { sphereRadiusUm: R, patchRadiusUm: b, count } = patches
  const covered = overlap ? count * b * b / (4 * R * R) : 0
  return count * b / (count * b + Math.PI * R * (1 - covered))
}

/**
 * Effective surface rate of a wall with absorbing disks: 4Dbσ (dilute), or 4Dbσ/(1 − πb²σ) (Zwanzig 1990, R → ∞).
 * @param diffusionUm2PerS - D [µm²/s]
 * @param patchRadiusUm - b [µm]
 * @param perUm2 - σ, disks per area [1/µm²]
 * @param overlap - whether to use the correction
 * @returns κ [µm/s]
 */
export function patchyWallRate(diffusionUm2PerS: number, patchRadiusUm: number, perUm2: number, overlap = false): number {
  return 4 * diffusionUm2PerS * patchRadiusUm * perUm2 / (overlap ? 1 - Math.PI * patchRadiusUm ** 2 * perUm2 : 1)
}

/**
 * Mean time to find a small sphere inside a reflecting one, T(r) = (R² − r²)/(6D) + (b³/(3D))·(1/R − 1/r), the solution of D∇²T = −1.
 * @param diffusionUm2PerS - D [µm²/s]
 * @param targetUm - R [µm]
 * @param wallUm - b [µm]
 * @param startUm - r [µm]
 * @returns T [s]
 */
export function meanTimeToSphere(diffusionUm2PerS: number, targetUm: number, wallUm: number, startUm: number): number {
  return (targetUm ** 2 - startUm ** 2) / (6 * diffusionUm2PerS) + wallUm ** 3 / (3 * diffusionUm2PerS) * (1 / targetUm - 1 / startUm)
}

/**
 * The same from a uniform start between the two spheres, by exact integration of T(r)·r².
 * @param diffusionUm2PerS - D [µm²/s]
 * @param targetUm - R [µm]
 * @param wallUm - b [µm]
 * @returns mean time [s]
 */
export function meanTimeToSphereUniform(diffusionUm2PerS: number, targetUm: number, wallUm: number): number {
  const R = targetUm, b = wallUm, cube = (b ** 3 - R ** 3) / 3
  const integral = (R * R * cube - (b ** 5 - R ** 5) / 5) / 6 + b ** 3 / 3 * (cube / R - (b * b - R * R) / 2)
  return integral / (cube * diffusionUm2PerS)
}
