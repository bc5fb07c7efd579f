/** The layout of a weigh-up figure: everything inside its frame, every point drawn, no number lost, at any width and for one to eight conditions. */
import { describe, expect, it } from 'vitest'
import type { WeighCandidate } from '../../../shared/schemas/weigh-up'
import { EXPLANATIONS, EXPLANATION_NAMES } from '../../../shared/fitting/weighing/explanations'
import { errorOf, intervalAxis, ratioAxis, ratioReach } from '../../../app/utils/weighAxes'
import { columnsFor, criterionWord, layWeighUp, nameInFigure, type WeighLayout } from '../../../app/utils/weighDrawing'
import { weighCsv, weighSentence, weighTable } from '../../../app/utils/weighTable'

/** Invented: a condition recovers with one rate; candidate k misses every point by k standard errors, in turn to both sides. */
const times = [0, 0.05, 0.2, 0.8, 3.2, 12.8, 51.2]
const gridS = Array.from({ length: 61 }, (_, i) => 0.0435 * (58.9 / 0.0435) ** (i / 60))
const recovered = (timeS: number, rate: number) => 1 - 0.85 * Math.exp(-rate * timeS)
const conditionsOf = (count: number, error: number | null = 0.012) => Array.from({ length: count }, (_, c) => ({
  condition: `condition ${c + 1}`, protocol: '200 ms step', manipulation: 'none', aside: 0, gridS,
  points: times.map((timeS, i) => ({ timeS, ratio: recovered(timeS, 0.3 + c), error, sd: 0.036, n: i % 2 ? 8 : 9 })),
}))
const candidatesOf = (count: number, conditions: number): WeighCandidate[] => EXPLANATIONS.slice(0, count).flatMap((explanation, k) => [true, false].map(best => ({
  explanation, name: EXPLANATION_NAMES[explanation], changes: [], best, chi2: 30.24 + 206 * k, dof: 36, free: 7, pValue: 0.5, acceptable: k === 0, criterion: 44.24 + 206 * k,
  behind: 206 * k, weight: k ? 0 : 1, reading: k ? 'excluded' as const : 'preferred' as const, parameters: [], correlations: [],
  curves: best ? Array.from({ length: conditions }, (_, c) => gridS.map(timeS => recovered(timeS, 0.3 + c + k / 10))) : [],
  residuals: best ? Array.from({ length: conditions }, () => times.map((_, i) => (i % 2 ? -2 : 2) * k + 0.5)) : [],
})))
const weighUpOf = (conditions: number, candidates = 5, error: number | null = 0.012) =>
  ({ conditions: conditionsOf(conditions, error), candidates: candidatesOf(candidates, conditions), criterion: error === null ? 'aicc' as const : 'chi2' as const })

const numbersIn = (layout: WeighLayout) => JSON.stringify(layout, (_, value: unknown) => typeof value === 'number' && !Number.isFinite(value) ? 'no number' : value)
const cases = [240, 358, 560, 771, 900, 1320].flatMap(width => [1, 2, 3, 4, 5, 8].flatMap(count => [false, true].map(inRatio => ({ width, count, inRatio }))))

