/** What physics alone says about a vesicle: free diffusion in water, and the capacitance of its membrane. */

const BOLTZMANN = 1.380649e-23 // J/K, exact since 2019

/**
 * Diffusion coefficient of a free sphere, Stokes–Einstein kT/(3πηδ): an upper bound for a vesicle in a terminal.
 * @param diameterNm - δ [nm]
 * @param celsius - temperature [°C]
 * @param viscosityMPaS - η of the medium; water has 0.8900 at 25 °C (from memory) [mPa·s]
 * @returns D [µm²/s]
 */
export function freeDiffusion(diameterNm: number, celsius = 25, viscosityMPaS = 0.89): number {
  const metresSquared = BOLTZMANN * (celsius + 273.15) / (3 * Math.PI * viscosityMPaS * 1e-3 * diameterNm * 1e-9)
  return metresSquared * 1e12
}

/**
 * Membrane capacitance of one vesicle, πδ² × 10 fF/µm² (1 µF/cm², from memory).
 * @param diameterNm - δ [nm]
 * @returns capacitance [aF]
 */
export function vesicleCapacitance(diameterNm: number): number {
  return Math.PI * (diameterNm / 1000) ** 2 * 10 * 1000
}

/**
 * Share of the volume that vesicles fill, ρπδ³/6.
 * @param densityPerUm3 - ρ [1/µm³]
 * @param diameterNm - δ [nm]
 * @returns volume fraction [1]
 */
export function volumeFraction(densityPerUm3: number, diameterNm: number): number {
  return densityPerUm3 * Math.PI * (diameterNm / 1000) ** 3 / 6
}
