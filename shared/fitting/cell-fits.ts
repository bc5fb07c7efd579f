/** Each cell fitted alone, and what the cells have in common: the cell as a random effect, in two stages. */
import { exp, log } from './elementary'
import type { CellPoint, ConditionData } from '../recordings/types'
import { studentQuantile975 } from '../walk/normal'
import { fitCondition, type RecoveryFit } from './fit'
import type { FitOptions } from './fit-design'
import { refusal, type FitNote, type FitRefusal } from './point-errors'
import type { ParameterName } from './recovery-model'

export interface OneCell { cell: string, points: number, fit: RecoveryFit | null, refused: FitNote | null }

/** A parameter over cells. Time constants are averaged as logarithms: the value is then a geometric mean. */
export interface CellsParameter {
  name: ParameterName
  unit: '1' | 's'
  value: number
  /** Cells that it is taken over [count]. */
  cells: number
  /** SD of the cells' estimates; for time constants value × SD of their logarithms. */
  sd: number | null
  /** What of the SD is between cells, once the mean variance of the single fits is taken off; null where a single fit has no error. */
  between: number | null
  /** 95 % interval of the value, by Student's t over cells. */
  low: number | null
  high: number | null
}

export interface CellsFit { cells: OneCell[], parameters: CellsParameter[], notes: FitNote[] }

const FEWEST_CELLS = 5

/** One cell as a condition of its own, its points alone; lost intervals stay lost. */
function conditionOfCell(condition: ConditionData, cell: string, points: readonly CellPoint[]): ConditionData {
  const counting = points.filter(point => point.ratio !== null && point.aside === null)
  return {
    ...condition, condition: cell, cells: [],
    points: counting.map(({ intervalMs, ratio, line }) => ({ intervalMs, ratio: ratio!, sd: null, sem: null, n: 1, aside: null, line })),
  }
}

/** A fit that may be averaged: settled, and off every bound. */
const usable = (fit: RecoveryFit): boolean => fit.converged && fit.parameters.every(one => !one.atBound)

function overCells(fits: readonly RecoveryFit[], index: number): CellsParameter {
  const { name, unit } = fits[0]!.parameters[index]!, logarithmic = unit === 's', n = fits.length
  const scaled = fits.map(({ parameters }) => logarithmic ? log(parameters[index]!.value) : parameters[index]!.value)
  const errors = fits.map(({ parameters }) => (parameters[index]!.se ?? NaN) / (logarithmic ? parameters[index]!.value : 1))
  const mean = scaled.reduce((sum, one) => sum + one, 0) / n, natural = (x: number) => logarithmic ? exp(x) : x
  const value = natural(mean), size = logarithmic ? value : 1
  if (n < 2) return { name, unit, value, cells: n, sd: null, between: null, low: null, high: null }
  const variance = scaled.reduce((sum, one) => sum + (one - mean) ** 2, 0) / (n - 1)
  const within = errors.reduce((sum, one) => sum + one * one, 0) / n, half = studentQuantile975(n - 1) * Math.sqrt(variance / n)
  return {
    name, unit, value, cells: n, sd: size * Math.sqrt(variance), between: Number.isFinite(within) ? size * Math.sqrt(Math.max(0, variance - within)) : null,
    low: natural(mean - half), high: natural(mean + half),
  }
}

/**
 * Fits every cell of a condition alone, without weights, and takes mean and spread of the estimates (standard two-stage method: Davidian & Giltinan 1995, Nonlinear Models for Repeated Measurement Data, chapter 5; from memory).
 * @param condition - with cells
 * @param options - as for its means; weights do not count, a cell has one ratio per interval
 * @returns fits of cells and their common values, or why there are none
 */
export function fitCells(condition: ConditionData, options: Omit<FitOptions, 'weights'>): CellsFit | FitRefusal {
  if (condition.cells.length === 0) return refusal('no-cells', `“${condition.condition}” was given as a summary; there are no cells to fit.`)
  const byCell = new Map<string, CellPoint[]>()
  for (const point of condition.cells) byCell.set(point.cell, [...byCell.get(point.cell) ?? [], point])
  const cells = [...byCell].map(([cell, points]): OneCell => {
    const one = conditionOfCell(condition, cell, points), fit = fitCondition(one, { ...options, weights: 'none' })
    return 'refused' in fit ? { cell, points: one.points.length, fit: null, refused: fit.refused } : { cell, points: one.points.length, fit, refused: null }
  })
  const fits = cells.flatMap(({ fit }) => fit && usable(fit) ? [fit] : []), left = cells.length - fits.length
  const notes: FitNote[] = []
  if (left > 0) notes.push({ code: 'cells-left-out', message: `${left} of ${cells.length} cells are left out of the means: too few points, no settled fit, or a parameter on its bound.` })
  if (fits.length < FEWEST_CELLS) notes.push({ code: 'few-cells', message: `${fits.length} cells are too few for a claim; ${FEWEST_CELLS} are the least.` })
  return { cells, parameters: fits.length === 0 ? [] : fits[0]!.parameters.map((_, i) => overCells(fits, i)), notes }
}
