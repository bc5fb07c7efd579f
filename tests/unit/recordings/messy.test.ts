/** Tables as they come: separators, ragged rows, quotes, headers, percent, missing values, dates. */
import { describe, expect, it } from 'vitest'
import { withAnswer } from '../../../shared/recordings/choices'
import { lineOf, PLAIN, questionIds, read, table, warningIds } from './support'

describe('separators and rows', () => {
  it.each([[';', 'semicolon'], ['\t', 'tab'], [',', 'comma']] as const)('finds %j', (separator, name) => {
    const reading = read(table(PLAIN).replaceAll(',', separator))
    expect(reading.guesses.find(guess => guess.id === 'separator')).toMatchObject({ shown: name, sure: 'certain' })
    expect(reading.conditions[0]!.points).toHaveLength(4)
  })
  it('lists ragged rows and rows of another separator, and leaves them to the person', () => {
    const text = table([...PLAIN, '800;0.459;0.013;9', '1600,0.594,0.011,9,7', '3200,0.685'])
    const asked = read(text), question = asked.questions.find(one => one.id === 'ragged')!
    expect(question).toMatchObject({ must: true, lines: [6, 7, 8] })
    expect(asked.ready).toBe(false)
    expect(asked.conditions[0]!.points).toHaveLength(4)
    expect(lineOf(asked, 8)).toMatchObject({ kind: 'ragged', remark: 'set aside: 2 cells where the table has 4', cells: ['3200', '0.685'] })
    const taken = read(text, { ragged: 'take' })
    expect(taken.conditions[0]!.points.map(point => [point.intervalMs, point.ratio, point.n])).toEqual([[50, 0.15, 9], [100, 0.181, 8], [200, 0.243, 9], [400, 0.332, 9], [800, 0.459, 9], [1600, 0.594, 9], [3200, 0.685, null]])
    const left = read(text, { ragged: 'leave' })
    expect([left.conditions[0]!.points.length, left.setAside.length, left.ready]).toEqual([4, 3, true])
  })
  it('reads a quoted cell with a line break and keeps the numbers of lines', () => {
    const reading = read(['interval_ms,ratio,sem,n,note', '50,0.15,0.008,9,"first', 'try"', '100,0.181,0.019,8,"say ""yes"""', '-5,0.2,0.01,9,'].join('\n'))
    expect(reading.conditions[0]!.points.map(point => point.line)).toEqual([2, 4])
    expect(lineOf(reading, 2)!.cells[4]).toBe('first\ntry')
    expect(lineOf(reading, 4)!.cells[4]).toBe('say "yes"')
    expect(lineOf(reading, 5)).toMatchObject({ kind: 'refused' })
    expect(reading.fileLines).toBe(5)
  })
  it('names the line on which an unclosed quote opens', () => {
    const reading = read(table([...PLAIN, '"800,0.4,0.01,9', '1600,0.5,0.01,9']))
    expect(reading.problems).toEqual([{ path: 'file', message: 'A quote opens on line 6 and is never closed.' }])
    expect(reading.ready).toBe(false)
  })
  it('refuses more rows than are kept, and rows that are no table', () => {
    const many = read(table(Array.from({ length: 20_001 }, (_, i) => `${i + 1},0.5,0.01,9`)))
    expect(many.problems[0]!.message).toBe('This table has 20001 rows; at most 20000 are kept in one recording.')
    expect(read(table(Array.from({ length: 60_000 }, (_, i) => `${i + 1},0.5,0.01,9`))).problems[0]!.message).toBe('This file has 60001 lines; at most 20000 rows are kept in one recording.')
    expect(read(table([...PLAIN, ';'.repeat(2_000_000)])).problems[0]!.message).toBe('Line 6 is longer than 1000000 characters; this is no table.')
    expect(read(table([...PLAIN, '\n'.repeat(3_000_001)])).problems[0]!.message).toBe('This file has more than 3000000 lines.')
    expect(read(table([...PLAIN, `800,${' '.repeat(500_000)}x,0.01,9`])).conditions[0]!.points).toHaveLength(4)
    expect(read(table([Array.from({ length: 501 }, () => '1').join(',')])).problems[0]!.message).toContain('at most 500')
  })
})

