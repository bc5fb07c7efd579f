/** How numbers are set in figures: no exponent where a reader can do without, a real minus, thin spaces between thousands. */

const MINUS = '\u2212'
const THIN = '\u202F'

/** A number as it is set: true minus, thousands parted by a thin space. */
export function setNumber(text: string): string {
  const [whole = '', part] = text.replace('-', MINUS).split('.')
  const parted = /^\D?\d{5,}$/.test(whole) ? whole.replace(/\B(?=(\d{3})+$)/g, THIN) : whole
  return part === undefined ? parted : `${parted}.${part}`
}
/** Fixed decimals; never a minus before nothing but zeros. */
export function decimals(value: number, places: number): string {
  const text = value.toFixed(places)
  return setNumber(/^-0(\.0*)?$/.test(text) ? text.slice(1) : text)
}
/** Significant digits without exponent between 1e-4 and 1e9, else with a power of ten. */
export function digits(value: number, significant = 3): string {
  if (!Number.isFinite(value)) return 'none'
  if (value === 0) return '0'
  const size = Math.floor(Math.log10(Math.abs(Number(value.toPrecision(significant)))))
  if (size < -4 || size > 8) {
    const [front, power] = value.toExponential(significant - 1).split('e')
    return `${setNumber(front!)} × 10^${setNumber(String(Number(power)))}`
  }
  return decimals(Number(value.toPrecision(significant)), Math.max(0, significant - 1 - size))
}
/** Decimal places that show an error with two digits below 0.1 of its decade, one otherwise: 0.0083 → 4, 0.024 → 3, 1.2 → 1. */
export function placesFor(error: number): number {
  if (!(error > 0) || !Number.isFinite(error)) return 3
  return Math.min(8, Math.max(0, 1 - Math.floor(Math.log10(error))))
}
/** A time with its unit: ms below 0.01 s, otherwise s. */
export function setTime(timeS: number, significant = 2): string {
  if (timeS !== 0 && Math.abs(timeS) < 0.01) return `${digits(timeS * 1000, significant)}\u00A0ms`
  return `${digits(timeS, Math.abs(timeS) >= 100 ? 3 : significant)}\u00A0s`
}