describe('the figure of a weigh-up', () => {
  it.each(cases)('has $count conditions inside $width px, in ratio: $inRatio', ({ width, count, inRatio }) => {
    const layout = layWeighUp({ width, weighUp: weighUpOf(count, 6), inRatio })
    expect(numbersIn(layout)).not.toMatch(/no number|NaN|Infinity|undefined/)
    expect(layout.panels).toHaveLength(count)
    for (const { frame, points, strips, time, footY } of layout.panels) {
      expect(frame.left).toBeGreaterThan(0)
      expect(frame.right).toBeLessThanOrEqual(width)
      expect(frame.right - frame.left).toBeGreaterThan(100)
      expect(footY + 21).toBeLessThan(layout.height)
      expect(time.ticks.filter(tick => tick.text !== null).length).toBeGreaterThanOrEqual(2)
      // The interval of 0 has no place on a log axis; every other point is drawn.
      expect(points).toHaveLength(times.length - 1)
      for (const { x, y } of points) {
        expect(x).toBeGreaterThan(frame.left)
        expect(x).toBeLessThan(frame.right)
        expect(y).toBeGreaterThanOrEqual(frame.top)
        expect(y).toBeLessThanOrEqual(frame.bottom)
      }
      expect(strips).toHaveLength(6)
      for (const { box, lollipops } of strips) {
        expect(lollipops).toHaveLength(times.length - 1)
        for (const { y } of lollipops) {
          expect(y).toBeGreaterThanOrEqual(box.top - 1e-9)
          expect(y).toBeLessThanOrEqual(box.bottom + 1e-9)
        }
      }
    }
  })

  it('keeps frames and strips of one figure apart', () => {
    for (const { width, count } of cases) {
      const boxes = layWeighUp({ width, weighUp: weighUpOf(count, 6) }).panels.flatMap(({ frame, strips }) => [frame, ...strips.map(strip => strip.box)])
      boxes.forEach((a, i) => boxes.slice(i + 1).forEach(b => expect(a.left < b.right && b.left < a.right && a.top < b.bottom && b.top < a.bottom).toBe(false)))
    }
  })

  it('draws curves inside the frame, the leading one last', () => {
    const layout = layWeighUp({ width: 1320, weighUp: weighUpOf(4) })
    for (const { frame, curves } of layout.panels) {
      expect(curves.map(one => one.className)).toEqual(['fifth', 'fourth', 'third', 'exp', 'sim'])
      for (const { d } of curves) {
        const places = [...d.matchAll(/([\d.]+),([\d.]+)/g)].map(([, x, y]) => [Number(x), Number(y)] as const)
        expect(places).toHaveLength(gridS.length)
        for (const [x, y] of places) {
          expect(x).toBeGreaterThanOrEqual(frame.left)
          expect(x).toBeLessThanOrEqual(frame.right)
          expect(y).toBeGreaterThanOrEqual(frame.top)
          expect(y).toBeLessThanOrEqual(frame.bottom)
        }
      }
    }
  })

  it('tells within two standard errors, beyond, and beyond eight, on the right side', () => {
    const weighUp = weighUpOf(1, 1)
    weighUp.candidates[0]!.residuals = [[0, -2, 2.1, -7.9, 8.1, -30, 0]]
    const [panel] = layWeighUp({ width: 900, weighUp }).panels
    const { lollipops, middle, box } = panel!.strips[0]!
    expect(lollipops.map(one => one.kind)).toEqual(['in', 'out', 'out', 'up', 'down', 'in'])
    expect(lollipops.map(one => Math.sign(middle - one.y))).toEqual([-1, 1, -1, 1, -1, 0])
    expect(lollipops[0]!.y - middle).toBeCloseTo((box.bottom - box.top) / 8, 9)
    expect(lollipops[3]!.y).toBe(box.top)
    expect(lollipops.filter(one => one.triangle)).toHaveLength(2)
  })

  it('shows the same deviation in ratio as in standard errors times the error', () => {
    const weighUp = weighUpOf(1, 2)
    const layout = layWeighUp({ width: 900, weighUp, inRatio: true }), { middle, box, lollipops } = layout.panels[0]!.strips[1]!
    expect(layout.reach).toBe(0.1)
    expect((middle - lollipops[0]!.y) / ((box.bottom - box.top) / 2)).toBeCloseTo(-1.5 * 0.012 / 0.1, 9)
    expect(ratioReach(conditionsOf(2, 0.03), undefined)).toBe(0.5)
  })

  it('takes the error from the scatter where none is known, and says AICc', () => {
    const weighUp = weighUpOf(2, 3, null), [leading] = weighUp.candidates
    expect(errorOf(null, leading!)).toBeCloseTo(Math.sqrt(30.24 / 36), 12)
    expect(criterionWord(leading!, 'aicc')).toBe('AICc 44.2')
    const layout = layWeighUp({ width: 900, weighUp, inRatio: true })
    expect(numbersIn(layout)).not.toMatch(/no number|NaN/)
    expect(layout.panels.flatMap(panel => panel.points).every(point => point.error === null)).toBe(true)
  })

  it('wraps into alike rows, each with its own names', () => {
    expect([1, 2, 3, 4, 5, 6, 7, 8].map(count => columnsFor(1320, count))).toEqual([1, 2, 3, 4, 3, 3, 4, 4])
    expect([columnsFor(899, 4), columnsFor(560, 4), columnsFor(559, 4)]).toEqual([2, 2, 1])
    for (const [width, rows] of [[1320, 1], [771, 2], [358, 4]] as const) {
      const { sides } = layWeighUp({ width, weighUp: weighUpOf(4) })
      expect(sides).toHaveLength(rows)
      for (const { names } of sides) expect(names.map(one => `${one.name}, ${one.criterion}`)).toEqual(['One kind of site, χ² 30.2', 'Two kinds of site, χ² 236.2', 'Limited store, χ² 442.2', 'Declining drive, χ² 648.2', 'Two steps, χ² 854.2'])
    }
    // Two rows of two with six explanations fit the height of a printed page: 174 mm are 771 px.
    expect(layWeighUp({ width: 771, weighUp: weighUpOf(4, 6) }).height * 174 / 771).toBeLessThan(240)
  })
})

