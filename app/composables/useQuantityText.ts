/** The text of one quantity field: kept as typed, read at every key, set in order when it is committed. */
import { convert, formatForField, parseQuantity, percentHint, type UnitSymbol } from '#shared/units'

export interface QuantityLimits { min?: number, max?: number, /** Above `min`, not at it. */ aboveMin?: boolean, whole?: boolean, what?: string, /** The question for a value that looks like a slip of the unit. */ slip?: (value: number) => { sentence: string } | null }
export interface QuantityChoice { value: number, shown: string }
export interface QuantityReading { value?: number, problem?: string, choices?: readonly QuantityChoice[] }

/**
 * Reads a text into the stored unit and judges it against the field's limits.
 * @param text - as typed
 * @param shownUnit - the unit beside the box
 * @param storedUnit - the unit that the value is kept in
 */
export function readQuantity(text: string, shownUnit: UnitSymbol, storedUnit: UnitSymbol, limits: QuantityLimits, decimal: '.' | ','): QuantityReading {
  const reading = parseQuantity(text, shownUnit, { decimal })
  if (reading.kind === 'ambiguous') return { problem: reading.sentence, choices: reading.readings }
  if (reading.kind !== 'ok') return { problem: reading.sentence }
  const value = convert(reading.value, shownUnit, storedUnit)
  const problem = limitProblem(value, shownUnit, storedUnit, limits, decimal)
  return problem ? { problem } : { value }
}

function limitProblem(value: number, shownUnit: UnitSymbol, storedUnit: UnitSymbol, limits: QuantityLimits, decimal: '.' | ','): string | undefined {
  const { min = -Infinity, max = Infinity } = limits
  const inside = value >= min && value <= max && !(limits.aboveMin && value === min)
  if (inside) return limits.whole && !Number.isInteger(value) ? 'A whole number is wanted here.' : undefined
  const say = (limit: number) => formatForField(convert(limit, storedUnit, shownUnit), decimal)
  const unit = shownUnit === '1' || shownUnit === 'count' ? '' : ` ${shownUnit}`
  const from = limits.aboveMin ? `above ${say(min)}` : say(min)
  const allowed = limits.what ?? (max === Infinity ? `Allowed: ${limits.aboveMin ? '' : 'at least '}${from}${unit}.` : `Allowed: ${from} to ${say(max)}${unit}.`)
  const slip = limits.slip?.(value)
  if (slip) return `${allowed} ${slip.sentence}`
  const percent = max === 1 ? percentHint(value) : null
  return percent ? `${allowed} If you mean ${formatForField(value, decimal)} %, type ${formatForField(percent.value, decimal)}.` : allowed
}

/**
 * One press of an arrow: one unit of the second leading digit, ten times that with Shift, held inside the limits.
 * @param value - where it stands, in the shown unit
 * @param steps - presses, negative for down
 */
export function stepped(value: number, steps: number, limits: { min?: number, max?: number, whole?: boolean, step?: number }): number {
  const size = limits.step ?? (limits.whole ? 1 : value === 0 ? 0.01 : 10 ** (Math.floor(Math.log10(Math.abs(value))) - 1))
  const next = Number((value + steps * size).toPrecision(12))
  return Math.min(limits.max ?? Infinity, Math.max(limits.min ?? -Infinity, next))
}
