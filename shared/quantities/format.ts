/** Writes numbers, quantities, errors and intervals with digits that make sense. */
import type { UnitSymbol } from './symbols'

export interface NumberStyle {
  /** Decimal mark; the point unless the person chose the comma. */
  decimal?: '.' | ','
  /** Significant digits (default 3). */
  significant?: number
}
const NARROW = '\u202F', MINUS = '\u2212', NO_BREAK = '\u00A0'

/** Display form of a plain decimal text: U+2212, narrow groups from five digits on (four keep together), the chosen mark. */
function dress(text: string, decimal: '.' | ',' = '.'): string {
  const [mantissa = '', exponent] = text.toLowerCase().split('e')
  const negative = mantissa.startsWith('-') && /[1-9]/.test(mantissa)
  const [whole = '', part] = mantissa.replace(/^[+-]/, '').split('.')
  const grouped = whole.length > 4 ? whole.replace(/\B(?=(\d{3})+$)/g, NARROW) : whole
  const power = exponent === undefined ? '' : `e${exponent.replace('+', '').replace('-', MINUS)}`
  return `${negative ? MINUS : ''}${grouped}${part === undefined ? '' : decimal + part}${power}`
}

/** Fixed notation with a number of decimals that may be negative (tens, hundreds). */
function fixed(value: number, decimals: number): string {
  if (Math.abs(value) >= 1e15 || decimals > 12) return value.toPrecision(3)
  if (decimals >= 0) return value.toFixed(decimals)
  const unit = 10 ** -decimals
  return String(Math.round(value / unit) * unit)
}

/** Decimals that show an error well: two digits where the first is 1 or 2, else one. */
function decimalsFor(error: number): number {
  const [first = '', exponent = ''] = error.toExponential(1).split('e')
  return Number(first) < 3 ? 1 - Number(exponent) : -Number(exponent)
}

/**
 * A number to significant digits, trailing zeros kept (they say how much is known).
 * @param value - any number
 * @param style - decimal mark, significant digits
 * @returns display text; a dash for what is not finite
 */
export function formatNumber(value: number, style: NumberStyle = {}): string {
  if (!Number.isFinite(value)) return '–'
  const significant = style.significant ?? 3
  if (value === 0) return '0'
  const size = Number(value.toExponential(significant - 1).split('e')[1])
  if (size < -4 || size >= 9) return dress(value.toExponential(significant - 1), style.decimal)
  return dress(fixed(value, Math.max(0, significant - 1 - size)), style.decimal)
}

/**
 * The shortest text that reads back as exactly this number: for fields and files, without groups.
 * @param value - a finite number
 * @param decimal - decimal mark (default the point)
 * @returns text that `parseQuantity` reads back to the same number under the same mark
 */
export function formatForField(value: number, decimal: '.' | ',' = '.'): string {
  if (!Number.isFinite(value)) return ''
  return String(Object.is(value, -0) ? 0 : value).replace('e+', 'e').replace('.', decimal)
}

/**
 * A number and its unit, held together by a no-break blank; `1` shows no unit.
 * @param value - number in `unit`
 * @param unit - its unit
 * @param style - decimal mark, significant digits
 * @returns display text
 */
export function formatQuantity(value: number, unit: UnitSymbol, style: NumberStyle = {}): string {
  if (unit === 'count' && Number.isInteger(value)) return dress(String(value), style.decimal)
  const plainUnit = unit === '1' || unit === 'count'
  return plainUnit ? formatNumber(value, style) : formatNumber(value, style) + NO_BREAK + unit
}

/**
 * A time in the unit that suits it: µs below 0.1 ms, ms below 1 s, s from there.
 * @param seconds - the time [s]
 * @param style - decimal mark, significant digits
 * @returns display text with its unit
 */
export function formatTime(seconds: number, style: NumberStyle = {}): string {
  const size = Math.abs(Number(seconds.toPrecision(style.significant ?? 3)))
  if (size === 0 || size >= 1 || !Number.isFinite(seconds)) return formatQuantity(seconds, 's', style)
  return size >= 1e-4 ? formatQuantity(seconds * 1e3, 'ms', style) : formatQuantity(seconds * 1e6, 'µs', style)
}

/**
 * Value and half-width rounded together: 0.8312 and 0.0123 give `0.831 ± 0.012`.
 * @param value - centre
 * @param halfWidth - half of the 95 % interval, same unit, at least 0
 * @param style - decimal mark
 * @returns display text
 */
export function formatWithError(value: number, halfWidth: number, style: NumberStyle = {}): string {
  if (!Number.isFinite(value)) return '–'
  if (!(halfWidth > 0 && halfWidth < Infinity)) return formatNumber(value, style)
  const decimals = decimalsFor(halfWidth)
  return `${dress(fixed(value, decimals), style.decimal)} ± ${dress(fixed(halfWidth, decimals), style.decimal)}`
}

/**
 * Both ends of an interval, rounded by its width: `1.10 to 1.15`.
 * @param low - lower end
 * @param high - upper end, same unit
 * @param style - decimal mark
 * @returns display text
 */
export function formatInterval(low: number, high: number, style: NumberStyle = {}): string {
  const width = Math.abs(high - low)
  if (!(width > 0 && width < Infinity)) return `${formatNumber(low, style)} to ${formatNumber(high, style)}`
  const decimals = decimalsFor(width)
  return `${dress(fixed(low, decimals), style.decimal)} to ${dress(fixed(high, decimals), style.decimal)}`
}
