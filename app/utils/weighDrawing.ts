/** Lays a weigh-up figure out in pixels: a column a condition with ratios above and one strip of deviations an explanation below. Pure; the component only sets it. */
import { line } from 'd3-shape'
import { formatNumber } from '#shared/units'
import type { WeighCandidate, WeighUp } from '#shared/schemas/weigh-up'
import type { TimeAxis, ValueAxis } from './figureAxis'
import { textWidth, type Box } from './figureLabels'
import { errorOf, intervalAxis, ratioAxis, ratioReach, STRIP_REACH } from './weighAxes'

export interface WeighOptions {
  width: number
  weighUp: Pick<WeighUp, 'conditions' | 'candidates' | 'criterion'>
  /** Strips in ratio instead of standard errors. */
  inRatio?: boolean
}
/** A deviation: `in` within two standard errors, `out` beyond, `up` and `down` beyond the strip. */
export interface Lollipop { key: string, kind: 'in' | 'out' | 'up' | 'down', x: number, y: number, stem: string, triangle: string | null }
export interface WeighStrip { key: string, box: Box, middle: number, tint: string, lollipops: Lollipop[] }
export interface WeighPanel {
  key: string
  frame: Box
  title: string
  below: string
  time: TimeAxis
  curves: { key: string, className: string, d: string }[]
  points: { key: string, x: number, y: number, error: string | null }[]
  strips: WeighStrip[]
  /** Foot of the last strip, where the axis has its numbers. */
  footY: number
}
/** Name of an explanation with a sample of its line. */
export interface WeighName { key: string, className: string, sample: string, x: number, y: number, name: string, criterion: string, criterionX: number, criterionY: number }
export interface WeighSide { key: string, names: WeighName[], words: { key: string, text: string, soft: boolean, x: number, y: number, anchor: 'start' | 'end' }[] }
export interface WeighLayout { width: number, height: number, columns: number, narrow: boolean, values: ValueAxis[], panels: WeighPanel[], sides: WeighSide[], reach: number, reachText: string }

/** Drawing classes in the order of the candidates; the leading one is drawn like a walk. */
export const WEIGH_CLASSES = ['sim', 'exp', 'third', 'fourth', 'fifth', 'sixth'] as const
const Y_TITLE = 'Second response over first'
const X_TITLE = 'Interval between stimuli (s)'
const GAP = 22, RIGHT = 12, NARROW_LEFT = 44

/** Best candidate of each explanation, in the order of the document. */
export const bestOf = (candidates: readonly WeighCandidate[]) => candidates.filter(one => one.best)
/** `a limited store` → `Limited store`. */
export const nameInFigure = (name: string) => name.replace(/^an? /, '').replace(/^./u, first => first.toUpperCase())
/** χ² where errors are known; AICc where the scatter tells them, because χ² then says nothing. */
export function criterionWord(candidate: WeighCandidate, criterion: WeighUp['criterion']): string {
  const value = criterion === 'chi2' ? candidate.chi2 : candidate.criterion
  return `${criterion === 'chi2' ? 'χ²' : 'AICc'} ${formatNumber(value, { significant: Math.abs(value) >= 100 ? 4 : 3 })}`
}

/** Columns side by side: one below 560 px, two below 900 px, else up to four in rows of alike length. */
export function columnsFor(width: number, count: number): number {
  if (width < 560 || count < 2) return 1
  return width < 900 ? 2 : Math.ceil(count / Math.ceil(count / 4))
}

function elided(text: string, room: number, strong = false): string {
  if (textWidth(text, strong) <= room) return text
  let kept = [...text]
  while (kept.length > 1 && textWidth(`${kept.join('')}…`, strong) > room) kept = kept.slice(0, -1)
  return `${kept.join('').trimEnd()}…`
}

/** `8–9 cells`, or nothing where no point says how many. */
export function cellsWord(points: WeighUp['conditions'][number]['points']): string {
  const counts = points.flatMap(({ n }) => n === null ? [] : [n])
  if (counts.length === 0) return ''
  const least = Math.min(...counts), most = Math.max(...counts)
  return `${least === most ? most : `${least}–${most}`} ${most === 1 ? 'cell' : 'cells'}`
}

function belowTitle({ protocol, points }: WeighUp['conditions'][number], room: number): string {
  const cells = cellsWord(points), tail = cells && protocol ? `, ${cells}` : cells
  return elided(protocol, room - textWidth(tail)) + tail
}

