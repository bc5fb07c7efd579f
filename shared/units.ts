/** Units and quantities, one place: symbols, reading what a person types, writing what the product says. */
export { UNITS, convert, unitFrom, type Dimension, type UnitSymbol } from './quantities/symbols'
export { parseQuantity, parsePlainNumber, percentHint, plainDecimal, type Reading } from './quantities/parse'
export { formatForField, formatInterval, formatNumber, formatQuantity, formatTime, formatWithError, type NumberStyle } from './quantities/format'
