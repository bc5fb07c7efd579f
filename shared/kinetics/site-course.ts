/** One site over the schedule of a scenario: initial fill, releases, decline, detachment, readiness; continuous time. */
import { declineFactor, declineIntegral, type Decline } from './decline'
import { evolveSite, releaseSite, type SiteRates, type SiteState } from './site-states'

/** What happens to a site over time. */
export interface Course {
  /** Chance that it is filled (and ready) at the start [1]. */
  initialFill: number
  decline: Decline | null
  /** Later stimuli in order of time: when [s], and the chance that a ready site releases [1]. */
  releases: readonly { atS: number, fraction: number }[]
}

/** Longest sub-step under decline, in units of its time constant; see the error in the docstring below. */
const DECLINE_SUBSTEP = 1 / 64
/** Beyond this many time constants the decline is at rest to 2e-11. */
const DECLINE_SETTLED = 25

/** Forward from `from` to `to`, both counted from the last release. Under decline the rate takes its own mean over each sub-step, what it settles to a straight line. */
function evolve(state: SiteState, rates: SiteRates, decline: Decline | null, from: number, to: number): SiteState {
  if (!decline) return to > from ? evolveSite(state, rates, to - from) : state
  const coarse = rates.detachPerS === 0 && rates.readyPerS === null // then only ∫g matters and one step is exact
  const settledAt = (t: number) => {
    const attach = rates.attachPerS * declineFactor(decline, t)
    return attach > 0 ? attach / (attach + rates.detachPerS) : rates.detachPerS > 0 ? 0 : 1
  }
  let now = from, current = state
  while (now < to) {
    const rest = now >= DECLINE_SETTLED * decline.timeConstantS
    const next = coarse || rest ? to : Math.min(to, now + decline.timeConstantS * DECLINE_SUBSTEP)
    const mean = (declineIntegral(decline, next) - declineIntegral(decline, now)) / (next - now)
    current = evolveSite(current, { ...rates, attachPerS: rates.attachPerS * mean }, next - now, [settledAt(now), settledAt(next)])
    now = next
  }
  return current
}

/**
 * State of one site at ascending times; a time that equals a release (to 1e-9 of itself) reads the state just before it.
 * Exact, except where decline meets detachment or readiness: there sub-steps of τc/64 leave an error below 2e-5 (measured against a fine Runge–Kutta integration, stiff cases included).
 * @param rates - attachment at rest, detachment, readiness [1/s]
 * @param course - initial fill, releases, decline
 * @param timesS - ascending times from 0 [s]
 * @returns one state per time [1]
 */
export function statesOfSite(rates: SiteRates, course: Course, timesS: readonly number[]): SiteState[] {
  let state: SiteState = { filled: course.initialFill, ready: course.initialFill }
  let lastRelease = 0, now = 0, next = 0
  const forward = (to: number) => {
    state = evolve(state, rates, course.decline, now - lastRelease, to - lastRelease)
    now = to
  }
  return timesS.map((time) => {
    for (; next < course.releases.length && course.releases[next]!.atS * (1 + 1e-9) < time; next++) {
      const release = course.releases[next]!
      forward(release.atS)
      state = releaseSite(state, release.fraction)
      lastRelease = now
    }
    if (time > now) forward(time)
    return state
  })
}
