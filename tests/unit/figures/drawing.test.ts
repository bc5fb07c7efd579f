/** The layout of refill figures: axes, thinning, labels, the strip and the words. */
import { describe, expect, it } from 'vitest'
import { differenceAxis, fractionAxis, logStart, roundDown, timeAxis } from '../../../app/utils/figureAxis'
import { differenceOf } from '../../../app/utils/figureDifference'
import { layFigure } from '../../../app/utils/figureDrawing'
import { textWidth } from '../../../app/utils/figureLabels'
import { decimals, digits, placesFor, setNumber, setTime } from '../../../app/utils/figureNumber'
import { curveClasses, curveValueAt, drawnPoints, type FigureSeries } from '../../../app/utils/figureSeries'
import { csvOf, figureCsv, figureTable } from '../../../app/utils/figureTable'
import { figureSentences, gapWords, readingOf } from '../../../app/utils/figureWords'

const times = Array.from({ length: 2001 }, (_, i) => i * 0.02)
const curve = (tau: number) => times.map(time => 1 - Math.exp(-time / tau))
const around = (values: number[], half: number) => ({ low: values.map(value => value - half), high: values.map(value => value + half) })
const walk: FigureSeries = { id: 'walk', kind: 'walk', label: 'Walk, mean of 200 replicates', note: 'inner band: 95 % interval of the mean', times, values: curve(1.2), inner: around(curve(1.2), 0.008), outer: around(curve(1.2), 0.1), outerLabel: '95 % of single ribbons' }
const closed: FigureSeries = { id: 'closed', kind: 'closed-form', label: 'Closed form', times, values: curve(1) }
const both = [walk, closed]

describe('axes', () => {
  it('begins a log axis at a round time at or below the first sample, at most four decades down', () => {
    expect(roundDown(0.02)).toBe(0.02)
    expect(roundDown(0.041)).toBe(0.03)
    expect(logStart(0.02, 40)).toBe(0.02)
    expect(logStart(1e-6, 100)).toBe(0.01)
  })
  it('numbers 1 and 3 of each decade where there is room and 1 alone where not, and always both ends or neither overlapping', () => {
    const wide = timeAxis('log', 0.02, 60, 46, 842).ticks.filter(tick => tick.text !== null).map(tick => tick.text)
    expect(wide).toEqual(expect.arrayContaining(['0.02', '0.03', '0.1', '0.3', '1', '3', '10', '30', '60']))
    const narrow = timeAxis('log', 0.02, 60, 46, 344).ticks.filter(tick => tick.text !== null)
    expect(narrow.map(tick => tick.text)).toEqual(expect.arrayContaining(['0.1', '1', '10', '60']))
    const axis = timeAxis('log', 0.02, 60, 46, 344)
    const places = narrow.map(tick => axis.place(tick.at)).sort((a, b) => a - b)
    for (let i = 1; i < places.length; i++) expect(places[i]! - places[i - 1]!).toBeGreaterThan(24)
  })
  it('inverts what it places', () => {
    for (const kind of ['log', 'linear'] as const) {
      const axis = timeAxis(kind, 0.02, 40, 46, 842)
      expect(axis.invert(axis.place(3.3))).toBeCloseTo(3.3, 9)
    }
  })
  it('keeps the whole fraction axis unless little fills', () => {
    expect(fractionAxis(0.9, 0, 100).to).toBe(1)
    expect(fractionAxis(0.2, 0, 100).to).toBe(0.25)
    expect(fractionAxis(0.004, 0, 100).to).toBeLessThanOrEqual(0.01)
  })
  it('has zero inside a difference axis', () => {
    for (const [low, high] of [[-4, -1], [1, 3], [-0.1, 0.1]] as const) {
      const axis = differenceAxis(low, high, 0, 84)
      expect(axis.from).toBeLessThan(0)
      expect(axis.to).toBeGreaterThan(0)
    }
  })
})

describe('curves', () => {
  it('reads between samples and not beyond them', () => {
    expect(curveValueAt([0, 1, 2], [0, 10, 20], 1.5)).toBe(15)
    expect(curveValueAt([0, 1, 2], [0, 10, 20], 2)).toBe(20)
    expect(curveValueAt([0, 1, 2], [0, 10, 20], 2.1)).toBeNull()
    expect(curveValueAt([1, 2], [10, 20], 0.5)).toBeNull()
  })
  it('draws at most two points a pixel and both ends', () => {
    const many = Array.from({ length: 20_000 }, (_, i) => i * 0.003)
    const axis = timeAxis('log', 0.003, 59.997, 46, 842)
    const points = drawnPoints(many, many, axis.fromS, axis.toS, axis.place)
    expect(points.length).toBeLessThan(1700)
    expect(points[0]!.timeS).toBe(axis.fromS)
    expect(points.at(-1)!.timeS).toBe(axis.toS)
  })
  it('draws a preview as the walk only while no walk stands beside it', () => {
    expect(curveClasses([{ ...walk, kind: 'preview' }]).walk).toBe('sim')
    expect(curveClasses([walk, { ...closed, id: 'p', kind: 'preview' }]).p).toBe('third')
  })
})

