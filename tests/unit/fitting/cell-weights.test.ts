/** Fits with the cell as a random effect: the covariance of the cells behind the means. */
import { describe, expect, it } from 'vitest'
import { bootstrapOneAgainstTwo } from '../../../shared/fitting/bootstrap'
import { normalDeviates } from '../../../shared/fitting/deviates'
import { fitCondition, searchConditions, type RecoveryFit } from '../../../shared/fitting/fit'
import { recoveryAt } from '../../../shared/fitting/recovery-model'
import { meansOfCells } from '../../../shared/recordings/conditions'
import type { CellPoint, ConditionData } from '../../../shared/recordings/types'
import type { Stream } from '../../../shared/walk/streams'
import { CONTROL } from '../../reference/recovery-data'
import { accepted, refusedOf, streamOf, TIMES_S } from './support'

const COUNT = 9
/** Nine cells: log-normal rates with CV 8 per cent, depletion with SD 0.02, each point with SD 0.03; the demo's truth. */
function drawCells(stream: Stream, share = 0.6): ConditionData {
  const own = new Float64Array(2 * COUNT), noise = new Float64Array(TIMES_S.length)
  normalDeviates(stream, own)
  const cells = Array.from({ length: COUNT }, (_, c) => {
    normalDeviates(stream, noise)
    const slower = -0.08 * own[2 * c]!, at = [1, 0.88 + 0.02 * own[2 * c + 1]!, share, Math.log(0.83) + slower, Math.log(20) + slower]
    return TIMES_S.map((time, i): CellPoint => ({ cell: `C${c}`, intervalMs: time * 1000, ratio: recoveryAt(at, time) + 0.03 * noise[i]!, first: null, aside: null, line: null }))
  }).flat()
  return { condition: 'control', protocol: 'step', manipulation: 'none', points: meansOfCells(cells), cells }
}
const holds = (fit: RecoveryFit, name: string, truth: number): boolean => fit.parameters.some(one => one.name === name && (one.low ?? -Infinity) <= truth && truth <= (one.high ?? Infinity))

describe('weights by cells', () => {
  it('tell the spread between cells (seeded, mean of 150 sets)', () => {
    const stream = streamOf('spread'), found = Array.from({ length: 150 }, () => accepted(fitCondition(drawCells(stream), { model: 'two', weights: 'cells' })).betweenCells!)
    const mean = (of: (one: typeof found[number]) => number) => found.reduce((sum, one) => sum + of(one), 0) / found.length
    expect(Math.abs(mean(one => one.sigma) / 0.03 - 1)).toBeLessThan(0.03)
    expect(Math.abs(mean(one => one.kappa ** 2) / 0.08 ** 2 - 1)).toBeLessThan(0.25)
    expect(Math.abs(mean(one => one.delta ** 2) / 0.02 ** 2 - 1)).toBeLessThan(0.25)
    expect(found[0]!.dof).toBe(8)
  })
  it('hold the depletion in 95 of 100 intervals, where independent points hold it less often (seeded, 250 sets; 4 standard errors are 5.5 per cent)', () => {
    const stream = streamOf('depletion')
    let byCells = 0, shares = 0, byPoints = 0
    for (let i = 0; i < 250; i++) {
      const condition = drawCells(stream), cells = accepted(fitCondition(condition, { model: 'two', weights: 'cells' })), points = accepted(fitCondition(condition, { model: 'two', weights: 'pooled' }))
      byCells += holds(cells, 'depletion', 0.88) ? 1 : 0
      shares += holds(cells, 'fastShare', 0.6) ? 1 : 0
      byPoints += holds(points, 'depletion', 0.88) ? 1 : 0
    }
    for (const held of [byCells, shares]) {
      expect(held / 250).toBeGreaterThan(0.90)
      expect(held / 250).toBeLessThanOrEqual(1)
    }
    expect(byPoints).toBeLessThan(byCells)
  })
  it('draw sets for the bootstrap with the same covariance: its statistic has the law that independent errors give', () => {
    const condition = drawCells(streamOf('one'), 1), options = { weights: 'cells' } as const
    const one = accepted(searchConditions([condition], { ...options, model: 'one' })), two = accepted(searchConditions([condition], { ...options, model: 'two' }))
    expect(one.design.curves[0]!.whitening).not.toBeNull()
    const found = bootstrapOneAgainstTwo(one, two, { resamples: 999 })!
    // Under one exponential the 95 per cent point lies between 3.3 and 5.1 for independent errors; wrongly correlated draws leave that range at once.
    expect(found.critical95).toBeGreaterThan(2.5)
    expect(found.critical95).toBeLessThan(6)
  })
  it('are refused without cells, with too few of them, or too few intervals', () => {
    expect(refusedOf(fitCondition(CONTROL, { model: 'one', weights: 'cells' }))).toBe('no-cells')
    const condition = drawCells(streamOf('few')), few = (keep: (point: CellPoint) => boolean) => {
      const cells = condition.cells.filter(keep)
      return refusedOf(fitCondition({ ...condition, cells, points: meansOfCells(cells) }, { model: 'one', weights: 'cells' }))
    }
    expect(few(point => point.cell === 'C0')).toBe('few-cells')
    expect(few(point => point.intervalMs < 500)).toBe('too-few-points')
  })
})
