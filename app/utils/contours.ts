/** Closed depth contours for empty and quiet pages: radius = mean and three cosines, from a seed text. */
const COUNT = 6
const POINTS = 180

/** A small text hash (FNV-1a, 32 bit) and a mixing step; good enough for a drawing, never used for a walk. */
function drawing(seed: string): () => number {
  let state = 0x811C9DC5
  for (const letter of seed) state = Math.imul(state ^ letter.codePointAt(0)!, 0x01000193)
  return () => {
    state = Math.imul(state ^ (state >>> 15), 0x2C1B3C6D) + 0x9E3779B9 | 0
    return ((state ^ (state >>> 13)) >>> 0) / 2 ** 32
  }
}

/** SVG paths in a 640 × 520 field, innermost first. */
export function contourPaths(seed: string): string[] {
  const next = drawing(seed)
  const waves = [1, 2, 3].map(order => ({ order, size: (0.22 - 0.05 * order) * (0.5 + next()), phase: 2 * Math.PI * next() }))
  const shape = Array.from({ length: POINTS }, (_, i) => 1 + waves.reduce((sum, { order, size, phase }) => sum + size * Math.cos(order * 2 * Math.PI * i / POINTS + phase), 0))
  /** The outermost curve touches the field and does not leave it. */
  const step = 258 / COUNT / Math.max(...shape)
  return Array.from({ length: COUNT }, (_, ring) => {
    const mean = step * (ring + 1)
    const points = Array.from({ length: POINTS }, (_unused, i) => {
      const angle = 2 * Math.PI * i / POINTS
      const radius = mean * shape[i]!
      return `${(320 + 1.2 * radius * Math.cos(angle)).toFixed(1)} ${(260 + 0.98 * radius * Math.sin(angle)).toFixed(1)}`
    })
    return `M${points.join('L')}Z`
  })
}
