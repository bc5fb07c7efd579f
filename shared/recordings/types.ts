/** Recovery data as every part of the product reads them: one condition after another, times in ms, ratios as fractions. */

/** A point of a curve: mean ratio of second to first response over cells. */
export interface SummaryPoint {
  /** End of the first stimulus to the start of the second [ms]. */
  intervalMs: number
  /** Second over first response; noise may carry it below 0 or above 1 [1]. */
  ratio: number
  /** Standard deviation between cells [1]; null where the file has none. */
  sd: number | null
  /** Standard error of the mean [1]; null where the file has none. */
  sem: number | null
  /** Cells behind the mean [count]; null where the file has none. */
  n: number | null
  /** Why it stays out of fits while it stays visible; null where it counts. */
  aside: string | null
  /** Line of the file that it was read from; null where it was made from cells. */
  line: number | null
}

/** One cell at one interval. */
export interface CellPoint {
  cell: string
  intervalMs: number
  /** Null: the cell was lost at this interval [1]. */
  ratio: number | null
  /** First response, where the file gives it, in the file's own unit: for run-down. */
  first: number | null
  aside: string | null
  line: number | null
}

/** What was recorded under one condition. */
export interface ConditionData {
  condition: string
  /** Conditions of one protocol share the depletion by the first stimulus. */
  protocol: string
  /** Conditions of one manipulation share all parameters; `none` is the untouched one. */
  manipulation: string
  /** Sorted by interval. Where cells are given these are their means (SD with n − 1, SEM = SD/√n). */
  points: SummaryPoint[]
  /** Empty where only a summary was given. */
  cells: CellPoint[]
}

export const UNTOUCHED = 'none'
