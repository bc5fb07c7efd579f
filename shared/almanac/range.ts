/** One published value or range, with where it stands and how far it was checked. */
import type { UnitSymbol } from '../units'

/** `looked up`: seen in the published text (for papers mostly abstract or figure legend). `unverified`: known from memory only. `computed`: follows from a formula and stated inputs. `common practice`: used in the trade, no source. */
export type SourceStatus = 'looked up' | 'unverified' | 'computed' | 'common practice'

export interface PublishedRange {
  id: string
  quantity: string
  /** Cell and animal; empty where it says nothing. */
  cell: string
  /** The value in words, with its unit. */
  value: string
  /** Ends of the range where it is numeric, in `unit`. */
  low?: number
  high?: number
  unit?: UnitSymbol
  source: string
  status: SourceStatus
  note?: string
}
