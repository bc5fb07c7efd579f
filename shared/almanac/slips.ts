/** Slips of the unit: a value a thousandfold off that would make sense in the neighbouring unit. Offered, never corrected in silence. */
import { formatQuantity, type UnitSymbol } from '../units'

/** What vesicles and terminals plausibly have, in the unit of the scenario document. */
const PLAUSIBLE: Record<string, { low: number, high: number, unit: UnitSymbol, what: string, larger: UnitSymbol, factor: number }> = {
  'medium.spacingNm': { low: 20, high: 100, unit: 'nm', what: 'Vesicles are near 45 nm.', larger: 'µm', factor: 1000 },
  'reservoir.sizeUm.0': { low: 0.3, high: 20, unit: 'µm', what: 'Terminals are a few µm across.', larger: 'mm', factor: 1000 },
  'reservoir.sizeUm.1': { low: 0.3, high: 20, unit: 'µm', what: 'Terminals are a few µm across.', larger: 'mm', factor: 1000 },
  'reservoir.sizeUm.2': { low: 0.3, high: 20, unit: 'µm', what: 'Terminals are a few µm across.', larger: 'mm', factor: 1000 },
}

/**
 * The value that was probably meant when a unit was mistaken by a factor of 1000, either way.
 * @param path - field of the scenario document
 * @param value - as read, in the document's unit
 * @returns a question with the likely value, or null when the value is plausible or no slip explains it
 */
export function unitSlip(path: string, value: number): { sentence: string, value: number } | null {
  const range = PLAUSIBLE[path]
  if (!range || !(value > 0) || (value >= range.low && value <= range.high)) return null
  for (const meant of [value / range.factor, value * range.factor]) {
    if (meant < range.low || meant > range.high) continue
    const read = meant < value ? formatQuantity(value / range.factor, range.larger) : formatQuantity(value, range.unit)
    return { sentence: `${read}? ${range.what} ${formatQuantity(meant, range.unit)} may be meant.`, value: meant }
  }
  return null
}
