/** What slows refill, as bars: one a kind of site, each to its own τ, in three parts. */
import { decimals, digits, placesFor } from './figureNumber'
import { textWidth } from './figureLabels'

export interface PartsOfClass {
  name: string
  tauS: number
  collisionS: number
  failedHitsS: number
  depletion: { valueS: number, lowS: number | null, highS: number | null }
}
/** The part of an outcome that the bars read; a preview's outcome will do. */
export interface PartsSource {
  readonly classes: readonly {
    readonly name: string
    readonly sites: number
    readonly tau: { readonly valueS: number | null }
    readonly decomposition: { readonly collisionS: number | null, readonly failedHitsS: number | null, readonly depletionS: { readonly value: number | null, readonly low: number | null, readonly high: number | null } }
  }[]
}
/** Kinds of site whose three parts are all known. */
export function partsOfOutcome(outcome: PartsSource): PartsOfClass[] {
  return outcome.classes.flatMap(({ name, sites, tau, decomposition }) => {
    const { collisionS, failedHitsS, depletionS } = decomposition
    if (sites === 0 || tau.valueS === null || collisionS === null || failedHitsS === null || depletionS.value === null) return []
    return [{ name: `${name[0]!.toUpperCase()}${name.slice(1)} sites`, tauS: tau.valueS, collisionS, failedHitsS, depletion: { valueS: depletionS.value, lowS: depletionS.low, highS: depletionS.high } }]
  })
}
export interface DrawnPart { key: string, name: string, depth: 1 | 3 | 5, left: number, width: number, value: string, percent: string }
export interface DrawnClass { name: string, tau: string, top: number, parts: DrawnPart[] }
export interface PartsLayout { width: number, height: number, narrow: boolean, classes: DrawnClass[] }

/** A part whose interval spans zero is not resolved; one that is negative (vesicles in each other's way arrive more evenly) says so. */
function depletionValue({ valueS, lowS, highS }: PartsOfClass['depletion']): string {
  if (lowS === null || highS === null) return `${digits(valueS, 2)} s`
  const half = (highS - lowS) / 2
  const places = Math.max(0, placesFor(half) - 1)
  const value = `${decimals(valueS, places)} ± ${decimals(half, places)} s`
  return lowS <= 0 && highS >= 0 ? `${value}, not resolved` : value
}

const percentText = (share: number) => `${decimals(share * 100, Math.abs(share) < 0.095 ? 1 : 0)} %`

function partsOf(one: PartsOfClass, left: number, width: number): DrawnPart[] {
  const tau = one.tauS
  const drawn = Math.max(tau, one.collisionS + one.failedHitsS)
  const scale = width / drawn
  const parts = [
    { key: 'collision', name: 'Collisions', depth: 1 as const, seconds: one.collisionS, value: `${digits(one.collisionS, 2)} s` },
    { key: 'failed', name: 'Failed hits', depth: 3 as const, seconds: one.failedHitsS, value: `${digits(one.failedHitsS, 2)} s` },
    { key: 'depletion', name: 'Depletion', depth: 5 as const, seconds: one.depletion.valueS, value: depletionValue(one.depletion) },
  ]
  let at = left
  return parts.map((part) => {
    const wide = Math.max(0, part.seconds) * scale
    const drawnPart = { key: part.key, name: part.name, depth: part.depth, left: at, width: wide, value: part.value, percent: percentText(part.seconds / tau) }
    at += wide
    return drawnPart
  })
}

/** Bars for a width [px]; below 560 px the names stand in a list under each bar. */
export function layParts(classes: readonly PartsOfClass[], widthPx: number): PartsLayout {
  const narrow = widthPx < 560
  const left = narrow ? 0 : 132
  const step = narrow ? 132 : 70
  return {
    width: widthPx, narrow, height: narrow ? classes.length * step + 6 : classes.length * step + 8,
    classes: classes.map((one, i) => ({
      name: one.name, tau: `τ ${digits(one.tauS, 3)} s`, top: narrow ? i * step + 38 : i * step + 22,
      parts: partsOf(one, left, widthPx - left - (narrow ? 0 : 8)),
    })),
  }
}

export interface PartLabel { key: string, x: number, above: boolean, anchor: 'start' | 'end', part: DrawnPart }
/** Names above the bar from left to right; one that would run into its neighbour goes below it. */
export function partLabels(drawn: DrawnClass, rightEdge: number): PartLabel[] {
  const wide = (part: DrawnPart) => textWidth(part.name, true) + textWidth(part.value) + textWidth(part.percent) + 16
  const ends = { above: 0, below: 0 }
  return drawn.parts.map((part) => {
    const fits = part.left + wide(part) <= rightEdge
    const anchor = fits ? 'start' as const : 'end' as const
    const x = fits ? part.left : rightEdge
    const from = fits ? x : x - wide(part)
    const small = part.width < wide(part) * 0.5 && drawn.parts.some(other => other !== part && other.width > part.width * 4)
    const above = !small && from >= ends.above
    const row = above ? 'above' : 'below'
    ends[row] = Math.max(ends[row], from + wide(part) + 14)
    return { key: part.key, x, above, anchor, part }
  })
}