describe('headers', () => {
  it('sets a header aside that comes again after a page break', () => {
    const reading = read(table([...PLAIN.slice(0, 2), 'interval_ms,ratio,sem,n', ...PLAIN.slice(2)]))
    expect(reading.conditions[0]!.points).toHaveLength(4)
    expect(lineOf(reading, 4)).toMatchObject({ kind: 'again', remark: 'set aside: header or unit line again' })
  })
  it('asks which of two different headers holds', () => {
    const text = ['interval;ratio;sem;n', 'delay (s);recovery;sd;cells', '0.05;0.15;0.01;9', '0.1;0.2;0.01;9'].join('\n')
    expect(read(text).questions.find(one => one.id === 'header')).toMatchObject({ must: true, lines: [1, 2] })
    const second = read(text, { headerLine: 2 })
    expect(questionIds(second)).toEqual([])
    expect(second.columns.map(column => column.meaning)).toEqual(['interval', 'ratio', 'sd', 'n'])
  })
  it('asks which of two columns of one name is meant', () => {
    const text = ['interval_ms,ratio,ratio,n', '50,0.15,0.25,9', '100,0.2,0.3,9'].join('\n'), reading = read(text)
    const question = reading.questions.find(one => one.id === 'twice-ratio')!
    expect(question).toMatchObject({ must: true, sentence: 'Columns B and C can both be the ratio (second over first); which is meant?' })
    expect(reading.ready).toBe(false)
    expect(read(text, question.options[1]!.choices).conditions[0]!.points.map(point => point.ratio)).toEqual([0.25, 0.3])
  })
  it('calls columns A, B, C where there is no header, and asks what each holds', () => {
    const text = ['50;0,150;0,008;9', '100;0,181;0,019;8', '200;0,243;0,010;9'].join('\n'), reading = read(text)
    expect(reading.guesses.find(guess => guess.id === 'header')!.shown).toBe('none')
    expect(questionIds(reading)).toEqual(['column-A', 'column-B', 'column-C', 'column-D'])
    expect(reading.questions.map(one => one.options[one.suggested!]!.label)).toEqual(['interval', 'ratio (second over first)', 'SEM', 'n'])
    const answered = read(text, { columns: { 0: 'interval', 1: 'ratio', 2: 'sem', 3: 'n' } })
    expect(questionIds(answered)).toEqual(['time'])
    expect(read(text, { columns: { 0: 'interval', 1: 'ratio', 2: 'sem', 3: 'n' }, timeUnit: 'ms' })).toMatchObject({ ready: true, conditions: [{ points: [{ intervalMs: 50, ratio: 0.15 }, {}, {}] }] })
  })
  it('asks where rows are wider than their header: split decimal commas are never taken for columns', () => {
    const split = read('interval_s,recovery,sem,n\n0,05,15,0,0,8,9\n0,1,18,1,1,9,8')
    expect(split.questions).toMatchObject([{ id: 'header-width', must: true }])
    expect(split.questions[0]!.sentence).toContain('The header names 4 columns, yet the rows have 7 cells.')
    expect(split.ready).toBe(false)
    const numbered = read('interval_ms,ratio,n\n1,50,0.15,9\n2,100,0.2,9'), options = numbered.questions.find(one => one.id === 'header-width')!.options
    const shifted = read('interval_ms,ratio,n\n1,50,0.15,9\n2,100,0.2,9', options[1]!.choices)
    expect(shifted).toMatchObject({ ready: true, conditions: [{ points: [{ intervalMs: 50, ratio: 0.15, n: 9 }, { intervalMs: 100 }] }] })
  })
  it('lets rows wait while nothing says what their columns hold', () => {
    const reading = read('interval_ms;control;peptide\n50;0.15;0.13\n100;0.2;0.14')
    expect(questionIds(reading)).toEqual(['column-B', 'column-C'])
    expect(reading).toMatchObject({ sentence: '2 rows wait until it is said what their columns hold.', setAside: [], ready: false, conditions: [] })
    const answered = reading.questions.reduce((choices, question, i) => withAnswer(choices, question.options.find(one => one.label === (i === 0 ? 'ratio (second over first)' : 'left out'))!.choices), {})
    expect(read('interval_ms;control;peptide\n50;0.15;0.13\n100;0.2;0.14', answered)).toMatchObject({ ready: true, conditions: [{ points: [{ ratio: 0.15 }, { ratio: 0.2 }] }] })
  })
  it('says so where there is one column, or no number at all', () => {
    expect(read('ratio\n0.1\n0.2').problems[0]!.message).toContain('single column')
    expect(read('Dear all,\nplease find the numbers below; they are good.').problems[0]!.message).toBe('This file has no rows of numbers.')
  })
  it('asks of an error bar which kind it is', () => {
    const text = ['interval_ms,ratio,error,n', '50,0.15,0.02,9', '100,0.2,0.02,9'].join('\n')
    expect(read(text).questions).toMatchObject([{ id: 'column-C', must: true, options: [{ label: 'SEM' }, { label: 'SD' }, { label: 'half-width of the 95 % interval' }] }])
    expect(read(text, { columns: { 2: 'sd' } }).conditions[0]!.points[0]).toMatchObject({ sd: 0.02, sem: 0.02 / 3 })
  })
})

