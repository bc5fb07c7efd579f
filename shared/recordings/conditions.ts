/** Lines to conditions: means of cells, order by interval, two rows of one interval. */
import { UNTOUCHED, type CellPoint, type ConditionData, type SummaryPoint } from './types'
import { correctRunDown } from './rundown'
import type { ReadingChoices } from './choices'
import type { ConditionCount, KeptValues } from './reading'

/** Names where a file gives none. */
export const UNNAMED = { condition: 'recording', protocol: 'protocol' } as const
export interface NamedLine { line: number, kept: KeptValues, protocol: string, manipulation: string }

const byInterval = <T extends { intervalMs: number }>(points: T[]): T[] => [...points].sort((a, b) => a.intervalMs - b.intervalMs)
const sum = (values: number[]) => values.reduce((total, value) => total + value, 0)

/**
 * Mean, SD (n − 1) and SEM over cells at each interval. Lost cells and those set aside do not count; a cell that was measured twice counts once, with its mean.
 * @param cells - cells of one condition
 * @returns points sorted by interval [ms, 1]; n = 1 has neither SD nor SEM
 */
export function meansOfCells(cells: CellPoint[]): SummaryPoint[] {
  const intervals = new Map<number, Map<string, number[]>>()
  for (const { cell, intervalMs, ratio, aside } of cells) {
    if (ratio === null || aside !== null) continue
    const at = intervals.get(intervalMs) ?? new Map<string, number[]>()
    intervals.set(intervalMs, at.set(cell, [...at.get(cell) ?? [], ratio]))
  }
  return byInterval([...intervals].map(([intervalMs, at]): SummaryPoint => {
    const values = [...at.values()].map(repeats => sum(repeats) / repeats.length), n = values.length, ratio = sum(values) / n
    const sd = n > 1 ? Math.sqrt(sum(values.map(value => (value - ratio) ** 2)) / (n - 1)) : null
    return { intervalMs, ratio, sd, sem: sd === null ? null : sd / Math.sqrt(n), n, aside: null, line: null }
  }))
}

/** Several points of one interval as one, weighted by n; alike where an n is not known. */
function merged(points: SummaryPoint[]): SummaryPoint {
  const [first] = points as [SummaryPoint, ...SummaryPoint[]], known = points.every(point => point.n !== null)
  const weights = points.map(point => known ? point.n! : 1), total = sum(weights), ratio = sum(points.map((point, i) => weights[i]! * point.ratio)) / total
  if (!known) {
    const sem = points.every(point => point.sem !== null) ? Math.sqrt(sum(points.map(point => point.sem! ** 2))) / points.length : null
    return { ...first, ratio, sd: null, sem, n: null }
  }
  const within = points.every(point => point.sd !== null || point.n === 1) ? sum(points.map(point => (point.n! - 1) * (point.sd ?? 0) ** 2)) : null
  const sd = within === null || total < 2 ? null : Math.sqrt((within + sum(points.map(point => point.n! * (point.ratio - ratio) ** 2))) / (total - 1))
  return { ...first, ratio, sd, sem: sd === null ? null : sd / Math.sqrt(total), n: total }
}

function mergeEqual(points: SummaryPoint[]): SummaryPoint[] {
  const groups = new Map<number, SummaryPoint[]>()
  for (const point of points) if (point.aside === null) groups.set(point.intervalMs, [...groups.get(point.intervalMs) ?? [], point])
  return byInterval([...points.filter(point => point.aside !== null), ...[...groups.values()].map(group => group.length === 1 ? group[0]! : merged(group))])
}

/** Errors of 0 that stand for “the smallest other”: 0 is left only where no other is known, and then nothing is known. */
function liftZeros(points: SummaryPoint[]): SummaryPoint[] {
  const smallest = (key: 'sd' | 'sem') => Math.min(...points.map(point => point[key]).filter((value): value is number => value !== null && value > 0))
  const lift = (value: number | null, least: number) => value !== 0 ? value : Number.isFinite(least) ? least : null
  const sd = smallest('sd'), sem = smallest('sem')
  return points.map(point => ({ ...point, sd: lift(point.sd, sd), sem: lift(point.sem, sem) }))
}

interface Group { condition: string, protocol: string, manipulation: string, lines: NamedLine[] }
const UNTOUCHED_WORDS = /^(?:none|untouched|no|control|without|ohne|keine)$/i

function grouped(lines: NamedLine[], choices: ReadingChoices, named: { protocol: boolean, manipulation: boolean }): Group[] {
  const groups = new Map<string, Group>()
  let untouched: string | null = null
  for (const one of lines) {
    const condition = one.kept.condition || choices.condition || UNNAMED.condition
    untouched ??= condition
    const protocol = (named.protocol ? one.protocol : '') || choices.protocol || UNNAMED.protocol
    const said = named.manipulation ? one.manipulation : condition === untouched ? '' : condition
    const manipulation = said === '' || UNTOUCHED_WORDS.test(said) ? choices.manipulation ?? UNTOUCHED : said
    const key = JSON.stringify([condition, protocol, manipulation]), group = groups.get(key) ?? { condition, protocol, manipulation, lines: [] }
    groups.set(key, group)
    group.lines.push(one)
  }
  return distinct([...groups.values()])
}

/** One name for each group: a condition under two protocols bears the protocol too. */
function distinct(groups: Group[]): Group[] {
  const times = (condition: string) => groups.filter(group => group.condition === condition).length
  const tell = ({ condition, protocol, manipulation }: Group) => {
    const twins = groups.filter(other => other.condition === condition), same = twins.filter(twin => twin.protocol === protocol).length
    return same === twins.length ? manipulation : same > 1 ? `${protocol}, ${manipulation}` : protocol
  }
  return groups.map(group => times(group.condition) > 1 ? { ...group, condition: `${group.condition}, ${tell(group)}`.slice(0, 120) } : group)
}

/**
 * Conditions of a table in the order of the file.
 * @param lines - lines that are kept
 * @param kind - means or single cells
 * @param choices - names where the file gives none, and what becomes of two rows of one interval
 * @param named - whether the file has columns of protocol and manipulation
 * @returns conditions, points sorted by interval, with counts of rows and of empty ones
 */
export function makeConditions(lines: NamedLine[], kind: 'summary' | 'cells', choices: ReadingChoices, named: { protocol: boolean, manipulation: boolean }): { conditions: ConditionData[], counts: ConditionCount[] } {
  const groups = grouped(lines, choices, named)
  const conditions = groups.map(({ lines: own, ...names }): ConditionData => {
    if (kind === 'cells') {
      const cells = own.map(({ line, kept }): CellPoint => ({ cell: kept.cell!, intervalMs: kept.intervalMs, ratio: kept.ratio, first: kept.first, aside: kept.aside, line }))
      const settled = choices.runDown === 'corrected' ? correctRunDown(cells).cells : cells
      return { ...names, points: meansOfCells(settled), cells: settled }
    }
    const points = byInterval(own.map(({ line, kept }): SummaryPoint => ({ intervalMs: kept.intervalMs, ratio: kept.ratio!, sd: kept.sd, sem: kept.sem, n: kept.n, aside: kept.aside, line })))
    const lifted = choices.zeroError === 'smallest' ? liftZeros(points) : points
    return { ...names, points: choices.duplicates === 'merge' ? mergeEqual(lifted) : lifted, cells: [] }
  })
  const counts = conditions.map(({ condition, points, cells }, i) => ({
    condition, points: points.length, cells: new Set(cells.map(one => one.cell)).size, rows: groups[i]!.lines.length, empty: cells.filter(one => one.ratio === null).length,
  }))
  return { conditions, counts }
}
