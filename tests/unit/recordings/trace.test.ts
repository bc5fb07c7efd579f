/** Capacitance traces, invented: 1 kHz, 8 s, drift, two stimuli without samples, steps that fall back, an artefact after each, noise. */
import seedrandom from 'seedrandom'
import { beforeAll, describe, expect, it } from 'vitest'
import type { ReadingChoices } from '../../../shared/recordings/choices'
import { envelopeOf } from '../../../shared/recordings/envelope'
import { readWithTrace } from '../../../shared/recordings/read'
import { measureTrace, DEFAULT_WINDOWS, type TraceSettings } from '../../../shared/recordings/trace'
import type { Trace } from '../../../shared/recordings/trace-samples'
import { questionIds, warningIds } from './support'

const FIRST_FF = 40, RATIO = 0.689, FALL_S = 9
interface Kind { noiseFf?: number, artefactFf?: number, driftFfPerS?: number, timeScale?: number, secondAt?: number, drop?: (ms: number) => boolean, skip?: (ms: number) => boolean, command?: boolean }

/** The text of a trace; the noise is a sum of twelve uniform numbers, which is normal enough for means. */
function traceText({ noiseFf = 6, artefactFf = 180, driftFfPerS = 0.8, timeScale = 1, secondAt = 4.4, drop = () => false, skip = () => false, command = true }: Kind = {}, header = 'time_s,Cm_fF,Vcmd_mV'): string {
  const random = seedrandom('trace'), rows = [command ? header : header.replace(',Vcmd_mV', '')]
  const stimuli = [{ from: 1, to: 1.2, step: FIRST_FF }, { from: secondAt, to: Math.round(1000 * secondAt + 200) / 1000, step: FIRST_FF * RATIO }]
  for (let ms = 0; ms < 8000; ms++) {
    const t = ms / 1000, during = stimuli.some(one => t >= one.from && t < one.to)
    let value = 5200 + driftFfPerS * t, normal = -6
    for (let i = 0; i < 12; i++) normal += random()
    for (const { to, step } of stimuli) {
      if (t < to) continue
      value += step * Math.exp(-(t - to) / FALL_S)
      if (t < to + 0.05) value += artefactFf * Math.exp(-(t - to) / 0.01)
    }
    if (skip(ms)) continue
    rows.push([(t * timeScale).toFixed(3), during || drop(ms) ? 'NaN' : (value + noiseFf * normal).toFixed(2), ...command ? [during ? '-10.0' : '-70.0'] : []].join(','))
  }
  return rows.join('\n')
}
const open = (kind: Kind = {}, choices: ReadingChoices = {}, header?: string) => readWithTrace(traceText(kind, header), choices)
const settings = (windows: Partial<TraceSettings> = {}): TraceSettings => ({ ...DEFAULT_WINDOWS, stimuli: [{ startS: 1, endS: 1.2 }, { startS: 4.4, endS: 4.6 }], ...windows })
const steps = (trace: Trace, windows: Partial<TraceSettings> = {}) => {
  const read = measureTrace(trace, settings(windows))
  if (!read.ok) throw new Error(read.problems[0]!.message)
  return read.measure
}

describe('a trace', () => {
  let read: ReturnType<typeof open>
  beforeAll(() => {
    read = open()
  })

  it('is told from a table, with both stimuli found by the command', () => {
    expect(read.reading).toMatchObject({ kind: 'trace', fileLines: 8001, ready: true, problems: [], questions: [] })
    expect(read.reading.trace!.found).toMatchObject({ by: 'command', stimuli: [{ startS: 1, endS: 1.2 }, { startS: 4.4, endS: 4.6 }] })
    expect(read.reading.trace!.sampleS).toBeCloseTo(0.001, 9)
    expect(warningIds(read.reading)).toEqual(['missing-samples'])
  })
  it('gives the first step to about 1 fF with a skip of 100 ms, and overstates it by some 17 fF without', () => {
    expect(Math.abs(steps(read.trace!).steps[0].stepFf - FIRST_FF)).toBeLessThan(2)
    const over = steps(read.trace!, { skipMs: 0 }).steps[0].stepFf - FIRST_FF
    expect(over).toBeGreaterThan(15)
    expect(over).toBeLessThan(20)
  })
  it('says how much of that is noise', () => {
    const error = steps(read.trace!).steps[0].standardErrorFf
    // 6 fF over 100 and over 200 samples.
    expect(error).toBeGreaterThan(0.85 * 6 * Math.sqrt(1 / 100 + 1 / 200))
    expect(error).toBeLessThan(1.15 * 6 * Math.sqrt(1 / 100 + 1 / 200))
  })
  it('tells what skip and slope change', () => {
    const { effects } = read.reading.trace!
    expect(effects.map(one => [one.skipMs, one.subtractSlope])).toEqual([[0, false], [0, true], [50, false], [50, true], [100, false], [100, true], [200, false], [200, true]])
    expect(effects.filter(one => one.chosen)).toMatchObject([{ skipMs: 100, subtractSlope: false, difference: { firstFf: 0, secondFf: 0, ratio: 0 } }])
    expect(effects[0]!.difference!.firstFf).toBeGreaterThan(15)
  })
  it('gives one cell at one interval, in fF', () => {
    expect(read.reading.conditions).toMatchObject([{ condition: 'recording', manipulation: 'none', points: [{ intervalMs: 3200, n: 1, sd: null }], cells: [{ cell: 'cell 1', intervalMs: 3200 }] }])
    const named = open({}, { condition: 'control', protocol: '200 ms step', trace: { cell: 'C01', skipMs: 120 } }).reading
    expect(named.conditions[0]).toMatchObject({ condition: 'control', protocol: '200 ms step', cells: [{ cell: 'C01' }] })
    expect(named.trace!.settings).toMatchObject({ skipMs: 120, baselineMs: 200 })
  })
  it('is plain JSON', () => {
    expect(JSON.parse(JSON.stringify(read.reading))).toEqual(read.reading)
  })
})

