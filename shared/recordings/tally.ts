/** What is noticed while lines are read, gathered by kind and told once. */
import type { Question, Warning } from './reading'

export type NoteId = 'n-one' | 'contradiction' | 'from-half-width' | 'from-limits' | 'lopsided-limits' | 'outside-limits' | 'unweighted' | 'zero-interval' | 'ratio-disagrees' | 'zero-first'
  | 'no-n' | 'zero-error' | 'ragged' | 'nameless' | 'two-ways'
type Told = Exclude<NoteId, 'no-n' | 'zero-error' | 'ragged' | 'nameless' | 'two-ways'>

export class Tally {
  readonly missing: Record<string, number> = {}
  private readonly notes = new Map<NoteId, number[]>()
  countMissing(spelling: string): void {
    this.missing[spelling] = (Object.hasOwn(this.missing, spelling) ? this.missing[spelling]! : 0) + 1
  }

  note(id: NoteId, line: number): void {
    const lines = this.notes.get(id)
    if (lines) lines.push(line)
    else this.notes.set(id, [line])
  }

  linesOf(id: NoteId): number[] {
    return this.notes.get(id) ?? []
  }
}

/** “Line 7” or “Lines 7, 9 and 12”, with the rest counted. */
export function named(lines: number[]): string {
  const shown = lines.slice(0, 5), rest = lines.length - shown.length
  if (lines.length === 1) return `Line ${lines[0]}`
  return rest > 0 ? `Lines ${shown.join(', ')} and ${rest} more` : `Lines ${shown.slice(0, -1).join(', ')} and ${shown.at(-1)}`
}
const counted = (lines: number[], what: string) => `${lines.length} ${what}${lines.length === 1 ? '' : 's'}`

const WARNINGS: Record<Told, (lines: number[]) => string> = {
  'n-one': lines => `${named(lines)}: with n = 1 there is no SD and no SEM; none is kept.`,
  'contradiction': lines => `${named(lines)}: SEM does not equal SD/√n. Where n is known SD and n are used.`,
  'from-half-width': lines => `SEM of ${counted(lines, 'point')} is made from the 95 % half-width, by Student's t where n is known.`,
  'from-limits': lines => `SEM of ${counted(lines, 'point')} is made from the two 95 % limits, by Student's t where n is known.`,
  'lopsided-limits': lines => `${named(lines)}: the ratio does not lie midway between its limits; half of their distance is used.`,
  'outside-limits': lines => `${named(lines)}: the ratio lies outside of its own limits.`,
  'unweighted': lines => `${counted(lines, 'point')} came without an error that can be used; without one a point has no weight of its own.`,
  'zero-interval': lines => `${named(lines)}: an interval of 0 is kept; a logarithmic axis cannot show it.`,
  'ratio-disagrees': lines => `${named(lines)}: the stated ratio differs from second over first by more than their last digits allow. The stated one is kept.`,
  'zero-first': lines => `${named(lines)}: the first response is 0, so there is no ratio.`,
}

/** Warnings in a fixed order. */
export function warningsOf(tally: Tally): Warning[] {
  return (Object.keys(WARNINGS) as Told[]).filter(id => tally.linesOf(id).length > 0).map(id => ({ id, lines: tally.linesOf(id), sentence: WARNINGS[id](tally.linesOf(id)) }))
}

/** What must or may be asked of the lines. */
export function questionsOf(tally: Tally): Question[] {
  const ask = (id: NoteId, must: boolean, sentence: (lines: number[]) => string, options: Question['options'], suggested: number | null): Question[] => {
    const lines = tally.linesOf(id)
    return lines.length === 0 ? [] : [{ id, must, lines, sentence: sentence(lines), options, suggested }]
  }
  return [
    ...ask('ragged', true, lines => `${named(lines)} ${lines.length === 1 ? 'has' : 'have'} another number of cells than the table; shall they be taken as far as they fit?`,
      [{ label: 'take them', choices: { ragged: 'take' } }, { label: 'leave them out', choices: { ragged: 'leave' } }], null),
    ...ask('nameless', true, lines => `${named(lines)} name${lines.length === 1 ? 's' : ''} no condition or cell; does the name above hold for them too?`,
      [{ label: 'the name above holds', choices: { fillDown: true } }, { label: 'leave them out', choices: { fillDown: false } }], 0),
    ...ask('zero-error', true, lines => `${named(lines)}: an error of 0 would weigh without limit. Which is meant?`,
      [{ label: 'not known', choices: { zeroError: 'missing' } }, { label: 'the smallest other of the condition', choices: { zeroError: 'smallest' } }], null),
    ...ask('no-n', false, lines => `${counted(lines, 'point')} came without n. How many cells are behind a point? Until then n is not known.`,
      [{ label: 'not known', choices: { missingN: null } }], 0),
  ]
}
