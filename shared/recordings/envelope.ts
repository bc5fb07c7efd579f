/** A trace thinned for drawing: the span of values in each column of pixels, so that no artefact is lost. */
import { firstAt, type Trace } from './trace-samples'

export interface Envelope {
  /** Middle of each column [s]. */
  timeS: number[]
  /** Lowest and highest capacitance in it [fF]; null where no sample holds a number. */
  lowFf: (number | null)[]
  highFf: (number | null)[]
}

/**
 * Lowest and highest value in each of some equal stretches of time.
 * @param trace - samples [s, fF]
 * @param fromS - beginning of the view [s]
 * @param toS - end of the view, exclusive [s]
 * @param columns - stretches, as a rule one for each pixel [count]
 * @returns one entry for each stretch that holds samples, numbers or not
 */
export function envelopeOf(trace: Trace, fromS: number, toS: number, columns: number): Envelope {
  const found: Envelope = { timeS: [], lowFf: [], highFf: [] }, width = (toS - fromS) / columns
  if (!(width > 0)) return found
  for (let column = 0; column < columns; column++) {
    const start = fromS + column * width, first = firstAt(trace.timeS, start), last = firstAt(trace.timeS, fromS + (column + 1) * width)
    if (last <= first) continue
    let low = Infinity, high = -Infinity
    for (let i = first; i < last; i++) {
      const value = trace.capacitanceFf[i]!
      if (value < low) low = value
      if (value > high) high = value
    }
    found.timeS.push(start + width / 2)
    found.lowFf.push(low === Infinity ? null : low)
    found.highFf.push(high === -Infinity ? null : high)
  }
  return found
}