describe('layout', () => {
  it.each([358, 760, 860])('stays inside %i px, names every curve and lets no name overlap another', (width) => {
    const layout = layFigure({ width, scale: 'log', series: both, difference: { of: 'walk', minus: 'closed' } })
    expect(layout.frame.right).toBeLessThan(width)
    const names = layout.labels.map(label => label.id)
    expect(names).toEqual(expect.arrayContaining(['walk', 'closed']))
    const boxes = layout.labels.map((label) => {
      const wide = Math.max(...label.lines.map(line => textWidth(line.text, line.strong)))
      return { left: label.anchor === 'start' ? label.x : label.x - wide, right: label.anchor === 'start' ? label.x + wide : label.x, top: label.y - 12, bottom: label.y + (label.lines.length - 1) * 16 + 4 }
    })
    boxes.forEach((box, i) => {
      expect(box.left).toBeGreaterThanOrEqual(layout.frame.left)
      expect(box.right).toBeLessThanOrEqual(layout.frame.right)
      boxes.slice(i + 1).forEach(other => expect(box.left < other.right && other.left < box.right && box.top < other.bottom && other.top < box.bottom).toBe(false))
    })
    expect(layout.strip).not.toBeNull()
    expect(layout.height).toBeGreaterThan(layout.footY)
  })
  it('leaves the strip out where one of the two curves is missing', () => {
    expect(layFigure({ width: 860, scale: 'log', series: [closed], difference: { of: 'walk', minus: 'closed' } }).strip).toBeNull()
  })
  it('draws plain leaders where measured points stand', () => {
    const recording: FigureSeries = { id: 'r', kind: 'recording', label: 'Recording', times: [0.05, 1, 10], values: [0.1, 0.5, 0.9], errors: [0.02, null, 0.01] }
    const layout = layFigure({ width: 860, scale: 'log', series: [...both, recording] })
    expect(layout.leadersPlain).toBe(true)
    expect(layout.points.map(point => point.error !== null)).toEqual([true, false, true])
  })
  it('stands with a single sample and with nothing filled', () => {
    const empty: FigureSeries = { id: 'e', kind: 'closed-form', label: 'Closed form', times: [0, 1], values: [0, 0] }
    const layout = layFigure({ width: 600, scale: 'log', series: [empty] })
    expect(layout.curves[0]!.d).not.toContain('NaN')
    expect(layFigure({ width: 600, scale: 'linear', series: [{ ...empty, times: [0], values: [0] }] }).curves[0]!.d).not.toContain('NaN')
  })
})

describe('numbers and words', () => {
  it('sets a true minus, thin spaces from five figures, and never −0', () => {
    expect(setNumber('-12345.5')).toBe('\u221212\u202F345.5')
    expect(setNumber('8248')).toBe('8248')
    expect(decimals(-0.0004, 2)).toBe('0.00')
    expect(digits(0.000123, 2)).toBe('0.00012')
    expect(digits(1.5e-7, 2)).toBe('1.5 × 10^\u22127')
    expect(placesFor(0.0083)).toBe(4)
    expect(setTime(0.004)).toBe('4.0\u00A0ms')
  })
  it('reads a value with half its interval', () => {
    expect(readingOf(walk, 1.2)).toBe('0.632 ± 0.008')
    expect(readingOf(closed, 1)).toBe('0.632')
    expect(readingOf(walk, 41)).toBeNull()
  })
  it('finds the largest gap with its half width', () => {
    const difference = differenceOf(walk, closed)
    // 1 − e^(−t/1.2) − (1 − e^(−t)) is least where e^(−t) = e^(−t/1.2)/1.2: t = 6 ln 1.2 = 1.094 s, −6.70 percentage points.
    expect(difference.largest!.timeS).toBeCloseTo(6 * Math.log(1.2), 1)
    expect(difference.largest!.value).toBeCloseTo(-6.698, 2)
    expect(gapWords(difference)).toBe('\u22126.7 ± 0.8 at 1.1\u00A0s')
  })
  it('says in sentences what is drawn', () => {
    const layout = layFigure({ width: 860, scale: 'log', series: both })
    const text = figureSentences('Filled sites (fraction of 48)', layout.time, both, differenceOf(walk, closed), ['walk', 'closed form'])
    expect(text).toContain('on a logarithmic axis, 0.020 s to 40 s')
    expect(text).toContain('Largest gap, walk minus closed form: \u22126.7 ± 0.8 at 1.1 s in percentage points.')
  })
})

describe('table and CSV', () => {
  it('has every sample in the CSV and a readable choice in the table', () => {
    const lines = figureCsv(both).trimEnd().split('\r\n')
    expect(lines).toHaveLength(2002)
    expect(lines[0]).toContain('"Walk, mean of 200 replicates, 95 % of the mean, low"')
    expect(lines[0]!.startsWith('time_s,')).toBe(true)
    const table = figureTable(both)
    expect(table.samples).toBe(2001)
    expect(table.rows.length).toBeLessThanOrEqual(24)
    expect(table.rows[0]![0]).toBe('0')
    expect(table.rows.at(-1)![0]).toBe('40')
  })
  it('quotes commas and keeps a cell that a spreadsheet would calculate a text', () => {
    expect(csvOf([['a,b', '=SUM(A1)', '-1', null, 2.5]])).toBe('"a,b",\'=SUM(A1),-1,,2.5\r\n')
  })
})