describe('the slope of the baseline', () => {
  const quiet = open({ noiseFf: 0.02, artefactFf: 0 }).trace!
  it('makes the second step read low while the first still falls back, and mends it', () => {
    const off = steps(quiet).steps[1].stepFf, on = steps(quiet, { subtractSlope: true }).steps[1].stepFf
    // At the start of the second step the first falls by 40/9·exp(−3.2/9) = 3.11 fF/s against a drift of 0.8 fF/s.
    expect(steps(quiet).steps[1].slopeFfPerS).toBeCloseTo(-FIRST_FF / FALL_S * Math.exp(-3.1 / FALL_S) + 0.8, 1)
    // From the middle of one window to that of the other: 0.45 s of falling; the step itself falls for 0.15 s.
    const lost = FIRST_FF * RATIO * (1 - Math.exp(-0.15 / FALL_S))
    expect(on + lost).toBeCloseTo(FIRST_FF * RATIO, 1)
    expect(on - off).toBeCloseTo(2.35 * 0.45, 1)
  })
  it('adds its own uncertainty', () => {
    const noisy = open().trace!, off = steps(noisy).steps[0].standardErrorFf, on = steps(noisy, { subtractSlope: true }).steps[0].standardErrorFf
    // SD of a slope over 200 samples in 0.2 s: 6·√12/(0.2·√200) fF/s, carried on for 0.45 s.
    expect(Math.sqrt(on ** 2 - off ** 2)).toBeGreaterThan(0.8 * 0.45 * 6 * Math.sqrt(12) / (0.2 * Math.sqrt(200)))
  })
})

describe('the envelope for drawing', () => {
  const { trace } = open({ noiseFf: 0 })
  it('keeps the peak of the artefact, and shows stretches without samples as such', () => {
    const { timeS, lowFf, highFf } = envelopeOf(trace!, 0, 8, 80)
    expect(timeS).toHaveLength(80)
    expect(timeS[0]).toBeCloseTo(0.05, 12)
    expect(Math.max(...highFf.filter(value => value !== null))).toBe(Math.max(...trace!.capacitanceFf.filter(value => !Number.isNaN(value))))
    expect([10, 11, 44, 45].map(column => lowFf[column])).toEqual([null, null, null, null])
    expect(lowFf.every((low, i) => low === null || low <= highFf[i]!)).toBe(true)
  })
  it('leaves columns between samples out, and is empty for an empty view', () => {
    expect(envelopeOf(trace!, 0, 0.01, 100).timeS).toHaveLength(10)
    expect(envelopeOf(trace!, 1, 1, 100).timeS).toEqual([])
    expect(envelopeOf(trace!, 9, 10, 100).timeS).toEqual([])
  })
})

