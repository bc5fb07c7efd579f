/** Two rows of one interval, and rows out of order: told, never mended in silence. */
import type { ReadingChoices } from './choices'
import type { NamedLine } from './conditions'
import type { Question, Warning } from './reading'
import { named } from './tally'

const placeOf = ({ kept, protocol, manipulation }: NamedLine) => JSON.stringify([kept.condition, protocol, manipulation, kept.cell, kept.intervalMs])

/** Lines that repeat an interval of their condition (or cell), with the question of what becomes of them. */
export function findRepeats(lines: NamedLine[], kind: 'summary' | 'cells', choices: ReadingChoices): { questions: Question[], warnings: Warning[] } {
  const places = new Map<string, number[]>()
  for (const one of lines) {
    const at = places.get(placeOf(one))
    if (at) at.push(one.line)
    else places.set(placeOf(one), [one.line])
  }
  const repeated = [...places.values()].filter(at => at.length > 1).flat().sort((a, b) => a - b)
  if (repeated.length === 0) return { questions: [], warnings: [] }
  const what = kind === 'cells' ? 'one cell was measured more than once at one interval; in the mean it counts once.' : choices.duplicates === 'merge' ? 'rows of one interval are merged, weighted by n.' : 'rows of one interval are kept as points of their own.'
  const question: Question = {
    id: 'duplicates', must: false, lines: repeated, sentence: `${named(repeated)} repeat an interval; shall they stay points of their own?`, suggested: 0,
    options: [{ label: 'points of their own', choices: { duplicates: 'keep' } }, { label: 'merged, weighted by n', choices: { duplicates: 'merge' } }],
  }
  return { questions: kind === 'summary' && choices.duplicates === undefined ? [question] : [], warnings: [{ id: 'duplicates', lines: repeated, sentence: `${named(repeated)}: ${what}` }] }
}

/** Tells rows that the view sorts; the file keeps its order. */
export function unsortedWarning(lines: NamedLine[]): Warning[] {
  const last = new Map<string, number>(), falling: number[] = []
  for (const { line, kept, protocol, manipulation } of lines) {
    const series = JSON.stringify([kept.condition, protocol, manipulation, kept.cell]), before = last.get(series)
    if (before !== undefined && kept.intervalMs < before) falling.push(line)
    last.set(series, kept.intervalMs)
  }
  return falling.length === 0 ? [] : [{ id: 'unsorted', lines: falling, sentence: `${named(falling)}: the interval is shorter than in the row before. The view is sorted by interval; the file keeps its order.` }]
}

/** Conditions whose names differ by capitals or blanks only: perhaps one condition. */
export function alikeWarning(names: string[]): Warning[] {
  const fold = (name: string) => name.toLowerCase().replace(/[\s_-]+/g, ' ').trim()
  const alike = names.filter((name, i) => names.some((other, j) => j !== i && other !== name && fold(other) === fold(name)))
  return alike.length === 0 ? [] : [{ id: 'alike', lines: [], sentence: `${alike.map(name => `“${name}”`).join(' and ')} are read as different conditions; their names differ by capitals or blanks only.` }]
}
