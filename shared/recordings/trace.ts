/** Steps of capacitance from a trace: windows before and after each stimulus, their means, and what each choice changes. */
import type { FieldProblem } from '../schemas/problem'
import { firstAt, type Trace } from './trace-samples'
import { checkWindows, windowsOf, type StepWindows, type Window } from './windows'

export interface Stimulus { startS: number, endS: number }
export interface TraceSettings {
  /** First and second stimulus [s], in this order. */
  stimuli: [Stimulus, Stimulus]
  /** Length of the baseline window before a stimulus [ms]. */
  baselineMs: number
  /** Left out after a stimulus, while artefacts decay [ms]. */
  skipMs: number
  /** Length of the window measured after that [ms]. */
  measureMs: number
  /** Carry the slope of the baseline on to the measured window. */
  subtractSlope: boolean
}
export interface StepMeasure {
  /** Rise of capacitance [fF]. */
  stepFf: number
  /** From the noise in the windows alone [fF]. */
  standardErrorFf: number
  baselineFf: number
  /** Slope of the baseline and its standard error [fF/s]. */
  slopeFfPerS: number
  slopeErrorFfPerS: number
  windows: StepWindows
  /** Share of samples that hold a number, in the baseline and in the measured window [1]. */
  filled: [number, number]
}
export interface TraceMeasure {
  steps: [StepMeasure, StepMeasure]
  /** Second over first [1]; null where the first is not above 0. */
  ratio: number | null
  ratioError: number | null
  /** End of the first stimulus to the start of the second [ms]. */
  intervalMs: number
}
export const DEFAULT_WINDOWS = { baselineMs: 200, skipMs: 100, measureMs: 100, subtractSlope: false } as const

interface Line { mean: number, slope: number, centre: number, count: number, spread: number, noise: number }

/** Least-squares line through the numbers of a window; NaN is skipped. `noise` is the SD about the line (two parameters) or about the mean (one). */
function lineThrough({ timeS, capacitanceFf }: Trace, fromS: number, toS: number, flat: boolean): Line {
  let count = 0, sumT = 0, sumC = 0
  const first = firstAt(timeS, fromS), last = firstAt(timeS, toS)
  for (let i = first; i < last; i++) {
    const value = capacitanceFf[i]!
    if (Number.isNaN(value)) continue
    count++
    sumT += timeS[i]!
    sumC += value
  }
  const centre = sumT / count, mean = sumC / count
  let spread = 0, cross = 0, squares = 0
  for (let i = first; i < last; i++) {
    const value = capacitanceFf[i]!
    if (Number.isNaN(value)) continue
    spread += (timeS[i]! - centre) ** 2
    cross += (timeS[i]! - centre) * (value - mean)
    squares += (value - mean) ** 2
  }
  const slope = spread > 0 ? cross / spread : 0, rest = flat ? squares : Math.max(0, squares - slope * cross)
  return { mean, slope, centre, count, spread, noise: Math.sqrt(rest / Math.max(1, count - (flat ? 1 : 2))) }
}

function measureStep(trace: Trace, stimulus: Stimulus, settings: TraceSettings): StepMeasure {
  const windows = windowsOf(stimulus, settings), expected = ({ fromS, toS }: Window) => Math.max(1, Math.round((toS - fromS) / trace.sampleS))
  const before = lineThrough(trace, windows.baseline.fromS, windows.baseline.toS, false), after = lineThrough(trace, windows.measure.fromS, windows.measure.toS, true)
  const reach = after.centre - before.centre, slopeError = before.noise / Math.sqrt(before.spread)
  const baseline = settings.subtractSlope ? before.mean + before.slope * reach : before.mean
  const variance = after.noise ** 2 / after.count + before.noise ** 2 / before.count + (settings.subtractSlope ? (slopeError * reach) ** 2 : 0)
  return {
    stepFf: after.mean - baseline, standardErrorFf: Math.sqrt(variance), baselineFf: baseline, slopeFfPerS: before.slope, slopeErrorFfPerS: slopeError, windows,
    filled: [Math.min(1, before.count / expected(windows.baseline)), Math.min(1, after.count / expected(windows.measure))],
  }
}

/**
 * Both steps of a trace and their ratio.
 * @param trace - samples [s, fF]
 * @param settings - stimuli [s], windows [ms], slope on or off
 * @returns steps with standard errors [fF], ratio [1] and interval [ms]; or the windows that cannot stand, each with its path and where it lies
 */
export function measureTrace(trace: Trace, settings: TraceSettings): { ok: true, measure: TraceMeasure } | { ok: false, problems: FieldProblem[], windows: StepWindows[] } {
  const windows = settings.stimuli.map(stimulus => windowsOf(stimulus, settings)), problems = checkWindows(trace, settings)
  if (problems.length > 0) return { ok: false, problems, windows }
  const [first, second] = settings.stimuli.map(stimulus => measureStep(trace, stimulus, settings)) as [StepMeasure, StepMeasure]
  const ratio = first.stepFf > 0 ? second.stepFf / first.stepFf : null
  const ratioError = ratio === null ? null : Math.hypot(second.standardErrorFf, ratio * first.standardErrorFf) / first.stepFf
  return { ok: true, measure: { steps: [first, second], ratio, ratioError, intervalMs: Number(((settings.stimuli[1].startS - settings.stimuli[0].endS) * 1000).toPrecision(12)) } }
}

export interface ChoiceEffect {
  skipMs: number
  subtractSlope: boolean
  chosen: boolean
  /** Null where these windows cannot stand. */
  measure: TraceMeasure | null
  /** Against the settings as chosen [fF, fF, 1]; null where either is missing. */
  difference: { firstFf: number, secondFf: number, ratio: number | null } | null
}

/**
 * What the skip and the slope do to the answer: the same trace under each of them.
 * @param trace - samples [s, fF]
 * @param settings - the settings as chosen
 * @param skipsMs - skips to compare with [ms]
 * @returns one row for each skip, slope off and on, with its difference from what was chosen
 */
export function effectOfChoices(trace: Trace, settings: TraceSettings, skipsMs: number[] = [0, 50, 100, 200]): ChoiceEffect[] {
  const chosen = measureTrace(trace, settings), skips = [...new Set([...skipsMs, settings.skipMs])].sort((a, b) => a - b)
  return skips.flatMap(skipMs => [false, true].map((subtractSlope): ChoiceEffect => {
    const read = measureTrace(trace, { ...settings, skipMs, subtractSlope }), measure = read.ok ? read.measure : null
    const own = skipMs === settings.skipMs && subtractSlope === settings.subtractSlope
    if (!measure || !chosen.ok) return { skipMs, subtractSlope, chosen: own, measure, difference: null }
    const [first, second] = measure.steps, [was, wasSecond] = chosen.measure.steps
    const ratio = measure.ratio === null || chosen.measure.ratio === null ? null : measure.ratio - chosen.measure.ratio
    return { skipMs, subtractSlope, chosen: own, measure, difference: { firstFf: first.stepFf - was.stepFf, secondFf: second.stepFf - wasSecond.stepFf, ratio } }
  }))
}
