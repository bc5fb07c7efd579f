/** Where the names of curves stand: beside the curve, where curves part, on no other name and on as little ink as can be. */

export interface LabelLine { text: string, strong: boolean }
export interface LabelTarget {
  id: string
  lines: LabelLine[]
  /** Points of the named curve in pixels, left to right. */
  points: readonly (readonly [number, number])[]
  /** An edge of a band may be crossed by the leaders of others. */
  edge?: boolean
}
export interface Box { left: number, top: number, right: number, bottom: number }
export interface PlacedLabel {
  id: string
  lines: LabelLine[]
  x: number
  /** Baseline of the first line. */
  y: number
  anchor: 'start' | 'end'
  /** End of the leader on the curve, and its end at the label. */
  from: readonly [number, number]
  to: readonly [number, number]
}

export const LINE_HEIGHT_PX = 16
const CELL_PX = 4
/** Widths in Source Sans 3 at 12.5 px, by kind of character; generous, because a fallback face is wider. */
const widthOf = (character: string, strong: boolean) =>
  (/[ijl.,:;'|!]/.test(character) ? 3.4 : /[mwMW%@]/.test(character) ? 10.4 : /[A-Z0-9τρ±]/.test(character) ? 7 : character === ' ' ? 3 : 6.3) * (strong ? 1.05 : 1)
/** Width of a line of figure text [px]. */
export const textWidth = (text: string, strong = false) => [...text].reduce((sum, character) => sum + widthOf(character, strong), 0)

const overlap = (a: Box, b: Box) => a.left < b.right && b.left < a.right && a.top < b.bottom && b.top < a.bottom
const inside = (box: Box, frame: Box) => box.left >= frame.left && box.right <= frame.right && box.top >= frame.top && box.bottom <= frame.bottom
const holds = (box: Box, [x, y]: readonly [number, number]) => x > box.left && x < box.right && y > box.top && y < box.bottom

/** Vertical distance of the nearest other curve at an abscissa [px]; large where none is there. */
function partingAt(x: number, y: number, others: LabelTarget[]): number {
  let nearest = 200
  for (const other of others) {
    const points = other.points
    for (let i = 1; i < points.length; i++) {
      const a = points[i - 1]!
      const b = points[i]!
      if (x < a[0] || x > b[0]) continue
      const at = b[0] === a[0] ? a[1] : a[1] + (b[1] - a[1]) * (x - a[0]) / (b[0] - a[0])
      nearest = Math.min(nearest, Math.abs(at - y))
    }
  }
  return nearest
}

/** How many times a leader crosses foreign curves; it should cross none. */
function crossings(from: readonly [number, number], to: readonly [number, number], others: LabelTarget[]): number {
  const side = ([x, y]: readonly [number, number]) => (to[0] - from[0]) * (y - from[1]) - (to[1] - from[1]) * (x - from[0])
  let crossed = 0
  for (const other of others)
    for (let i = 1; i < other.points.length; i++) {
      const a = other.points[i - 1]!
      const b = other.points[i]!
      if (Math.max(a[0], b[0]) < Math.min(from[0], to[0]) || Math.min(a[0], b[0]) > Math.max(from[0], to[0])) continue
      if (side(a) * side(b) >= 0) continue
      const along = (p: readonly [number, number]) => (b[0] - a[0]) * (p[1] - a[1]) - (b[1] - a[1]) * (p[0] - a[0])
      if (along(from) * along(to) < 0) crossed++
    }
  return crossed
}

const OFFSETS: readonly (readonly [number, number])[] = [
  [-22, -34], [-34, -62], [-40, -90], [26, 40], [38, 66], [46, 96], [54, 130], [26, -40], [-26, 40], [60, 24], [-60, -24], [16, -70], [-16, 70], [20, 160], [-40, -130],
]

/** Widths of names are asked for at every place that is tried, and stay the same. */
const widths = new WeakMap<LabelLine[], number>()
function widthOfLines(lines: LabelLine[]): number {
  const known = widths.get(lines)
  if (known !== undefined) return known
  const width = Math.max(...lines.map(line => textWidth(line.text, line.strong)))
  widths.set(lines, width)
  return width
}

function boxOf(lines: LabelLine[], x: number, y: number, anchor: 'start' | 'end'): Box {
  const width = widthOfLines(lines)
  return {
    left: anchor === 'start' ? x - 4 : x - width - 4, right: anchor === 'start' ? x + width + 4 : x + 4,
    top: y - 13, bottom: y + (lines.length - 1) * LINE_HEIGHT_PX + 6,
  }
}

/** Whether a leader runs through a box; sampled, because a leader is short. */
const runsThrough = (from: readonly [number, number], to: readonly [number, number], box: Box) =>
  Array.from({ length: 13 }, (_, i) => i / 12).some(share => holds(box, [from[0] + (to[0] - from[0]) * share, from[1] + (to[1] - from[1]) * share]))

/** How many ink points lie in a box, by a summed table over cells of 4 px: asked thousands of times a figure. */
class InkTable {
  private readonly sums: Uint32Array
  private readonly columns: number
  private readonly rows: number

  constructor(private readonly frame: Box, points: readonly (readonly [number, number])[]) {
    this.columns = Math.ceil((frame.right - frame.left) / CELL_PX) + 1
    this.rows = Math.ceil((frame.bottom - frame.top) / CELL_PX) + 1
    this.sums = new Uint32Array((this.columns + 1) * (this.rows + 1))
    const cells = new Uint8Array(this.columns * this.rows)
    for (const [x, y] of points) {
      const column = Math.floor((x - frame.left) / CELL_PX), row = Math.floor((y - frame.top) / CELL_PX)
      if (column >= 0 && column < this.columns && row >= 0 && row < this.rows) cells[row * this.columns + column] = 1
    }
    const wide = this.columns + 1
    for (let row = 0; row < this.rows; row++)
      for (let column = 0; column < this.columns; column++)
        this.sums[(row + 1) * wide + column + 1] = cells[row * this.columns + column]! + this.sums[row * wide + column + 1]! + this.sums[(row + 1) * wide + column]! - this.sums[row * wide + column]!
  }

  /** Inked cells in a box. */
  count(box: Box): number {
    const cell = (at: number, from: number, most: number) => Math.min(most, Math.max(0, Math.round((at - from) / CELL_PX)))
    const left = cell(box.left, this.frame.left, this.columns), right = cell(box.right, this.frame.left, this.columns)
    const top = cell(box.top, this.frame.top, this.rows), bottom = cell(box.bottom, this.frame.top, this.rows)
    const wide = this.columns + 1
    return this.sums[bottom * wide + right]! - this.sums[top * wide + right]! - this.sums[bottom * wide + left]! + this.sums[top * wide + left]!
  }
}

interface Taken { box: Box, from: readonly [number, number], to: readonly [number, number] }
interface Candidate extends Taken { label: PlacedLabel, cost: number }
interface Surroundings { others: LabelTarget[], frame: Box, taken: Taken[], ink: InkTable }

/** A place for a label, or null where it cannot stand or costs at least as much as the best so far. */
function candidate(target: LabelTarget, from: readonly [number, number], offset: readonly [number, number], parting: number, around: Surroundings, best: number): Candidate | null {
  const [dx, dy] = offset
  const share = (from[0] - around.frame.left) / (around.frame.right - around.frame.left)
  const plain = Math.hypot(dx, dy) * 0.12 + Math.abs(share - 0.42) * 8 - parting * 2.5
  if (plain >= best) return null
  const anchor = dx < 0 ? 'end' as const : 'start' as const
  const to = [from[0] + dx, from[1] + dy] as const
  const x = to[0] + (dx < 0 ? -4 : 4)
  const y = to[1] + (dy < 0 ? -4 - (target.lines.length - 1) * LINE_HEIGHT_PX : 6)
  const box = boxOf(target.lines, x, y, anchor)
  if (!inside(box, around.frame)) return null
  const inked = plain + around.ink.count(box) * 4
  if (inked >= best) return null
  if (around.taken.some(other => overlap(box, other.box) || runsThrough(from, to, other.box) || runsThrough(other.from, other.to, box))) return null
  const cost = inked + crossings(from, to, around.others) * 40
  return cost < best ? { label: { id: target.id, lines: target.lines, x, y, anchor, from, to }, box, from, to, cost } : null
}

function bestPlace(target: LabelTarget, around: Surroundings): Candidate | null {
  const { frame } = around
  let best = null as Candidate | null
  const stride = Math.max(1, Math.floor(target.points.length / 60))
  for (let i = 0; i < target.points.length; i += stride) {
    const from = target.points[i]!
    const share = (from[0] - frame.left) / (frame.right - frame.left)
    if (share < 0.04 || share > 0.94 || from[1] < frame.top || from[1] > frame.bottom) continue
    const parting = Math.min(partingAt(from[0], from[1], around.others), 16)
    for (const offset of OFFSETS) {
      const bound: number = best?.cost ?? Infinity
      best = candidate(target, from, offset, parting, around, bound) ?? best
    }
  }
  return best
}

/** Points of a curve no further apart than a cell, so that a label is seen to cover a straight stretch too. */
function dense(points: LabelTarget['points']): (readonly [number, number])[] {
  return points.flatMap((point, i) => {
    const next = points[i + 1]
    if (!next) return [point]
    const count = Math.max(1, Math.min(200, Math.ceil(Math.hypot(next[0] - point[0], next[1] - point[1]) / CELL_PX)))
    return Array.from({ length: count }, (_, k) => [point[0] + (next[0] - point[0]) * k / count, point[1] + (next[1] - point[1]) * k / count] as const)
  })
}
/** Every point that is at least so far from the one before [px]: enough to see where curves cross and part. */
function sparse(points: LabelTarget['points'], apartPx: number): LabelTarget['points'] {
  let last = -Infinity
  return points.filter(([x], i) => {
    if (x - last < apartPx && i < points.length - 1) return false
    last = x
    return true
  })
}

/**
 * Places one label a target, in their order; a label that finds no free place is left out, and the caption still names it.
 * @param targets named curves in pixels
 * @param frame the frame that labels stay inside [px]
 */
export function placeLabels(targets: LabelTarget[], frame: Box): PlacedLabel[] {
  const taken: Taken[] = []
  const placed: PlacedLabel[] = []
  const seen = targets.map(target => ({ ...target, points: sparse(target.points, 7) }))
  const ink = new InkTable(frame, seen.flatMap(target => dense(target.points)))
  for (const target of seen) {
    const others = seen.filter(other => other !== target && !other.edge)
    const best = bestPlace(target, { others, frame, taken, ink })
    if (!best) continue
    placed.push(best.label)
    taken.push(best)
  }
  return placed
}