describe('windows', () => {
  const { trace } = open()
  const problems = (windows: Partial<TraceSettings>) => {
    const read = measureTrace(trace!, settings(windows))
    return read.ok ? [] : read.problems
  }
  it('are refused where they overlap a neighbour, with what overlaps and where', () => {
    const close = { stimuli: [{ startS: 1, endS: 1.2 }, { startS: 1.5, endS: 1.7 }] as TraceSettings['stimuli'] }
    expect(problems(close)).toContainEqual({ path: 'trace.windows.0.measure', message: 'The measured window of the first stimulus (1.3 to 1.4 s) and the baseline window of the second stimulus (1.3 to 1.5 s) overlap from 1.3 to 1.4 s.' })
    expect(problems(close)).toContainEqual({ path: 'trace.stimuli', message: 'Between the stimuli separate windows of these lengths need 400 ms.' })
    expect(problems({ stimuli: [{ startS: 1, endS: 1.2 }, { startS: 1.6, endS: 1.8 }] })).toEqual([])
    expect(problems({ baselineMs: 3300 }).map(one => one.message).join(' ')).toContain('overlap from 1.1 to 1.2 s')
  })
  it('are refused beyond the trace, and with fewer than 80 % of their samples', () => {
    expect(problems({ baselineMs: 1100 })).toEqual([{ path: 'trace.windows.0.baseline', message: 'This window (-0.1 to 1 s) reaches beyond the trace.' }])
    expect(problems({ skipMs: 3300, measureMs: 200, stimuli: [{ startS: 0.2, endS: 0.4 }, { startS: 4.4, endS: 4.6 }] })).toContainEqual({ path: 'trace.windows.1.measure', message: 'This window (7.9 to 8.1 s) reaches beyond the trace.' })
    const holes = open({ drop: ms => ms >= 1300 && ms < 1400 && ms % 4 === 0 }), fewer = measureTrace(holes.trace!, settings())
    expect(fewer).toMatchObject({ ok: false, problems: [{ path: 'trace.windows.0.measure', message: 'This window (1.3 to 1.4 s) holds 75 % of its samples; at least 80 % are wanted.' }] })
    expect(open({ drop: ms => ms >= 1300 && ms < 1400 && ms % 10 === 0 }).reading.trace!.measure!.steps[0].filled[1]).toBeCloseTo(0.9, 9)
  })
  it('are refused with lengths that make none, and stimuli out of order', () => {
    expect(problems({ measureMs: 0 })).toEqual([{ path: 'trace.measureMs', message: 'The measured window lasts from 1 to 60000 ms.' }])
    expect(problems({ skipMs: NaN })[0]!.path).toBe('trace.skipMs')
    expect(problems({ stimuli: [{ startS: 4.4, endS: 4.6 }, { startS: 1, endS: 1.2 }] })).toEqual([{ path: 'trace.stimuli.1', message: 'The second stimulus starts before the first has ended.' }])
    expect(problems({ stimuli: [{ startS: 1.2, endS: 1 }, { startS: 4.4, endS: 4.6 }] })[0]).toMatchObject({ path: 'trace.stimuli.0' })
  })
})

describe('odd traces', () => {
  it('finds stimuli by missing samples where there is no command', () => {
    expect(open({ command: false }).reading.trace!.found).toMatchObject({ by: 'gaps', stimuli: [{ startS: 1, endS: 1.2 }, { startS: 4.4, endS: 4.6 }] })
  })
  it('asks for two stimuli where there are others, and takes typed ones', () => {
    const three = open({ command: false, drop: ms => ms >= 6000 && ms < 6200 })
    expect(questionIds(three.reading)).toEqual(['stimuli'])
    expect(three.reading.questions[0]!.options.map(one => one.label)).toEqual(['1 to 1.2 s and 4.4 to 4.6 s', '4.4 to 4.6 s and 6 to 6.2 s'])
    expect(open({ command: false, drop: ms => ms >= 6000 && ms < 6200 }, three.reading.questions[0]!.options[0]!.choices).reading.ready).toBe(true)
  })
  it('warns of ms that were called s', () => {
    const read = open({ timeScale: 1000 })
    expect(read.reading.warnings.find(one => one.id === 'rate')!.sentence).toBe('In s the samples lie 1 s apart (1 Hz); perhaps the time is in ms.')
    expect(warningIds(open({ timeScale: 1000 }, { timeUnit: 'ms' }).reading)).not.toContain('rate')
  })
  it('tells gaps and uneven times', () => {
    expect(open({ skip: ms => ms >= 2000 && ms < 2100 }).reading.warnings.find(one => one.id === 'gaps')!.sentence).toBe('1 gap in time: 1.999 to 2.1 s.')
    const uneven = traceText().split('\n').map((row, i) => i % 10 === 5 ? row.replace(/^([\d.]+)/, '$14') : row).join('\n')
    expect(warningIds(readWithTrace(uneven).reading)).toContain('uneven')
  })
  it('refuses samples whose time does not rise or that hold text, by line', () => {
    const rows = traceText().split('\n')
    rows[101] = rows[100]!
    rows[201] = rows[201]!.replace(/,5\d+\.\d+/, ',03.Dez')
    const { reading } = readWithTrace(rows.join('\n'))
    expect(reading.setAside.map(one => one.line)).toEqual([102, 202])
    expect(reading.setAside[1]!.reason).toContain('date made by a spreadsheet')
  })
  it('says that the unit of the capacitance is assumed, and converts pF', () => {
    expect(warningIds(open({}, {}, 'time_s,Cm,Vcmd_mV').reading)).toContain('capacitance-unit')
    const inPf = readWithTrace('time_s,Cm_pF\n' + traceText({ command: false }).split('\n').slice(1).map(row => row.replace(/,(\d+)\.(\d+)/, (_, whole: string, part: string) => `,${(Number(`${whole}.${part}`) / 1000).toFixed(5)}`)).join('\n'))
    expect(inPf.reading.trace!.measure!.steps[0].stepFf).toBeCloseTo(open({ command: false }).reading.trace!.measure!.steps[0].stepFf, 2)
  })
  it('refuses a step that is no rise', () => {
    const still = Array.from({ length: 8000 }, (_, ms) => `${(ms / 1000).toFixed(3)},${(ms >= 1000 && ms < 1200) || (ms >= 4400 && ms < 4600) ? '' : '5200'}`)
    expect(readWithTrace(['time_s,Cm_fF', ...still].join('\n')).reading.problems).toEqual([{ path: 'trace.stimuli.0', message: 'The first step is not above 0, so there is no ratio.' }])
  })
})
