/** The closed form of refill at stirred supply: τ = 1/(D·ρ·a·s) per kind of site, and the share-weighted mean. */
import { stepSeconds, type Scenario } from '../schemas/scenario'
import { attachRates, hitRates, siteTotal } from './rates'
import { realisedCounts } from './realised-counts'
import { statesOfSite, type Course } from './site-course'

export { attachRates, hitRates, siteTotal } from './rates'

export interface ClosedFormClass {
  name: string
  /** Realised sites of one ribbon [1]. */
  sites: number
  /** Attachment rate of an empty site of this kind at rest [1/s]. */
  ratePerS: number
  /** 1/rate; null under decline or when the rate is 0 [s]. */
  tauS: number | null
}
export interface ClosedForm {
  /** Hits on one empty site, per kind of vesicle [1/s]. */
  hitsPerS: number[]
  classes: ClosedFormClass[]
  /** Share-weighted mean over the kinds of site; null when one of them has none [s]. */
  tauS: number | null
}

/**
 * The closed form of a scenario: well mixed, never short of vesicles. A real walk is slower where sites or returns deplete the neighbourhood.
 * A kind of site that its share rounds away (0 sites) is listed and has no part in the mean.
 * @param scenario - with defaults filled in
 * @returns hits [1/s], per kind of site its count [1], rate [1/s] and τ [s], and the share-weighted τ [s]
 */
export function closedForm(scenario: Scenario): ClosedForm {
  const total = siteTotal(scenario.ribbon)
  const counts = realisedCounts(scenario.sites.map(site => site.share), total)
  const rates = attachRates(scenario)
  const declines = scenario.schedule.decline !== null
  const classes = scenario.sites.map((site, j) => {
    const ratePerS = rates[j]!
    return { name: site.name, sites: counts[j]!, ratePerS, tauS: declines || !(ratePerS > 0) ? null : 1 / ratePerS }
  })
  const present = classes.filter(one => one.sites > 0)
  const tauS = present.some(one => one.tauS === null)
    ? null
    : present.reduce((sum, one) => sum + one.tauS! * one.sites, 0) / total
  return { hitsPerS: hitRates(scenario), classes, tauS }
}

export interface FilledCurve {
  /** Mean filled sites of one ribbon, [site class][time] [1]. */
  filled: number[][]
  /** The same for ready sites; null where every captured vesicle is ready at once [1]. */
  ready: number[][] | null
}

/** Releases come at the nearest step, as in the walk. */
function courseOf({ medium, schedule }: Scenario): Course {
  const stepS = stepSeconds(medium)
  const releases = schedule.releases.map(({ atMs, fraction }) => ({ atS: Math.round(atMs / 1000 / stepS) * stepS, fraction }))
  return { initialFill: schedule.initialFill, decline: schedule.decline, releases }
}

/**
 * Expected filled (and ready) sites of one ribbon under the closed form's assumption, with initial fill, later releases, detachment, the two-step readiness and decline.
 * Sites filled at the start are ready. A release comes at the nearest step, empties ready sites only and restarts the decline.
 * Exact, except where decline meets detachment or readiness (error stated at `statesOfSite`).
 * @param scenario - with defaults filled in
 * @param timesS - ascending times from 0 [s]
 * @returns mean filled and ready sites, [site class][time] [1]
 * @throws RangeError on times that are negative or do not ascend
 */
export function closedFormFilled(scenario: Scenario, timesS: readonly number[]): FilledCurve {
  timesS.forEach((time, i) => {
    if (!(time >= 0 && time < Infinity) || (i > 0 && time < timesS[i - 1]!)) throw new RangeError('closedFormFilled: times must ascend from 0')
  })
  const course = courseOf(scenario)
  const states = closedForm(scenario).classes.map((one, j) => {
    const { detachPerS, readyPerS } = scenario.sites[j]!
    const rates = { attachPerS: one.ratePerS, detachPerS, readyPerS }
    return statesOfSite(rates, course, timesS).map(state => ({ filled: one.sites * state.filled, ready: one.sites * state.ready }))
  })
  return {
    filled: states.map(row => row.map(state => state.filled)),
    ready: scenario.sites.some(site => site.readyPerS !== null) ? states.map(row => row.map(state => state.ready)) : null,
  }
}
