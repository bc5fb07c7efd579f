/** The three invented files of the demo bench, read without a single choice. Expected values stand in the files' own summary. */
import { describe, expect, it } from 'vitest'
import { meansOfCells } from '../../../shared/recordings/conditions'
import { mappingOf } from '../../../shared/recordings/mapping'
import { readingRecord } from '../../../shared/recordings/read'
import { read, readFixture } from './support'

const RATIOS = [0.150, 0.181, 0.243, 0.332, 0.459, 0.594, 0.685, 0.745, 0.799, 0.890, 0.945]
const SEMS = [0.008, 0.019, 0.010, 0.015, 0.013, 0.011, 0.012, 0.011, 0.013, 0.012, 0.009]
const INTERVALS = Array.from({ length: 11 }, (_, i) => 50 * 2 ** i)
const guessOf = (reading: ReturnType<typeof readFixture>, id: string) => reading.guesses.find(guess => guess.id === id)

describe('control_messy.csv', () => {
  const reading = readFixture('control_messy.csv'), [control] = reading.conditions

  it('reads eleven points, exactly', () => {
    expect(control!.points.map(point => point.intervalMs)).toEqual(INTERVALS)
    expect(control!.points.map(point => point.ratio)).toEqual(RATIOS)
    expect(control!.points.map(point => point.sem)).toEqual(SEMS)
    expect(control!.points.map(point => point.n)).toEqual([9, 8, 9, 9, 9, 9, 9, 9, 8, 8, 9])
    expect(control!.points.map(point => point.line)).toEqual([6, 7, 8, 9, 10, 12, 13, 14, 15, 16, 17])
  })

  it('finds separator, decimal mark, encoding and line ends without doubt', () => {
    expect(['separator', 'decimal', 'encoding', 'line-ends', 'header', 'unit'].map(id => [guessOf(reading, id)!.shown, guessOf(reading, id)!.sure])).toEqual([
      ['semicolon', 'certain'], ['comma', 'certain'], ['UTF-8 with byte order mark', 'certain'], ['CR LF', 'certain'], ['line 4', 'certain'], ['line 5', 'certain'],
    ])
    expect(guessOf(reading, 'decimal')!.sentence).toBe('In 33 of 33 numbers with a mark.')
  })

  it('sets seven lines aside, of five kinds, each with its reason', () => {
    expect(reading.setAside).toEqual([
      { line: 1, reason: 'title' }, { line: 2, reason: 'title' }, { line: 3, reason: 'blank line' }, { line: 5, reason: 'unit line, used for units' },
      { line: 11, reason: 'empty row' }, { line: 18, reason: 'empty row' }, { line: 19, reason: 'remark under the table' },
    ])
    expect(reading.sentence).toBe('11 points read; 7 of 19 lines set aside, each with its reason.')
    expect(reading.lines).toHaveLength(19)
  })

  it('shows s, percent and SEM to be confirmed, and asks nothing', () => {
    expect([guessOf(reading, 'time'), guessOf(reading, 'ratio')].map(guess => [guess!.shown, guess!.sure])).toEqual([['s', 'guess'], ['percent', 'guess']])
    expect(reading.columns.map(column => column.meaning)).toEqual(['interval', 'ratio', 'sem', 'n', 'ignore'])
    expect(reading.columns[2]!.sentence).toBe('Named so. An SD would be about 3.0 times larger with n of 9.')
    expect(guessOf(reading, 'kind')!.shown).toBe('means')
    expect(reading.columns[4]!.sentence).toBe('Empty in every line.')
    expect(reading.questions).toEqual([])
    expect(reading.ready).toBe(true)
  })

  it('follows every change of a choice', () => {
    expect(readFixture('control_messy.csv', { timeUnit: 'ms' }).conditions[0]!.points[0]!.intervalMs).toBe(0.05)
    expect(readFixture('control_messy.csv', { ratioScale: 'ratio' }).conditions[0]!.points[0]!.ratio).toBe(15)
    const asSd = readFixture('control_messy.csv', { columns: { 2: 'sd' } }).conditions[0]!.points[0]!
    expect(asSd).toMatchObject({ sd: 0.008 })
    expect(asSd.sem).toBeCloseTo(0.008 / 3, 12)
    const aside = readFixture('control_messy.csv', { leftOut: { 6: 'bad seal' }, condition: 'control', protocol: '200 ms step' })
    expect(aside.conditions[0]).toMatchObject({ condition: 'control', protocol: '200 ms step' })
    expect(aside.conditions[0]!.points).toHaveLength(10)
    expect(aside.setAside).toContainEqual({ line: 6, reason: 'bad seal' })
    expect(readFixture('control_messy.csv', { separator: ',' }).problems).not.toEqual(reading.problems)
  })

  it('gives a mapping under which the same file reads alike', () => {
    const mapping = mappingOf(reading, {})
    expect(mapping).toEqual({ columns: { 0: 'interval', 1: 'ratio', 2: 'sem', 3: 'n' }, timeUnit: 's', ratioScale: 'percent' })
    const again = readFixture('control_messy.csv', mapping)
    expect(again.conditions).toEqual(reading.conditions)
    expect(again.shape).toBe(reading.shape)
    expect(again.shape).toMatch(/^[0-9a-f]{64}$/)
    expect(again.guesses.filter(guess => guess.sure === 'guess' || guess.sure === 'asked')).toEqual([])
  })

  it('offers that mapping to the next night\'s file: other titles, other rows, the same header', () => {
    const next = read(['Kestrel Point, export;;;;', 'Interval;Recovery;SEM;n;', 's;%;%;;', '0,05;14,2;0,9;7;', '51,2;93,8;1,0;7;'].join('\n'))
    expect(next.shape).toBe(reading.shape)
    expect(read(['Interval;Recovery;SD;n;', 's;%;%;;', '0,05;14,2;0,9;7;', '51,2;93,8;1,0;7;'].join('\n')).shape).not.toBe(reading.shape)
  })

  it('is plain JSON, and keeps its decisions', () => {
    expect(JSON.parse(JSON.stringify(reading))).toEqual(reading)
    const record = readingRecord(reading, {})
    expect(record.decisions).toContain('Ratio: percent. Every value lies above 1.5, and the name or unit line says %.')
    expect(record.setAside).toHaveLength(7)
  })
})

