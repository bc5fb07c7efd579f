/** Unit symbols, what they measure, and how they convert. */

export type Dimension = 'length' | 'time' | 'rate' | 'area' | 'density' | 'diffusion' | 'probability' | 'count' | 'charge' | 'temperature'

/** Every unit that a field or a table may show; `inBase` is its size in the base unit of its dimension (µm, s, 1/s, µm², 1/µm³, µm²/s, 1, 1, fF, °C). */
export const UNITS = {
  'nm': { dimension: 'length', inBase: 1e-3, name: 'nanometre' },
  'µm': { dimension: 'length', inBase: 1, name: 'micrometre' },
  'mm': { dimension: 'length', inBase: 1e3, name: 'millimetre' },
  'µs': { dimension: 'time', inBase: 1e-6, name: 'microsecond' },
  'ms': { dimension: 'time', inBase: 1e-3, name: 'millisecond' },
  's': { dimension: 'time', inBase: 1, name: 'second' },
  'min': { dimension: 'time', inBase: 60, name: 'minute' },
  '1/s': { dimension: 'rate', inBase: 1, name: 'per second' },
  '1/ms': { dimension: 'rate', inBase: 1e3, name: 'per millisecond' },
  '1/min': { dimension: 'rate', inBase: 1 / 60, name: 'per minute' },
  'µm²': { dimension: 'area', inBase: 1, name: 'square micrometre' },
  '1/µm³': { dimension: 'density', inBase: 1, name: 'per cubic micrometre' },
  'µm²/s': { dimension: 'diffusion', inBase: 1, name: 'square micrometre per second' },
  'nm²/ms': { dimension: 'diffusion', inBase: 1e-3, name: 'square nanometre per millisecond' },
  'cm²/s': { dimension: 'diffusion', inBase: 1e8, name: 'square centimetre per second' },
  '1': { dimension: 'probability', inBase: 1, name: 'plain number' },
  '%': { dimension: 'probability', inBase: 0.01, name: 'per cent' },
  'count': { dimension: 'count', inBase: 1, name: 'count' },
  'fF': { dimension: 'charge', inBase: 1, name: 'femtofarad' },
  'aF': { dimension: 'charge', inBase: 1e-3, name: 'attofarad' },
  '°C': { dimension: 'temperature', inBase: 1, name: 'degree Celsius' },
} as const satisfies Record<string, { dimension: Dimension, inBase: number, name: string }>
export type UnitSymbol = keyof typeof UNITS

/** What people type, after folding: one micro sign, no blanks, no carets, exponents on the line. */
const SPELLINGS: Record<string, UnitSymbol> = {
  'nm': 'nm', 'um': 'µm', 'micron': 'µm', 'microns': 'µm', 'mm': 'mm',
  'us': 'µs', 'ms': 'ms', 'msec': 'ms', 's': 's', 'sec': 's', 'min': 'min',
  '1/s': '1/s', '/s': '1/s', 's-1': '1/s', 'pers': '1/s', 'hz': '1/s', '1/ms': '1/ms', '/ms': '1/ms', 'ms-1': '1/ms', '1/min': '1/min', '/min': '1/min',
  'um2': 'µm²', '1/um3': '1/µm³', '/um3': '1/µm³', 'um-3': '1/µm³', 'perum3': '1/µm³',
  'um2/s': 'µm²/s', 'um2s-1': 'µm²/s', 'um2persec': 'µm²/s', 'nm2/ms': 'nm²/ms', 'cm2/s': 'cm²/s', 'cm2s-1': 'cm²/s',
  '%': '%', 'percent': '%', 'ff': 'fF', 'af': 'aF', '°c': '°C',
}
/** Spellings whose capital letters would mean another unit (mega, metre per second …): taken only as written. */
const CASE_MATTERS = /[MNSU]/

/**
 * The unit that a spelling means: `um`, `μm` (Greek mu), `µm` (micro sign), `um^2/s`, `s⁻¹`, `/s`.
 * @param spelling - text after the number, blanks allowed
 * @returns the symbol, or null when it is none that is known
 */
export function unitFrom(spelling: string): UnitSymbol | null {
  // NFKC makes the micro sign U+00B5 the Greek letter U+03BC, ² becomes 2, ⁻ becomes U+2212.
  const folded = spelling.normalize('NFKC')
    .replace(/[\s^*·]/g, '').replaceAll('\u03BC', 'u').replace(/[\u2212\u2010-\u2013]/g, '-')
  if (CASE_MATTERS.test(folded)) return null
  const key = folded.toLowerCase()
  return Object.hasOwn(SPELLINGS, key) ? SPELLINGS[key]! : null
}

/**
 * The same quantity in another unit of its dimension.
 * @param value - number in `from`
 * @param from - unit of the value
 * @param to - unit wanted, of the same dimension
 * @returns number in `to`
 * @throws RangeError when the two measure different things
 */
export function convert(value: number, from: UnitSymbol, to: UnitSymbol): number {
  if (from === to) return value
  if (UNITS[from].dimension !== UNITS[to].dimension) throw new RangeError(`convert: ${from} and ${to} measure different things`)
  // One division by a whole power of ten is correctly rounded where a product with 1e-3 is not: 50 nm is 0.05 µm to the last bit.
  const factor = UNITS[from].inBase / UNITS[to].inBase
  const inverse = Math.round(UNITS[to].inBase / UNITS[from].inBase)
  if (factor < 1 && Math.abs(inverse * factor - 1) < 1e-12) return value / inverse
  return value * (Math.abs(factor - Math.round(factor)) < 1e-9 * factor ? Math.round(factor) : factor)
}
