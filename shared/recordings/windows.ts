/** Windows around the stimuli of a trace: where they lie, and why some cannot stand. */
import type { FieldProblem } from '../schemas/problem'
import type { Stimulus, TraceSettings } from './trace'
import { firstAt, type Trace } from './trace-samples'

export interface Window { fromS: number, toS: number }
export interface StepWindows { baseline: Window, measure: Window }
/** A window with fewer samples than this share is refused [1]. */
export const LEAST_FILLED = 0.8

/**
 * The two windows of a stimulus: before it, and after it behind the skip.
 * @param stimulus - start and end [s]
 * @param settings - lengths [ms]
 * @returns windows [s], the end exclusive
 */
export function windowsOf({ startS, endS }: Stimulus, settings: Pick<TraceSettings, 'baselineMs' | 'skipMs' | 'measureMs'>): StepWindows {
  const from = endS + settings.skipMs / 1000
  return { baseline: { fromS: startS - settings.baselineMs / 1000, toS: startS }, measure: { fromS: from, toS: from + settings.measureMs / 1000 } }
}

const SLACK = 1e-9 // s; windows may touch
const overlap = (one: Window, other: Window): Window | null => {
  const fromS = Math.max(one.fromS, other.fromS), toS = Math.min(one.toS, other.toS)
  return toS - fromS > SLACK ? { fromS, toS } : null
}
const shown = (value: number) => String(Number(value.toFixed(6)))
const span = ({ fromS, toS }: Window) => `${shown(fromS)} to ${shown(toS)} s`

interface Named { path: string, name: string, stretch: Window }

function lengths(settings: TraceSettings): FieldProblem[] {
  const fields = [['baselineMs', 'The baseline window', 1], ['skipMs', 'The skip', 0], ['measureMs', 'The measured window', 1]] as const
  const found = fields.filter(([key, , least]) => !(settings[key] >= least && settings[key] <= 60_000)).map(([key, name, least]) => ({ path: `trace.${key}`, message: `${name} lasts from ${least} to 60000 ms.` }))
  const [first, second] = settings.stimuli
  settings.stimuli.forEach((stimulus, i) => {
    if (!(stimulus.endS > stimulus.startS)) found.push({ path: `trace.stimuli.${i}`, message: 'A stimulus ends after it starts.' })
  })
  if (found.length === 0 && second.startS < first.endS - SLACK) found.push({ path: 'trace.stimuli.1', message: 'The second stimulus starts before the first has ended.' })
  return found
}

/** Windows that reach into a stimulus or a window of the other one: each pair once, with the stretch that both claim. */
function overlaps(settings: TraceSettings): FieldProblem[] {
  const ordinal = ['first', 'second'], windows = settings.stimuli.map(stimulus => windowsOf(stimulus, settings))
  const own: Named[] = windows.flatMap(({ baseline, measure }, i) => [
    { path: `trace.windows.${i}.baseline`, name: `The baseline window of the ${ordinal[i]} stimulus`, stretch: baseline },
    { path: `trace.windows.${i}.measure`, name: `The measured window of the ${ordinal[i]} stimulus`, stretch: measure },
  ])
  const stimuli: Named[] = settings.stimuli.map((stimulus, i) => ({ path: '', name: `the ${ordinal[i]} stimulus`, stretch: { fromS: stimulus.startS, toS: stimulus.endS } }))
  const lower = (text: string) => text.charAt(0).toLowerCase() + text.slice(1)
  return own.flatMap((one, i) => [...stimuli, ...own.slice(i + 1)].flatMap((other): FieldProblem[] => {
    const both = overlap(one.stretch, other.stretch)
    return both ? [{ path: one.path, message: `${one.name} (${span(one.stretch)}) and ${lower(other.name)} (${span(other.stretch)}) overlap from ${span(both)}.` }] : []
  }))
}

function filled(trace: Trace, { fromS, toS }: Window): number {
  let count = 0
  for (let i = firstAt(trace.timeS, fromS), end = firstAt(trace.timeS, toS); i < end; i++) if (!Number.isNaN(trace.capacitanceFf[i]!)) count++
  return count / Math.max(1, Math.round((toS - fromS) / trace.sampleS))
}

/**
 * Why windows cannot stand: lengths, overlaps, the ends of the trace, too few samples.
 * @param trace - samples [s, fF]
 * @param settings - stimuli [s] and lengths [ms]
 * @returns problems by path (`trace.windows.1.baseline`); empty where all stand
 */
export function checkWindows(trace: Trace, settings: TraceSettings): FieldProblem[] {
  const early = [...lengths(settings)]
  if (early.length > 0) return early
  const crossed = overlaps(settings), least = settings.baselineMs + settings.skipMs + settings.measureMs
  if (crossed.length > 0) return [...crossed, ...settings.stimuli[1].startS - settings.stimuli[0].endS < least / 1000 - SLACK ? [{ path: 'trace.stimuli', message: `Between the stimuli separate windows of these lengths need ${least} ms.` }] : []]
  return settings.stimuli.flatMap((stimulus, i) => Object.entries(windowsOf(stimulus, settings)).flatMap(([key, stretch]): FieldProblem[] => {
    const path = `trace.windows.${i}.${key}`, share = filled(trace, stretch)
    if (stretch.fromS < trace.timeS[0]! - trace.sampleS / 2 || stretch.toS > trace.timeS.at(-1)! + 1.5 * trace.sampleS) return [{ path, message: `This window (${span(stretch)}) reaches beyond the trace.` }]
    return share < LEAST_FILLED ? [{ path, message: `This window (${span(stretch)}) holds ${Math.round(100 * share)} % of its samples; at least ${100 * LEAST_FILLED} % are wanted.` }] : []
  }))
}
