/** Run-down: how the first response of a cell changes over its series, and the ratios with that taken out. */
import { studentQuantile975 } from '../walk/normal'
import type { Warning } from './reading'
import type { CellPoint } from './types'

export interface RunDown {
  cell: string
  /** Measurements with a first response, in the order of the file [count]. */
  measured: number
  /** First responses and the line through them, in the file's own unit. */
  points: { order: number, first: number, fitted: number, line: number | null }[]
  /** Change from the first to the last measurement, relative to the line's beginning [1]; null with fewer than three. */
  change: number | null
  /** 95 % interval of the change, by Student's t [1]. */
  low: number | null
  high: number | null
  /** The interval leaves out 0. */
  clear: boolean
}

interface Line { at: (order: number) => number, slope: number, slopeError: number, degrees: number }
function lineThrough(values: { order: number, first: number }[]): Line {
  const count = values.length, centre = values.reduce((sum, one) => sum + one.order, 0) / count, mean = values.reduce((sum, one) => sum + one.first, 0) / count
  let spread = 0, cross = 0
  for (const { order, first } of values) {
    spread += (order - centre) ** 2
    cross += (order - centre) * (first - mean)
  }
  const slope = cross / spread, at = (order: number) => mean + slope * (order - centre), degrees = count - 2
  const rest = values.reduce((sum, { order, first }) => sum + (first - at(order)) ** 2, 0)
  return { at, slope, slopeError: Math.sqrt(rest / degrees / spread), degrees }
}

function ofCell(cell: string, own: CellPoint[]): RunDown {
  const values = own.flatMap(({ first, line }, order) => first === null ? [] : [{ order, first, line }]), measured = values.length
  const unfitted: RunDown = { cell, measured, points: values.map(one => ({ ...one, fitted: one.first })), change: null, low: null, high: null, clear: false }
  if (measured < 3) return unfitted
  const line = lineThrough(values), from = values[0]!.order, to = values.at(-1)!.order, start = line.at(from)
  const points = values.map(one => ({ ...one, fitted: line.at(one.order) }))
  // A line that starts at or below 0 gives no relative change.
  if (!(start > 0)) return { ...unfitted, points }
  const scale = (to - from) / start, half = studentQuantile975(line.degrees) * line.slopeError * Math.abs(scale), change = line.slope * scale
  return { cell, measured, points, change, low: change - half, high: change + half, clear: change - half > 0 || change + half < 0 }
}

function byCell(cells: CellPoint[]): Map<string, CellPoint[]> {
  const found = new Map<string, CellPoint[]>()
  for (const one of cells) {
    if (one.aside !== null) continue
    const own = found.get(one.cell)
    if (own) own.push(one)
    else found.set(one.cell, [one])
  }
  return found
}

/**
 * Run-down of every cell over its series, by a straight line through the first responses. Measurements that are set aside do not count.
 * @param cells - cells of one condition in the order of the file
 * @returns one entry for each cell, relative change over the series with its 95 % interval [1]
 */
export function runDownOf(cells: CellPoint[]): RunDown[] {
  return [...byCell(cells)].map(([cell, own]) => ofCell(cell, own))
}

/** What a person should know of the run-down of a condition; nothing where no cell changes clearly. */
export function runDownWarning(condition: string, cells: CellPoint[]): Warning[] {
  const clear = runDownOf(cells).filter(one => one.clear), names = clear.slice(0, 3).map(one => `${one.cell} by ${Math.round(100 * one.change!)} %`).join(', ')
  if (clear.length === 0) return []
  return [{ id: 'run-down', lines: [], sentence: `${condition}: the first response changes over the series in ${clear.length} of ${new Set(cells.map(one => one.cell)).size} cells (${names}${clear.length > 3 ? ' and more' : ''}).` }]
}

/**
 * Ratios of the second response to the line through the first ones in place of each single first one; only for cells whose change is clear. Takes the noise and the run-down of the single first response out; says nothing of a second response that runs down within a pair.
 * @param cells - cells of one condition in the order of the file
 * @returns the cells with ratios corrected [1], and the names of the cells that were
 */
export function correctRunDown(cells: CellPoint[]): { cells: CellPoint[], corrected: string[] } {
  const fitted = new Map<CellPoint, number>(), corrected: string[] = []
  for (const [cell, own] of byCell(cells)) {
    const run = ofCell(cell, own)
    if (!run.clear) continue
    corrected.push(cell)
    for (const { order, fitted: value } of run.points) fitted.set(own[order]!, value)
  }
  return {
    corrected, cells: cells.map((one) => {
      const value = fitted.get(one)
      return value === undefined || !(value > 0) || one.ratio === null || one.first === null ? one : { ...one, ratio: one.ratio * one.first / value }
    }),
  }
}
