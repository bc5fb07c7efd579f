/** The verdict rule: when an explanation is preferred, and when nothing can be told. Its error rates were measured; `npm run calibrate` measures them again. */
import { log } from '../elementary'
import { excessScatter, knownErrorCriterion } from '../criteria'
import { chiSquaredAbove } from '../tails'
import type { Explanation } from './explanations'
import type { TypedDepletion } from './joint-problem'
import type { WeighData } from './prepare'
import type { Found } from './search'
import { testSpread, type SpreadTest } from './spread-test'

export const ACCEPTABLE_P = 0.001
/** How far ahead the best must be of every other, and of one kind. */
export const AHEAD = 6
export const AHEAD_OF_ONE_KIND = 10
/** What a richer explanation must gain in χ²/s to unseat one kind: with one more parameter, with two or more. */
export const GAIN_OF_ONE = 7
export const GAIN_OF_MORE = 10
/** From means alone nothing is preferred where cells differ by more. */
const MOST_SD = 0.1

export interface Ranked {
  explanation: Explanation
  found: Found
  free: number
  dof: number
  criterion: number
  /** Behind the best by the criterion. */
  behind: number
  /** P of a χ² as large; null where the errors come from the scatter. */
  p: number | null
  acceptable: boolean
}

export interface NamedChange { manipulation: string, place: number, named: boolean, alternatives: { place: number, behind: number }[] }

export interface Judgement {
  kind: 'prefers' | 'cannot-tell'
  rule: 'suffices' | 'ahead' | 'tied' | 'none-acceptable' | 'cells-differ'
  explanation: Explanation | null
  /** Of `ahead`: distance to the next. Of `suffices`: least that a richer one would still have to gain. Else distance between the first two. */
  margin: number
  /** Within the margin of the best, best first. */
  within: Explanation[]
  scale: number
  ranked: Ranked[]
  changes: NamedChange[]
  spread: SpreadTest | null
}

/**
 * Criterion of a fit: χ²/s + 2k where errors are known; AICc of the scatter where they are not (Hurvich & Tsai 1989, Biometrika 76:297).
 * @param found - a candidate
 * @param data - that it was fitted to
 * @param scale - s [1]
 * @returns the criterion; smaller is better [1]
 */
export function criterionOf(found: Found, data: WeighData, scale: number): number {
  const k = found.parameters.length, n = data.points
  if (data.noise.kind !== 'scatter') return knownErrorCriterion(found.chi2, scale, k)
  const counted = k + 1
  return n * log(Math.max(found.chi2, 1e-300) / n) + 2 * counted + (n > counted + 1 ? 2 * counted * (counted + 1) / (n - counted - 1) : Infinity)
}

/** What a richer fit gains over a smaller one, in units of χ²/s. */
function gain(smaller: Found, richer: Found, data: WeighData, scale: number): number {
  return data.noise.kind === 'scatter' ? data.points * log(smaller.chi2 / Math.max(richer.chi2, 1e-300)) : (smaller.chi2 - richer.chi2) / scale
}

function rank(found: ReadonlyMap<Explanation, readonly Found[]>, data: WeighData): { ranked: Ranked[], scale: number } {
  const best = [...found].flatMap(([explanation, list]) => list[0] ? [{ explanation, found: list[0] }] : [])
  const least = best.reduce((a, b) => b.found.chi2 < a.found.chi2 ? b : a).found
  const scale = data.noise.kind === 'scatter' ? 1 : excessScatter(least.chi2, data.points - least.parameters.length)
  const ranked = best.map(({ explanation, found: one }): Ranked => {
    const free = one.parameters.length, dof = data.points - free, p = data.noise.kind === 'scatter' || dof < 1 ? null : chiSquaredAbove(one.chi2, dof)
    return { explanation, found: one, free, dof, criterion: criterionOf(one, data, scale), behind: 0, p, acceptable: p === null || p >= ACCEPTABLE_P }
  }).sort((a, b) => a.criterion - b.criterion)
  for (const one of ranked) one.behind = one.criterion - ranked[0]!.criterion
  return { ranked, scale }
}

/** Rule (a): how much the nearest richer explanation would still have to gain; negative where one gains enough. */
function roomOfOneKind(ranked: readonly Ranked[], data: WeighData, scale: number): number | null {
  const one = ranked.find(({ explanation }) => explanation === 'one-kind')
  if (!one?.acceptable) return null
  const rooms = ranked.filter(other => other !== one).map(other => (other.free - one.free <= 1 ? GAIN_OF_ONE : GAIN_OF_MORE) - gain(one.found, other.found, data, scale))
  return rooms.length === 0 ? null : Math.min(...rooms)
}

/** Distance that an explanation keeps to the best counted against what is needed. */
const needed = (explanation: Explanation) => explanation === 'one-kind' ? AHEAD_OF_ONE_KIND : AHEAD

/**
 * What each manipulation changed under one explanation, and whether the next change is far enough behind to say so.
 * @param list - candidates of the explanation, best first
 * @param data - that they were fitted to
 * @param scale - s [1]
 * @returns one entry per manipulation
 */
export function changesOf(list: readonly Found[], data: WeighData, scale: number): NamedChange[] {
  const best = list[0]!, of = (found: Found) => criterionOf(found, data, scale)
  const sorted = [...list].sort((a, b) => of(a) - of(b)), lead = sorted[0] ?? best
  return [...lead.changes].map(([manipulation, place]) => {
    const nearest = new Map<number, number>()
    for (const found of sorted) {
      const other = found.changes.get(manipulation)!
      if (other !== place && !nearest.has(other)) nearest.set(other, of(found) - of(lead))
    }
    const alternatives = [...nearest].map(([other, behind]) => ({ place: other, behind })).filter(({ behind }) => behind < AHEAD)
    return { manipulation, place, named: alternatives.length === 0, alternatives }
  })
}

/**
 * Judges what a search found.
 * @param found - candidates per explanation, best first
 * @param data - that they were fitted to
 * @param settings - typed depletions; whether the means are weighted by their cells' covariance
 * @returns the verdict and the ranking behind it
 */
export function judge(found: ReadonlyMap<Explanation, readonly Found[]>, data: WeighData, settings: { typed: TypedDepletion, cells: boolean }): Judgement {
  const { ranked, scale } = rank(found, data), spread = testSpread(found.get('spread')?.[0], data, settings.typed)
  const best = ranked[0]!, others = ranked.slice(1), within = ranked.filter(one => one === best || one.behind < needed(one.explanation)).map(one => one.explanation)
  const base = { scale, ranked, spread, within, changes: [] as NamedChange[], explanation: null, margin: others[0]?.behind ?? 0 }
  const prefer = (explanation: Explanation, rule: 'suffices' | 'ahead', margin: number): Judgement =>
    ({ ...base, kind: 'prefers', rule, explanation, margin, changes: changesOf(found.get(explanation)!, data, scale), within: rule === 'ahead' ? [explanation] : within })
  const room = roomOfOneKind(ranked, data, scale)
  if (room !== null && room > 0) return prefer('one-kind', 'suffices', room)
  if (!best.acceptable) return { ...base, kind: 'cannot-tell', rule: 'none-acceptable' }
  const cellsDiffer = !settings.cells && (spread?.reading === 'between-cells' || (data.noise.pooledSd ?? 0) > MOST_SD)
  const ahead = best.explanation !== 'one-kind' && others.every(one => one.behind >= needed(one.explanation))
  if (ahead && !cellsDiffer) return prefer(best.explanation, 'ahead', base.margin)
  return { ...base, kind: 'cannot-tell', rule: ahead ? 'cells-differ' : 'tied' }
}