describe('marks and units', () => {
  it('asks what “1,234” means and settles it by one answer', () => {
    const text = ['interval_ms;ratio;n', '1,234;1,071;9', '2,468;1,080;9'].join('\n'), reading = read(text)
    expect(reading.questions.find(one => one.id === 'decimal')).toMatchObject({ must: true, sentence: 'Line 2, “1,234”, can be read in two ways; which is the decimal mark?', lines: [2, 3] })
    expect(reading.ready).toBe(false)
    const values = (decimal: '.' | ',') => read(text, { decimal }).conditions[0]!.points.map(point => [point.intervalMs, point.ratio])
    expect(values(',')).toEqual([[1.234, 1.071], [2.468, 1.08]])
    expect(values('.')[0]![0]).toBe(1234)
  })
  it('takes a single odd cell among decimal points for a question, not for a value', () => {
    const reading = read(table(['"1,600",0.594,0.011,9', ...PLAIN]))
    expect(reading.questions.find(one => one.id === 'decimal')!.lines).toEqual([2])
    expect(lineOf(reading, 2)).toMatchObject({ kind: 'refused', kept: null })
    expect(read(table(['"1,600",0.594,0.011,9', ...PLAIN]), { decimal: '.' }).conditions[0]!.points.at(-1)!.intervalMs).toBe(1600)
  })
  it('asks where commas and points are both decimal marks', () => {
    const reading = read('interval_s;ratio;n\n0,05;0.15;9\n0,1;0.2;9')
    expect(reading.questions.find(one => one.id === 'decimal')!.sentence).toBe('2 numbers have a decimal comma and 2 a decimal point; which is the decimal mark?')
  })
  it('asks “percent?” where most values are above 1.5 and nothing says %', () => {
    const text = table(['50,14.8,0.8,9', '100,18.1,1.9,8', '51200,94.5,0.9,9']), reading = read(text)
    expect(reading.questions.find(one => one.id === 'ratio')).toMatchObject({ must: true, suggested: 0, sentence: 'Most values are above 1.5 (14.8 to 94.5); is this percent?' })
    expect(reading.ready).toBe(false)
    const points = read(text, { ratioScale: 'percent' }).conditions[0]!.points
    expect(points.map(point => [point.ratio, point.sem])).toEqual([[0.148, 0.008], [0.181, 0.019], [0.945, 0.009]])
  })
  it('asks where the header says % and the values do not', () => {
    expect(questionIds(read(table(PLAIN, 'interval_ms,recovery (%),sem,n')))).toEqual(['ratio'])
  })
  it('asks, and suggests nothing, where paired pulses facilitate', () => {
    const reading = read(table(['20,1.8,0.1,9', '50,1.6,0.1,9', '100,1.3,0.1,9'], 'ISI (ms),PPR,SEM,n'))
    expect(reading.questions).toMatchObject([{ id: 'ratio', suggested: null }])
    expect(reading.conditions[0]!.points[0]!.ratio).toBe(1.8)
  })
  it('takes a ratio above 1 and one below 0', () => {
    const reading = read(table([...PLAIN, '800,1.07,0.01,9', '10,-0.02,0.01,9', '20,\u22120.01,0.01,9']))
    expect(reading.questions).toEqual([])
    expect(reading.conditions[0]!.points.map(point => point.ratio)).toEqual([-0.02, -0.01, 0.15, 0.181, 0.243, 0.332, 1.07])
  })
  it('reads a per cent sign and a unit in the cells themselves', () => {
    const reading = read('interval;ratio;sem;n\n50 ms;15 %;0.8 %;9\n0.1 s;18.1 %;1.9 %;8')
    expect(reading.conditions[0]!.points).toMatchObject([{ intervalMs: 50, ratio: 0.15, sem: 0.008 }, { intervalMs: 100, ratio: 0.181, sem: 0.019 }])
    expect(reading.questions).toEqual([])
  })
  it.each([
    ['a time axis that starts at 50', ['50', '100', '51200'], 0], ['one that starts at 0.05', ['0.05', '0.1', '51.2'], 1], ['one that leaves it open', ['10', '20', '40'], null],
  ])('asks for the unit of %s', (_, intervals, suggested) => {
    const reading = read(table(intervals.map(one => `${one},0.5,0.01,9`), 'dt,ratio,sem,n'))
    expect(reading.questions.find(one => one.id === 'time')).toMatchObject({ must: true, suggested })
  })
})

