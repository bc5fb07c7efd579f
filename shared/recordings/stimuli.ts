/** Stimuli found in a trace: by the command voltage, else by stretches without capacitance. */
import type { Stimulus } from './trace'
import type { Trace } from './trace-samples'

export interface FoundStimuli { stimuli: Stimulus[], by: 'command' | 'gaps' | 'nothing', sentence: string }
/** A stretch without capacitance that is shorter is a lost sample, not a stimulus [s]. */
const SHORTEST_GAP_S = 0.003
const MOST = 200

/** Runs of samples for which something holds, as times; the end is that of the first sample for which it no longer does. */
function runs({ timeS }: Trace, holds: (i: number) => boolean): Stimulus[] {
  const found: Stimulus[] = []
  let start = -1
  for (let i = 0; i <= timeS.length && found.length < MOST; i++) {
    const on = i < timeS.length && holds(i)
    if (on && start < 0) start = i
    if (!on && start >= 0) {
      // What runs into the end has no end of its own.
      if (i < timeS.length) found.push({ startS: timeS[start]!, endS: timeS[i]! })
      start = -1
    }
  }
  return found
}

function byCommand(trace: Trace): Stimulus[] {
  const command = trace.commandMv
  if (!command) return []
  const sorted = command.filter(value => !Number.isNaN(value)).sort(), rest = sorted[Math.floor(sorted.length / 2)] ?? NaN
  const most = Math.max(Math.abs((sorted[0] ?? rest) - rest), Math.abs((sorted.at(-1) ?? rest) - rest))
  // 5 mV: below that it is the noise of the command's own recording.
  return most < 5 ? [] : runs(trace, i => Math.abs(command[i]! - rest) > most / 2)
}

/**
 * Stimuli of a trace, in order.
 * @param trace - samples [s, fF, mV]
 * @returns start and end of each [s], and by what they were found
 */
export function findStimuli(trace: Trace): FoundStimuli {
  const commanded = byCommand(trace)
  if (commanded.length > 0) return { stimuli: commanded, by: 'command', sentence: `${commanded.length} found where the command voltage leaves its usual value.` }
  const gaps = runs(trace, i => Number.isNaN(trace.capacitanceFf[i]!)).filter(gap => gap.endS - gap.startS >= SHORTEST_GAP_S)
  return gaps.length > 0 ? { stimuli: gaps, by: 'gaps', sentence: `${gaps.length} found where the capacitance is missing.` } : { stimuli: [], by: 'nothing', sentence: 'None was found; type when each starts and ends.' }
}
