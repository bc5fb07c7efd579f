/** Errors and counts of a point: SD, SEM, limits, n. Student quantiles from printed tables (t(0.975, 8) = 2.306, t(0.975, 1) = 12.706). */
import { describe, expect, it } from 'vitest'
import { lineOf, PLAIN, questionIds, read, table, warningIds } from './support'

const first = (row: string, header: string, choices = {}) => read(table([row, '100,0.2,,'], header), choices).conditions[0]!.points[0]!

describe('SEM and SD', () => {
  it('makes the one from the other and n', () => {
    expect(first('50,0.15,0.024,9', 'interval_ms,ratio,sd,n')).toMatchObject({ sd: 0.024, sem: 0.008 })
    expect(first('50,0.15,0.008,9', 'interval_ms,ratio,sem,n')).toMatchObject({ sd: 0.024, sem: 0.008 })
  })
  it('lets SD and n win over an SEM that contradicts them', () => {
    const reading = read(table(['50,0.15,0.023,0.030,9', '100,0.18,0.055,0.019,8'], 'interval_ms,ratio,sd,sem,n'))
    expect(reading.warnings).toMatchObject([{ id: 'contradiction', lines: [2] }])
    expect(reading.conditions[0]!.points[0]!.sem).toBeCloseTo(0.023 / 3, 12)
    expect(reading.conditions[0]!.points[1]!.sem).toBe(0.019)
  })
  it('warns of an SEM above its SD where n is not known', () => {
    expect(warningIds(read(table(['50,0.15,0.01,0.02'], 'interval_ms,ratio,sd,sem')))).toContain('contradiction')
  })
  it('reads 95 % half-widths and limits by Student\'s t', () => {
    expect(first('50,0.15,0.02306,9', 'interval_ms,ratio,95% CI,n').sem).toBeCloseTo(0.01, 5)
    const limits = read(table(['50,0.15,0.12694,0.17306,9', '100,0.5,0.3,0.4,9', '200,0.4,0.39,0.45,9'], 'interval_ms,ratio,lower 95% limit,upper 95% limit,n'))
    expect(limits.columns.map(column => column.meaning)).toEqual(['interval', 'ratio', 'lower-limit', 'upper-limit', 'n'])
    expect(limits.conditions[0]!.points[0]!.sem).toBeCloseTo(0.01, 5)
    expect(limits.warnings.map(one => [one.id, one.lines])).toEqual([['from-limits', [2, 3, 4]], ['lopsided-limits', [4]], ['outside-limits', [3]]])
  })
  it('asks what an SEM of 0 means', () => {
    const text = table([...PLAIN, '800,0.459,0,9']), asked = read(text)
    expect(asked.questions).toMatchObject([{ id: 'zero-error', must: true, lines: [6] }])
    expect(asked.ready).toBe(false)
    expect(read(text, { zeroError: 'missing' }).conditions[0]!.points.at(-1)).toMatchObject({ sem: null, sd: null })
    expect(read(text, { zeroError: 'smallest' }).conditions[0]!.points.at(-1)).toMatchObject({ sem: 0.008 })
  })
  it('keeps a point without an error and says that it has no weight', () => {
    const reading = read(table([...PLAIN, '800,0.459,,9']))
    expect(reading.conditions[0]!.points.at(-1)).toMatchObject({ ratio: 0.459, sem: null })
    expect(reading.warnings).toMatchObject([{ id: 'unweighted', lines: [6] }])
  })
  it.each(['sd', 'sem', '95% CI'])('refuses a negative %s by its line', (name) => {
    const reading = read(table([...PLAIN, '800,0.459,-0.013,9'], `interval_ms,ratio,${name},n`))
    expect(lineOf(reading, 6)).toMatchObject({ kind: 'refused', kept: null })
    expect(lineOf(reading, 6)!.remark).toContain('negative')
  })
})

