/** What a caution or an assumption looks like: where it belongs, what it says, what it rests on. */
import type { SourceStatus } from './range'

export interface Caution {
  /** Stable id; the letters A-xx are the almanac's list of limits. */
  id: string
  /** Field of the scenario document beside which it stands. */
  path: string
  sentence: string
  source: string
  status: SourceStatus
}