describe('the axes of a weigh-up', () => {
  it('has room for five decades, for one interval and for none', () => {
    const at = (timesS: number[]) => intervalAxis([{ ...conditionsOf(1)[0]!, points: timesS.map(timeS => ({ timeS, ratio: 0.5, error: null, sd: null, n: null })) }], 40, 200)
    for (const timesS of [[0.001, 100], [7], [0], [0.05, 0.06]]) {
      const axis = at(timesS), named = axis.ticks.filter(tick => tick.text !== null).map(tick => axis.place(tick.at))
      expect(named.length).toBeGreaterThanOrEqual(2)
      for (let i = 1; i < named.length; i++) expect(named[i]! - named[i - 1]!).toBeGreaterThan(20)
      const placed = timesS.filter(one => one > 0).map(axis.place)
      expect(placed.filter(x => x > 40 && x < 200)).toEqual(placed)
    }
    expect(at([0.05, 51.2]).ticks.flatMap(tick => tick.text ?? [])).toEqual(['0.1', '1', '10'])
  })
  it('holds ratios below 0 and above 1 with their errors', () => {
    const conditions = [{ ...conditionsOf(1)[0]!, points: [{ timeS: 1, ratio: -0.1, error: 0.2, sd: null, n: null }, { timeS: 2, ratio: 1.4, error: 0.3, sd: null, n: null }] }]
    const axis = ratioAxis(conditions, [], 0, 200)
    expect(axis.from).toBeLessThan(-0.3)
    expect(axis.to).toBeGreaterThan(1.7)
    expect(ratioAxis(conditionsOf(1, null), [], 0, 200)).toMatchObject({ from: 0, to: 1.05 })
  })
})

describe('the words and numbers of a weigh-up figure', () => {
  it('names each explanation with its χ²', () => {
    const sentence = weighSentence(weighUpOf(2, 3))
    for (const part of ['2 conditions (condition 1, condition 2)', '3 explanations', 'one kind of site, χ² 30.2, 14 of 14 points', 'two kinds of site, χ² 236.2, 6 of 14 points', 'a limited store, χ² 442.2, 0 of 14 points', '2 points at interval 0 stand in the table only']) expect(sentence).toContain(part)
    expect(nameInFigure('a declining drive')).toBe('Declining drive')
  })
  it('has every point in the table and in the CSV, the interval of 0 too', () => {
    const weighUp = weighUpOf(2, 3), table = weighTable(weighUp, false), lines = weighCsv(weighUp).trimEnd().split('\r\n')
    expect(table.rows).toHaveLength(14)
    expect(table.rows[0]).toEqual(['condition 1', '0', '0.150', '0.012', '9', '0.50', '2.5', '4.5'])
    expect(weighTable(weighUp, true).rows[0]!.slice(5)).toEqual(['0.0060', '0.030', '0.054'])
    expect(lines).toHaveLength(1 + 2 * (times.length + gridS.length))
    expect(new Set(lines.map(one => one.split(',').length))).toEqual(new Set([15]))
    // 0.15 measured, 2.5 standard errors of 0.012 above the fit: 0.12 fitted.
    expect(Number(lines[1]!.split(',')[11])).toBeCloseTo(0.12, 9)
  })
})
