/** The lattice walk along one axis: a sixth of the mass moves each way in a step, four sixths stay (hops along the other two axes). */

/** An end of the line: mass reflects, attaches with probability s on a hop into it, exchanges with a held density, or meets the other end. */
export type LineEnd = { kind: 'reflect' } | { kind: 'attach', probability: number } | { kind: 'held', density: number } | { kind: 'periodic' }

/**
 * One step of the density on a line of voxels.
 * @param density - mass a voxel before the step, changed in place [1]
 * @param left - what lies before voxel 0
 * @param right - what lies after the last voxel
 * @returns mass attached at either end in this step [1]
 */
export function stepLine(density: Float64Array, left: LineEnd, right: LineEnd): number {
  const last = density.length - 1, first = density[0]!, final = density[last]!
  const beyond = (end: LineEnd, own: number, opposite: number) =>
    end.kind === 'held' ? end.density : end.kind === 'periodic' ? opposite : end.kind === 'attach' ? own * (1 - end.probability) : own
  const before = beyond(left, first, final), after = beyond(right, final, first)
  let previous = before
  for (let i = 0; i <= last; i++) {
    const own = density[i]!
    density[i] = own + (previous - 2 * own + (i < last ? density[i + 1]! : after)) / 6
    previous = own
  }
  return (left.kind === 'attach' ? first * left.probability / 6 : 0) + (right.kind === 'attach' ? final * right.probability / 6 : 0)
}

/**
 * Decay factor a step of mode m of N voxels, 1 − (1 − cos k)/3: k = πm/N between reflecting walls, 2πm/N around a ring, π(2m − 1)/(2N + 1) from an absorbing to a reflecting wall.
 * @param ends - kind of line
 * @param voxels - N [1]
 * @param mode - m, from 1 [1]
 * @returns λ [1]
 */
export function lineDecay(ends: 'reflecting' | 'periodic' | 'absorbing-reflecting', voxels: number, mode: number): number {
  const k = ends === 'reflecting' ? Math.PI * mode / voxels : ends === 'periodic' ? 2 * Math.PI * mode / voxels : Math.PI * (2 * mode - 1) / (2 * voxels + 1)
  return 1 - (1 - Math.cos(k)) / 3
}
