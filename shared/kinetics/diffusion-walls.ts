/** Diffusion to walls, first arrivals and motion: absorbing and partly absorbing plates, the lattice wall, free and confined spread. */
import { erfc, erfcx } from './special'
import type { Bath } from './diffusion-targets'

/**
 * Flux to an absorbing plate, c·√(D/(πt)) (Cottrell; Carslaw & Jaeger 1959).
 * @param bath - D [µm²/s], c [1/µm³]
 * @param timeS - t [s]
 * @returns flux [1/(µm²·s)]
 */
export function plateFlux(bath: Bath, timeS: number): number {
  return bath.perUm3 * Math.sqrt(bath.diffusionUm2PerS / (Math.PI * timeS))
}

/**
 * Arrivals at an absorbing plate by a time, 2c·√(Dt/π).
 * @param bath - D [µm²/s], c [1/µm³]
 * @param timeS - t [s]
 * @returns arrivals per area [1/µm²]
 */
export function plateUptake(bath: Bath, timeS: number): number {
  return 2 * bath.perUm3 * Math.sqrt(bath.diffusionUm2PerS * timeS / Math.PI)
}

/**
 * Flux to a partly absorbing plate, κc·erfcx(h√(Dt)), h = κ/D (Carslaw & Jaeger 1959).
 * @param bath - D [µm²/s], c [1/µm³]
 * @param surfaceUmPerS - κ [µm/s]
 * @param timeS - t [s]
 * @returns flux [1/(µm²·s)]
 */
export function robinFlux(bath: Bath, surfaceUmPerS: number, timeS: number): number {
  return surfaceUmPerS * bath.perUm3 * erfcx(surfaceUmPerS * Math.sqrt(timeS / bath.diffusionUm2PerS))
}

/**
 * Uptake of a partly absorbing plate by a time, (c/h)·(erfcx(z) − 1 + 2z/√π), z = h√(Dt).
 * @param bath - D [µm²/s], c [1/µm³]
 * @param surfaceUmPerS - κ [µm/s]
 * @param timeS - t [s]
 * @returns uptake per area [1/µm²]
 */
export function robinUptake(bath: Bath, surfaceUmPerS: number, timeS: number): number {
  const z = surfaceUmPerS * Math.sqrt(timeS / bath.diffusionUm2PerS)
  const root = Math.sqrt(Math.PI)
  const inner = z < 0.003 ? z * z * (1 - 4 * z / (3 * root) + z * z / 2 - 8 * z ** 3 / (15 * root)) : erfcx(z) - 1 + 2 * z / root
  return bath.perUm3 * bath.diffusionUm2PerS / surfaceUmPerS * inner
}

/**
 * Surface rate that a lattice wall with attachment s amounts to in the continuum: (sD/a)/(1 − s/2), half a cell lying between the last voxel's centre and the wall (compare Erban & Chapman 2007). s = 1 gives 2D/a.
 * @param diffusionUm2PerS - D [µm²/s]
 * @param spacingUm - a [µm]
 * @param attachProbability - s [1]
 * @returns κ [µm/s]
 */
export function latticeSurfaceRate(diffusionUm2PerS: number, spacingUm: number, attachProbability: number): number {
  return attachProbability * diffusionUm2PerS / spacingUm / (1 - attachProbability / 2)
}

/**
 * Chance to have reached a plane by a time, erfc(d/√(4Dt)).
 * @param diffusionUm2PerS - D [µm²/s]
 * @param distanceUm - d [µm]
 * @param timeS - t [s]
 * @returns probability [1]
 */
export function reachedPlane(diffusionUm2PerS: number, distanceUm: number, timeS: number): number {
  return erfc(distanceUm / Math.sqrt(4 * diffusionUm2PerS * timeS))
}

/**
 * Chance to have reached a sphere by a time, (R/r)·erfc((r − R)/√(4Dt)); R/r in the long run.
 * @param diffusionUm2PerS - D [µm²/s]
 * @param radiusUm - R [µm]
 * @param startUm - r, distance from its centre [µm]
 * @param timeS - t [s]
 * @returns probability [1]
 */
export function reachedSphere(diffusionUm2PerS: number, radiusUm: number, startUm: number, timeS: number): number {
  return radiusUm / startUm * reachedPlane(diffusionUm2PerS, startUm - radiusUm, timeS)
}

/**
 * Mean square displacement of free motion in three dimensions, 6Dt (Einstein 1905); on the lattice n·a² after n steps, exactly.
 * @param diffusionUm2PerS - D [µm²/s]
 * @param timeS - t [s]
 * @returns ⟨r²⟩ [µm²]
 */
export function freeSpread(diffusionUm2PerS: number, timeS: number): number {
  return 6 * diffusionUm2PerS * timeS
}

/**
 * Mean square displacement along one axis of a reflecting box from a uniform start, (L²/6)·(1 − (96/π⁴)·Σ n⁻⁴·e^(−n²π²Dt/L²)) over odd n.
 * @param diffusionUm2PerS - D [µm²/s]
 * @param sideUm - L [µm]
 * @param timeS - t [s]
 * @returns ⟨x²⟩ of one axis [µm²]
 */
export function confinedSpread(diffusionUm2PerS: number, sideUm: number, timeS: number): number {
  const rate = Math.PI ** 2 * diffusionUm2PerS * timeS / sideUm ** 2
  let sum = 0
  for (let n = 1; n < 4000; n += 2) {
    const term = Math.exp(-n * n * rate) / n ** 4
    sum += term
    if (term < 1e-17 * sum) break
  }
  return sideUm ** 2 / 6 * (1 - 96 / Math.PI ** 4 * sum)
}
