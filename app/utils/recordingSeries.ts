/** Recordings as what a figure draws: points with the standard error of their mean. */
import type { ConditionData, SummaryPoint } from '#shared/recordings/types'
import type { FigureSeries } from './figureSeries'

/** SEM as given, or from SD and n; null where neither is known [1]. */
export const semOf = (point: SummaryPoint): number | null => point.sem ?? (point.sd !== null && point.n ? point.sd / Math.sqrt(point.n) : null)

export function recordingSeries(data: readonly ConditionData[], labels: readonly string[] = []): FigureSeries[] {
  return data.map((one, i) => {
    const points = one.points.filter(point => point.aside === null && point.intervalMs > 0)
    return {
      id: `recording-${i}`, kind: 'recording', label: labels[i] || one.condition,
      times: points.map(point => point.intervalMs / 1000), values: points.map(point => point.ratio), errors: points.map(semOf),
    }
  })
}

/** “11 points, SEM, n 8 to 9”. */
export function recordingSummary({ points, cells }: ConditionData): string {
  const n = points.flatMap(point => point.n ?? []), low = Math.min(...n), high = Math.max(...n)
  const bars = points.some(point => semOf(point) !== null) ? 'bars SEM' : 'no errors given'
  const count = `${points.length} ${points.length === 1 ? 'interval' : 'intervals'}`
  const names = new Set(cells.map(cell => cell.cell)).size
  return [count, ...(names > 0 ? [`${names} ${names === 1 ? 'cell' : 'cells'}`] : []), bars, ...(n.length > 0 ? [low === high ? `n ${low}` : `n ${low} to ${high}`] : [])].join(', ')
}
