/** Field-by-field differences between two scenarios: history, conflict notice and comparison of outcomes read them. */
import { fieldName, type FieldName } from './fields'
import type { Scenario } from './scenario'

export interface Difference extends FieldName {
  path: string
  /** Stored value before and after; undefined where the field did not exist. */
  before: unknown
  after: unknown
}

/** Leaves of a document by path; empty lists and nulls are leaves too. */
export function leavesOf(value: unknown, path = ''): Map<string, unknown> {
  const leaves = new Map<string, unknown>()
  const walk = (node: unknown, at: string) => {
    const entries = node !== null && typeof node === 'object' ? Object.entries(node) : []
    if (entries.length === 0) leaves.set(at, Array.isArray(node) ? 'none' : node)
    for (const [key, child] of entries) walk(child, at === '' ? key : `${at}.${key}`)
  }
  walk(value, path)
  return leaves
}

/** What changed from one document to the other, in the order of the document. `format` and `version` never differ. */
export function scenarioDifferences(before: Scenario, after: Scenario): Difference[] {
  const old = leavesOf(before), now = leavesOf(after)
  const paths = [...new Set([...old.keys(), ...now.keys()])]
  return paths
    .filter(path => !Object.is(old.get(path), now.get(path)))
    .map(path => ({ ...fieldName(path, now.has(path) ? after : before), path, before: old.get(path), after: now.get(path) }))
}

/** A stored value in words: `none` for nothing, numbers as they are stored with a typographic minus. */
export function valueWords(value: unknown, unit = ''): string {
  if (value === undefined || value === null || value === '') return 'none'
  const text = typeof value === 'number' ? String(value).replace('-', '\u2212') : String(value)
  return unit && typeof value === 'number' ? `${text} ${unit}` : text
}

/** One line of history: “attachment 0.30 to 0.15 per hit; depletion …”, at most `most` parts named. */
export function differenceSentence(differences: Difference[], most = 3): string {
  if (differences.length === 0) return 'no field changed'
  const named = differences.slice(0, most).map((one) => {
    if (one.path === 'notes') return 'notes edited'
    if (one.before === undefined) return `${one.label} added, ${valueWords(one.after, one.unit)}`
    if (one.after === undefined) return `${one.label} removed`
    return `${one.label} ${valueWords(one.before)} to ${valueWords(one.after, one.unit)}`
  })
  const rest = differences.length - named.length
  return named.join('; ') + (rest > 0 ? `; and ${rest} more` : '')
}