/** Measures of the figure for one width [px]. */
interface Measures { columns: number, narrow: boolean, left: number, wide: number, frameTop: number, frameHeight: number, pitch: number, half: number, firstStrip: number, rowHeight: number }
function measure({ width, weighUp }: WeighOptions, best: readonly WeighCandidate[], reachText: string): Measures {
  const columns = columnsFor(width, weighUp.conditions.length), narrow = width < 560
  const names = best.map(one => Math.max(textWidth(nameInFigure(one.name), true), textWidth(criterionWord(one, weighUp.criterion))))
  const left = narrow ? NARROW_LEFT : Math.ceil(Math.max(12 + textWidth(Y_TITLE) + 40, 54 + Math.max(0, ...names) + 28 + textWidth(reachText)))
  const wide = (width - left - RIGHT - GAP * (columns - 1)) / columns
  const frameTop = narrow ? 64 : 56
  const frameHeight = narrow ? 170 : width < 900 ? Math.round(Math.min(220, Math.max(165, wide * 0.62))) : Math.round(Math.min(250, Math.max(180, wide * 0.97)))
  // Tighter in narrow columns: two rows of two with six explanations still fit a printed page.
  const tight = !narrow && width < 900 && columns > 1
  const pitch = narrow ? 56 : tight ? 40 : 50, half = narrow || tight ? 15 : 19
  const firstStrip = frameTop + frameHeight + (narrow ? 55 : half + 20)
  return { columns, narrow, left, wide, frameTop, frameHeight, pitch, half, firstStrip, rowHeight: firstStrip + pitch * (best.length - 1) + half + (narrow ? 51 : 40) }
}

const px = (value: number) => value.toFixed(1)

function curvePath(gridS: readonly number[], curve: readonly number[], time: TimeAxis, values: ValueAxis): string {
  const points = gridS.flatMap((timeS, i) => timeS < time.fromS || timeS > time.toS || !Number.isFinite(curve[i]) ? [] : [[time.place(timeS), values.place(curve[i]!)] as [number, number]])
  return line().digits(1)(points) ?? ''
}

function lollipop(key: string, x: number, residual: number, share: number, middle: number, half: number): Lollipop {
  const beyond = Math.abs(share) > 1
  const y = middle - half * Math.max(-1, Math.min(1, share))
  const way = share > 0 ? -5 : 5
  return {
    key, x, y, kind: beyond ? share > 0 ? 'up' : 'down' : Math.abs(residual) <= 2 ? 'in' : 'out',
    stem: `M${px(x)} ${px(middle)}V${px(y)}`, triangle: beyond ? `M${px(x - 4)} ${px(y)}h8l-4 ${way}z` : null,
  }
}

/** The tint of ±2 standard errors: a bar, or in ratio as wide as each point's own error. */
function tintPath(box: Box, middle: number, halves: readonly { x: number, half: number }[] | null): string {
  if (!halves) {
    const half = (box.bottom - box.top) / STRIP_REACH
    return `M${px(box.left)} ${px(middle - half)}H${px(box.right)}V${px(middle + half)}H${px(box.left)}Z`
  }
  if (halves.length === 0) return ''
  const most = middle - box.top
  const edge = [{ ...halves[0]!, x: box.left }, ...halves, { ...halves.at(-1)!, x: box.right }].map(({ x, half }) => ({ x, half: Math.min(most, half) }))
  const way = (sign: number) => edge.map(({ x, half }) => `${px(x)} ${px(middle + sign * half)}`)
  return `M${[...way(-1), ...way(1).reverse()].join('L')}Z`
}

interface Setting { options: WeighOptions, best: WeighCandidate[], measures: Measures, reach: number }

function stripOf(c: number, k: number, frame: Box, time: TimeAxis, top: number, { options, best, measures, reach }: Setting): WeighStrip {
  const { pitch, half, firstStrip } = measures, candidate = best[k]!
  const middle = top + firstStrip + pitch * k, box = { left: frame.left, right: frame.right, top: middle - half, bottom: middle + half }
  const drawn = options.weighUp.conditions[c]!.points.flatMap(({ timeS, error }, i) => {
    const residual = candidate.residuals[c]?.[i]
    return timeS > 0 && residual !== undefined && Number.isFinite(residual) ? [{ i, x: time.place(timeS), residual, error: errorOf(error, candidate) }] : []
  })
  const unit = (error: number) => options.inRatio ? error / reach : 1 / STRIP_REACH
  return {
    key: candidate.explanation, box, middle,
    tint: tintPath(box, middle, options.inRatio ? drawn.map(({ x, error }) => ({ x, half: 2 * half * unit(error) })).sort((a, b) => a.x - b.x) : null),
    lollipops: drawn.map(({ i, x, residual, error }) => lollipop(`${candidate.explanation}-${i}`, x, residual, residual * unit(error), middle, half)),
  }
}