describe('cells.csv', () => {
  const cells = readFixture('cells.csv'), summary = readFixture('summary.csv')

  it('makes the means, SD, SEM and n of summary.csv within 0.001, for all four conditions', () => {
    expect(cells.kind).toBe('cells')
    expect(cells.conditions.map(one => [one.condition, one.protocol, one.manipulation])).toEqual(summary.conditions.map(one => [one.condition, one.protocol, one.manipulation]))
    cells.conditions.forEach((made, i) => made.points.forEach((point, j) => {
      const stated = summary.conditions[i]!.points[j]!
      expect(point.intervalMs).toBe(stated.intervalMs)
      for (const key of ['ratio', 'sd', 'sem'] as const) expect(Math.abs(point[key]! - stated[key]!), `${made.condition} ${point.intervalMs} ${key}`).toBeLessThanOrEqual(0.001)
      expect(point.n).toBe(stated.n)
    }))
  })

  it('counts empty cells and takes none for 0', () => {
    expect(cells.counts[0]).toEqual({ condition: 'control', points: 11, cells: 9, rows: 99, empty: 3 })
    expect(cells.warnings.map(one => one.sentence)).toContain('control: 3 of 99 empty. They count as lost, never as 0.')
    expect(cells.conditions[0]!.cells.filter(one => one.ratio === null)).toHaveLength(3)
    expect(cells.conditions[0]!.cells.filter(one => one.ratio === 0)).toHaveLength(0)
  })

  it('leaves cells that are set aside out of the means', () => {
    const own = cells.conditions[0]!.cells
    const fewer = meansOfCells(own.map(one => one.cell === 'C01' ? { ...one, aside: 'bad seal' } : one))
    expect(fewer[0]!.n).toBe(cells.conditions[0]!.points[0]!.n! - 1)
  })

  it('makes ratios from the two responses where no ratio is stated', () => {
    const made = readFixture('cells.csv', { columns: { 7: 'ignore' } })
    expect(made.conditions[0]!.cells[0]!.ratio).toBeCloseTo(46 / 332, 12)
    expect(made.counts[0]!.empty).toBe(3)
  })
})
