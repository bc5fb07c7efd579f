/** Constants of the walk on the simple cubic lattice: visits, returns, and what they make of an isolated site. */

/** Arithmetic-geometric mean; converges quadratically. */
function agm(a: number, b: number): number {
  let x = a, y = b
  for (let i = 0; i < 40 && Math.abs(x - y) > 1e-16 * x; i++) [x, y] = [(x + y) / 2, Math.sqrt(x * y)]
  return x
}

/**
 * Expected visits to the origin of the simple cubic walk, the start counted: Watson's integral (Watson 1939) by the complete elliptic integral,
 * u = 3(18 + 12√2 − 10√3 − 7√6)·(2K(k)/π)², k = (2 − √3)(√3 − √2); both differences are written without cancellation.
 * @returns u = 1.516386059151978 [1]
 */
export function latticeVisits(): number {
  const two = Math.SQRT2, three = Math.sqrt(3)
  const k = 1 / ((2 + three) * (three + two))
  const factor = (18 + 12 * two) / (18 + 12 * two + (10 + 7 * two) * three)
  return 3 * factor / agm(1, Math.sqrt(1 - k * k)) ** 2
}

/**
 * Chance ever to return, 1 − 1/u (Pólya 1921).
 * @returns 0.340537329550999 [1]
 */
export function returnProbability(): number {
  return 1 - 1 / latticeVisits()
}

/**
 * Resistance of returns of one site face on a reflecting wall, (2u − 1)/6 by the image method: the long-time rate is D·ρ·a·s/(1 + g·s).
 * @returns g = 0.338795353 [1]
 */
export function faceResistance(): number {
  return (2 * latticeVisits() - 1) / 6
}

/**
 * Long-time rate of an isolated site face over the well-mixed hit rate D·ρ·a, s/(1 + g·s).
 * @param attachProbability - s [1]
 * @returns fraction of hits that end in attachment, returns taken off [1]
 */
export function isolatedFaceRate(attachProbability: number): number {
  return attachProbability / (1 + attachProbability * faceResistance())
}

/**
 * Captures a step of a target cell in the bulk over its occupancy, s/(1 + s(u − 1)), attaching with s on arrival.
 * @param attachProbability - s [1]
 * @returns captures a step for ρa³ = 1 [1]
 */
export function bulkCellRate(attachProbability: number): number {
  return attachProbability / (1 + attachProbability * (latticeVisits() - 1))
}

/**
 * Radii that give the same steady flux in the continuum as one perfect target: sphere for a cell, 6/(4πu); disk for a wall face, isolatedFaceRate(1)/4.
 * @returns radii in units of the spacing a [1]
 */
export function equivalentRadii(): { sphere: number, disk: number } {
  return { sphere: 6 / (4 * Math.PI * latticeVisits()), disk: isolatedFaceRate(1) / 4 }
}

/**
 * Chance to have returned within T steps, p − (1/u²)·2(3/(2π))^(3/2)/√T: the tail of the return times.
 * @param steps - T, large [steps]
 * @returns probability [1]
 */
export function returnProbabilityWithin(steps: number): number {
  const u = latticeVisits()
  return 1 - 1 / u - 2 * (3 / (2 * Math.PI)) ** 1.5 / (u * u * Math.sqrt(steps))
}

/** e^(−x)·I_m(x) for m up to about 6: trapezoid rule over the angle (it converges geometrically), or the asymptotic series beyond x = 2000. */
function scaledBessel(m: number, x: number): number {
  if (x > 2000) {
    const mu = 4 * m * m
    let term = 1, sum = 1
    for (let k = 1; k <= 8; k++) sum += term *= -(mu - (2 * k - 1) ** 2) / (k * 8 * x)
    return sum / Math.sqrt(2 * Math.PI * x)
  }
  const nodes = 40 + Math.ceil(8 * Math.sqrt(x))
  let sum = (1 + Math.exp(-2 * x) * Math.cos(m * Math.PI)) / 2
  for (let i = 1; i < nodes; i++) {
    const angle = Math.PI * i / nodes
    sum += Math.exp(x * (Math.cos(angle) - 1)) * Math.cos(m * angle)
  }
  return sum / nodes
}

/**
 * Expected visits to a lattice point, ∫₀^∞ e^(−t)·I_x(t/3)·I_y(t/3)·I_z(t/3) dt, by the trapezoid rule in log t.
 * @param x - distance along one axis [spacings]
 * @param y - along the second [spacings]
 * @param z - along the third [spacings]
 * @returns expected visits of a walk from the origin, the start counted at the origin itself [1]
 */
export function visitsTo(x: number, y: number, z: number): number {
  const step = 1 / 16
  let sum = 0
  for (let v = -40; v <= 60; v += step) {
    const t = Math.exp(v)
    sum += t * scaledBessel(Math.abs(x), t / 3) * scaledBessel(Math.abs(y), t / 3) * scaledBessel(Math.abs(z), t / 3)
  }
  return sum * step
}

/**
 * Attempts into a reflecting wall in n steps by a walk that starts in the cell before it, Σ P_k(0)/6 over k = 0 … n − 1; about √(2n/(3π)) − ½.
 * @param steps - n [steps]
 * @returns expected attempts [1]
 */
export function wallAttempts(steps: number): number {
  let line = new Float64Array(steps + 1), next = new Float64Array(steps + 1), sum = 0
  line[0] = 1
  for (let n = 0; n < steps; n++) {
    sum += line[0]! / 6
    for (let i = 0; i <= n + 1; i++) next[i] = line[i]! * 4 / 6 + ((i > 0 ? line[i - 1]! : line[0]!) + (i < steps ? line[i + 1]! : 0)) / 6;
    [line, next] = [next, line]
  }
  return sum
}

/**
 * Expected returns to 0 of the simple walk on a line in 2n steps, the start not counted: (2n + 1)·C(2n, n)/4ⁿ − 1 (Feller, vol. 1, ch. III).
 * @param pairs - n [pairs of steps]
 * @returns expected returns [1]
 */
export function lineReturns(pairs: number): number {
  let central = 1
  for (let k = 1; k <= pairs; k++) central *= (2 * k - 1) / (2 * k)
  return (2 * pairs + 1) * central - 1
}