function panelOf(c: number, setting: Setting, values: ValueAxis): WeighPanel {
  const { options: { weighUp }, best, measures } = setting, condition = weighUp.conditions[c]!
  const top = Math.floor(c / measures.columns) * measures.rowHeight, left = measures.left + (c % measures.columns) * (measures.wide + GAP)
  const frame = { left, right: left + measures.wide, top: top + measures.frameTop, bottom: top + measures.frameTop + measures.frameHeight }
  const time = intervalAxis(weighUp.conditions, frame.left, frame.right)
  const within = (value: number) => values.place(Math.max(values.from, Math.min(values.to, value)))
  const strips = best.map((_, k) => stripOf(c, k, frame, time, top, setting))
  return {
    key: `${c}-${condition.condition}`, frame, time, strips, footY: (strips.at(-1)?.middle ?? frame.bottom) + measures.half + 6,
    title: elided(condition.condition, measures.wide, true), below: belowTitle(condition, measures.wide),
    // The leading curve is drawn last and lies on top.
    curves: best.map((one, k) => ({ key: one.explanation, className: WEIGH_CLASSES[k % WEIGH_CLASSES.length]!, d: curvePath(condition.gridS, one.curves[c] ?? [], time, values) })).reverse(),
    points: condition.points.flatMap(({ timeS, ratio, error }, i) => timeS > 0
      ? [{ key: String(i), x: time.place(timeS), y: within(ratio), error: error ? `M${px(time.place(timeS))} ${px(within(ratio - error))}V${px(within(ratio + error))}` : null }]
      : []),
  }
}

/** Names beside the strips, or above each strip where one column stands alone. */
function sideOf(row: number, values: ValueAxis, { options: { weighUp, width }, best, measures }: Setting, reachText: string): WeighSide {
  const { narrow, left, half, frameTop, firstStrip, pitch, rowHeight } = measures, top = row * rowHeight
  const barred = weighUp.conditions.some(one => one.points.some(({ error }) => error !== null))
  const names = best.map((one, k): WeighName => {
    const middle = top + firstStrip + pitch * k, y = narrow ? middle - half - 13 : middle, x = narrow ? left : 12
    const name = nameInFigure(one.name), named = x + (narrow ? 38 : 42)
    return {
      key: one.explanation, className: WEIGH_CLASSES[k % WEIGH_CLASSES.length]!, sample: `M${x} ${px(y)}h${narrow ? 30 : 34}`, x: named, y: y + 4, name,
      criterion: criterionWord(one, weighUp.criterion), criterionX: narrow ? width - RIGHT : named, criterionY: narrow ? y + 4 : y + 20,
    }
  })
  const foot = top + firstStrip + pitch * Math.max(0, best.length - 1) + half + 6
  const word = (key: string, text: string, soft: boolean, x: number, y: number, anchor: 'start' | 'end' = 'start') => ({ key, text, soft, x, y, anchor })
  const titles = narrow
    ? [word('y', elided(`${Y_TITLE}${barred ? ' ± standard error' : '; no error is known'}`, width - left - RIGHT), true, left, top + frameTop - 8), word('x', X_TITLE, true, width - RIGHT, foot + 37, 'end')]
    : [word('y', Y_TITLE, false, 12, top + frameTop - 10), word('y2', barred ? 'ratio ± standard error' : 'ratio; no error is known', true, 12, top + frameTop + 6), word('x', X_TITLE, true, 12, foot + 21)]
  const ticks = values.ticks.map(tick => word(`v${tick.at}`, tick.text!, true, left - 8, values.place(tick.at) + 4, 'end'))
  const ends = best.length ? [word('+', `+${reachText}`, true, left - 8, top + firstStrip - half + 4, 'end'), word('-', `−${reachText}`, true, left - 8, top + firstStrip + half + 4, 'end')] : []
  return { key: `r${row}`, names, words: [...titles, ...ticks, ...ends] }
}

/**
 * Everything that is drawn, in pixels.
 * @param options - width [px], weigh-up, unit of the strips
 * @returns one panel a condition and one side a row of panels
 */
export function layWeighUp(options: WeighOptions): WeighLayout {
  const width = Math.max(240, Math.round(options.width)), { weighUp, inRatio = false } = options
  const best = bestOf(weighUp.candidates)
  const reach = inRatio ? ratioReach(weighUp.conditions, best[0]) : STRIP_REACH, reachText = formatNumber(reach, { significant: 1 })
  const measures = measure({ ...options, width }, best, reachText)
  const setting = { options: { ...options, width }, best, measures, reach }
  const rows = Math.max(1, Math.ceil(weighUp.conditions.length / measures.columns))
  const values = Array.from({ length: rows }, (_, row) => {
    const top = row * measures.rowHeight + measures.frameTop
    return ratioAxis(weighUp.conditions, best, top, top + measures.frameHeight)
  })
  return {
    width, height: Math.ceil(rows * measures.rowHeight), columns: measures.columns, narrow: measures.narrow, values, reach, reachText,
    panels: weighUp.conditions.map((_, c) => panelOf(c, setting, values[Math.floor(c / measures.columns)]!)),
    sides: values.map((axis, row) => sideOf(row, axis, setting, reachText)),
  }
}
