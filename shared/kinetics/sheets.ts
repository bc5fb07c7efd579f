/** Uptake of sheets and spheres (Crank 1975), and mean exit times of a line: standard solutions that lattice solvers are held against. */

/**
 * Fraction taken up by a plane sheet whose surfaces are held, 1 − Σ 8/((2n+1)²π²)·e^(−(2n+1)²π²T/4), T = Dt/l², l half the thickness.
 * @param time - T [1]
 * @returns fraction of the final uptake [1]
 */
export function sheetUptake(time: number): number {
  // The series converges slowly at small T; there the two faces do not yet feel each other: 2√(T/π), error e^(−1/T).
  if (time < 0.03) return 2 * Math.sqrt(time / Math.PI)
  let sum = 0
  for (let n = 1; n < 2000; n += 2) sum += 8 / (n * Math.PI) ** 2 * Math.exp(-(n * n) * Math.PI ** 2 * time / 4)
  return 1 - sum
}

/**
 * Fraction taken up by a sphere whose surface is held, 1 − (6/π²)·Σ n⁻²·e^(−n²π²T), T = Dt/a².
 * @param time - T [1]
 * @returns fraction of the final uptake [1]
 */
export function sphereSheetUptake(time: number): number {
  if (time < 0.01) return 6 * Math.sqrt(time / Math.PI) - 3 * time
  let sum = 0
  for (let n = 1; n < 2000; n++) sum += Math.exp(-(n * n) * Math.PI ** 2 * time) / (n * n)
  return 1 - 6 / Math.PI ** 2 * sum
}

/**
 * Roots of β·tan β = L in ascending order, one in each interval (kπ, kπ + π/2).
 * @param resistance - L = lκ/D, above 0 [1]
 * @param count - how many [1]
 * @returns β₁ … βₙ [1]
 */
export function resistanceRoots(resistance: number, count: number): number[] {
  return Array.from({ length: count }, (_unused, k) => {
    let low = k * Math.PI, high = low + Math.PI / 2
    for (let i = 0; i < 200; i++) {
      const middle = (low + high) / 2
      if (middle === low || middle === high) break
      if (middle * Math.sin(middle) * Math.sign(Math.cos(middle)) < resistance * Math.abs(Math.cos(middle))) low = middle
      else high = middle
    }
    return (low + high) / 2
  })
}

/**
 * Fraction taken up by a sheet with a surface resistance, 1 − Σ 2L²·e^(−β²T)/(β²(β² + L² + L)).
 * @param resistance - L = lκ/D [1]
 * @param time - T = Dt/l² [1]
 * @returns fraction of the final uptake [1]
 */
export function resistantSheetUptake(resistance: number, time: number): number {
  const L = resistance
  return 1 - resistanceRoots(L, 200).reduce((sum, beta) => sum + 2 * L * L * Math.exp(-beta * beta * time) / (beta * beta * (beta * beta + L * L + L)), 0)
}

/**
 * Mean exit time of a line that absorbs at 0 and reflects at L: x(2L − x)/(2D).
 * @param diffusionUm2PerS - D [µm²/s]
 * @param lengthUm - L [µm]
 * @param startUm - x; left out = uniform start, L²/(3D) [µm]
 * @returns mean time [s]
 */
export function meanExitTime(diffusionUm2PerS: number, lengthUm: number, startUm?: number): number {
  if (startUm === undefined) return lengthUm ** 2 / (3 * diffusionUm2PerS)
  return startUm * (2 * lengthUm - startUm) / (2 * diffusionUm2PerS)
}