describe('missing values, dates and formulas', () => {
  it.each(['', 'NA', 'n/a', 'NaN', '-', '--', '#N/A', '#DIV/0!', '–'])('counts %j as missing, never as 0', (spelling) => {
    const reading = read(table([...PLAIN, `800,${spelling},0.013,9`]))
    expect(lineOf(reading, 6)).toMatchObject({ kind: 'lost', remark: 'set aside: There is no ratio.', kept: null })
    expect(Object.values(reading.missing)).toEqual([1])
    expect(reading.conditions[0]!.points).toHaveLength(4)
  })
  it.each([
    ['03.Dez', 'perhaps 3.12'], ['12/3', 'perhaps 12.3'], ['3-Dec', 'perhaps 3.12'], ['Mrz 12', 'perhaps 3.12'], ['2024-03-12', 'date'], ['3.12.2024', 'date'],
  ])('refuses %j by its line', (date, hint) => {
    const reading = read(table([...PLAIN.slice(0, 3), `400,${date},0.015,9`]))
    expect(lineOf(reading, 5)).toMatchObject({ kind: 'refused', kept: null })
    expect(lineOf(reading, 5)!.remark).toContain('looks like a date made by a spreadsheet')
    expect(lineOf(reading, 5)!.remark).toContain(hint)
    expect(reading.conditions[0]!.points).toHaveLength(3)
  })
  it('keeps formula-like text as text and refuses it as a number', () => {
    const rows = ['=1+2,50,0.15,0.008,9', '@SUM(A1),100,0.2,0.01,9', 'x,=0.2,0.2,0.01,9', 'x,200,+A1,0.01,9', 'x,400,+0.4,0.01,9']
    const reading = read(table(rows, 'condition,interval_ms,ratio,sem,n'))
    expect(reading.conditions.map(one => [one.condition, one.points.length])).toEqual([['=1+2', 1], ['@SUM(A1)', 1], ['x', 1]])
    expect([4, 5].map(line => lineOf(reading, line)!.kind)).toEqual(['refused', 'refused'])
  })
})

describe('intervals', () => {
  it.each(['-50', '\u221250', 'soon', '=50', '1e999', '0x32', ''])('refuses %j by its line', (interval) => {
    const reading = read(table([...PLAIN, `${interval},0.459,0.013,9`]))
    expect(lineOf(reading, 6)).toMatchObject({ kind: 'refused', kept: null })
    expect(reading.setAside).toHaveLength(1)
    expect(reading.conditions[0]!.points).toHaveLength(4)
  })
  it('keeps 0 with a warning', () => {
    const reading = read(table(['0,0.12,0.01,9', ...PLAIN]))
    expect(reading.conditions[0]!.points[0]).toMatchObject({ intervalMs: 0, ratio: 0.12 })
    expect(warningIds(reading)).toEqual(['zero-interval'])
  })
  it('keeps two rows of one interval, or merges them by n', () => {
    const text = table(['50,0.10,0.01,4', '50,0.20,0.02,12', ...PLAIN.slice(1)])
    const kept = read(text)
    expect(kept.conditions[0]!.points.slice(0, 2).map(point => point.ratio)).toEqual([0.1, 0.2])
    expect(kept.questions).toMatchObject([{ id: 'duplicates', must: false, lines: [2, 3] }])
    expect(kept.ready).toBe(true)
    const [merged] = read(text, { duplicates: 'merge' }).conditions[0]!.points
    // Sixteen values in two groups: mean 0.175; squares within 3·0.02² + 11·(0.02·√12)², between 4·0.075² + 12·0.025².
    const sd = Math.sqrt((3 * 0.02 ** 2 + 11 * 0.0048 + 4 * 0.075 ** 2 + 12 * 0.025 ** 2) / 15)
    expect(merged!.ratio).toBeCloseTo(0.175, 12)
    expect(merged!.n).toBe(16)
    expect(merged!.sd).toBeCloseTo(sd, 10)
    expect(merged!.sem).toBeCloseTo(sd / 4, 10)
  })
  it('sorts the view and says so, the file keeps its order', () => {
    const reading = read(table([PLAIN[2]!, PLAIN[0]!, PLAIN[1]!]))
    expect(reading.conditions[0]!.points.map(point => [point.intervalMs, point.line])).toEqual([[50, 3], [100, 4], [200, 2]])
    expect(reading.lines.map(line => line.line)).toEqual([1, 2, 3, 4])
    expect(reading.warnings).toMatchObject([{ id: 'unsorted', lines: [3] }])
  })
})