describe('n', () => {
  it('keeps n = 1 without SD or SEM, and says so', () => {
    const reading = read(table([...PLAIN, '800,0.459,0.013,1']))
    expect(reading.conditions[0]!.points.at(-1)).toMatchObject({ n: 1, sd: null, sem: null })
    expect(reading.warnings).toMatchObject([{ id: 'n-one', lines: [6] }])
  })
  it.each(['2.5', '0', '-3', '1e9', 'nine'])('refuses n = %s', (n) => {
    expect(lineOf(read(table([...PLAIN, `800,0.459,0.013,${n}`])), 6)).toMatchObject({ kind: 'refused' })
  })
  it('asks for a missing n, and can be kept without', () => {
    const text = table(PLAIN.map(row => row.replace(/,\d+$/, '')), 'interval_ms,ratio,sem'), reading = read(text)
    expect(reading.questions).toMatchObject([{ id: 'no-n', must: false, lines: [2, 3, 4, 5] }])
    expect(reading.ready).toBe(true)
    expect(reading.conditions[0]!.points[0]).toMatchObject({ n: null, sd: null, sem: 0.008 })
    expect(read(text, { missingN: 9 }).conditions[0]!.points[0]).toMatchObject({ n: 9, sd: 0.024 })
    expect(questionIds(read(text, { missingN: null }))).toEqual([])
  })
})

describe('conditions', () => {
  it('takes the first for untouched and each other for a manipulation where the file says nothing', () => {
    const reading = read(table(['a,50,0.15,9', 'b,50,0.13,8', 'a,100,0.2,9'], 'condition,interval_ms,ratio,n'))
    expect(reading.conditions.map(one => [one.condition, one.protocol, one.manipulation, one.points.length])).toEqual([['a', 'protocol', 'none', 2], ['b', 'protocol', 'b', 1]])
  })
  it('tells one condition under two protocols apart', () => {
    const reading = read(table(['a,long,50,0.15', 'a,short,50,0.6'], 'condition,protocol,interval_ms,ratio'))
    expect(reading.conditions.map(one => one.condition)).toEqual(['a, long', 'a, short'])
    const three = read(table(['a,long,none,50,0.15', 'a,short,none,50,0.6', 'a,short,x,50,0.6'], 'condition,protocol,manipulation,interval_ms,ratio'))
    expect(three.conditions.map(one => one.condition)).toEqual(['a, long', 'a, short, none', 'a, short, x'])
  })
  it('warns of names that differ by capitals or blanks only', () => {
    expect(read(table(['Control,50,0.15', 'control ,100,0.2'], 'condition,interval_ms,ratio')).warnings.find(one => one.id === 'alike')!.sentence).toContain('“Control” and “control”')
  })
  it('asks whether a name holds for the rows below', () => {
    const text = table(['a,50,0.15', ',100,0.2', 'b,50,0.1'], 'condition,interval_ms,ratio')
    expect(read(text).questions.find(one => one.id === 'nameless')).toMatchObject({ must: true, lines: [3] })
    expect(read(text, { fillDown: true }).conditions.map(one => one.points.length)).toEqual([2, 1])
    expect(read(text, { fillDown: false }).conditions.map(one => one.points.length)).toEqual([1, 1])
  })
  it('refuses a cell without a name, and lets a repeat of a cell count once in the mean', () => {
    const reading = read(table(['A,50,0.1', 'A,50,0.2', 'B,50,0.3', 'C,50,0.4'], 'cell,interval_ms,ratio'))
    expect(reading.conditions[0]!.points).toMatchObject([{ n: 3 }])
    expect(reading.conditions[0]!.points[0]!.ratio).toBeCloseTo((0.15 + 0.3 + 0.4) / 3, 12)
    expect(reading.warnings).toMatchObject([{ id: 'duplicates', lines: [2, 3] }])
  })
  it('keeps a stated ratio that contradicts the two responses, and warns', () => {
    const reading = read(table(['A,50,332,46,0.140', 'B,50,300,60,0.35', 'C,50,0,60,', 'D,50,300,60,'], 'cell,interval_ms,response1_pA,response2_pA,ratio'))
    expect(reading.conditions[0]!.cells.map(one => one.ratio)).toEqual([0.14, 0.35, null, 0.2])
    expect(reading.warnings.filter(one => one.lines.length > 0)).toMatchObject([{ id: 'ratio-disagrees', lines: [3] }, { id: 'zero-first', lines: [4] }])
  })
})
