/** Two kinds of vesicle against two kinds of site: curves, slopes and noise that tell them apart, and stores that run down. */

/** One kind of vesicle at a site: D [µm²/s], ρ [1/µm³], attachment [1]. */
export interface MixedVesicle { diffusionUm2PerS: number, densityPerUm3: number, attachProbability: number }

/**
 * Refill rate with mixed vesicles at stirred supply: one exponential with k = a·Σ Dᵢρᵢsᵢ.
 * @param spacingUm - a [µm]
 * @param vesicles - the kinds
 * @returns k [1/s]
 */
export function mixedRate(spacingUm: number, vesicles: readonly MixedVesicle[]): number {
  return spacingUm * vesicles.reduce((sum, one) => sum + one.diffusionUm2PerS * one.densityPerUm3 * one.attachProbability, 0)
}

/** One kind of site: its share [1] and time constant [s]. */
export interface SiteKind { share: number, tauS: number }

/**
 * Filled fraction with two or more kinds of site, 1 − Σ Aᵢ·e^(−t/τᵢ): the time constants are the sites' own, the amplitudes their shares.
 * @param kinds - kinds of site
 * @param timeS - t [s]
 * @returns fraction [1]
 */
export function mixedSitesFilled(kinds: readonly SiteKind[], timeS: number): number {
  return kinds.reduce((sum, kind) => sum - kind.share * Math.expm1(-timeS / kind.tauS), 0)
}

/**
 * Initial slope Σ Aᵢ/τᵢ, mean time constant Σ Aᵢτᵢ, and the time at which half is filled (bisection).
 * @param kinds - kinds of site
 * @returns slope [1/s], mean [s], half time [s]
 */
export function mixedSitesSummary(kinds: readonly SiteKind[]): { slopePerS: number, meanTauS: number, halfTimeS: number } {
  let low = 0, high = 64 * Math.max(...kinds.map(kind => kind.tauS))
  for (let i = 0; i < 200; i++) {
    const middle = (low + high) / 2
    if (mixedSitesFilled(kinds, middle) < 0.5) low = middle
    else high = middle
  }
  return {
    slopePerS: kinds.reduce((sum, kind) => sum + kind.share / kind.tauS, 0),
    meanTauS: kinds.reduce((sum, kind) => sum + kind.share * kind.tauS, 0),
    halfTimeS: (low + high) / 2,
  }
}

/**
 * Filled sites with one kind of vesicle and a finite store, n = SM(1 − E)/(M − SE), E = e^(−k(1 − S/M)t); S·kt/(1 + kt) where M = S.
 * @param sites - S [1]
 * @param store - M, vesicles at the start [1]
 * @param ratePerS - k at the start [1/s]
 * @param timeS - t [s]
 * @returns filled sites [1]
 */
export function finiteStoreFilled(sites: number, store: number, ratePerS: number, timeS: number): number {
  const x = ratePerS * (1 - sites / store) * timeS
  if (Math.abs(x) < 1e-7) {
    const kt = ratePerS * timeS // first order around M = S
    return sites * kt * (1 - x / 2) / (1 + sites / store * kt * (1 - x / 2))
  }
  const gone = -Math.expm1(-x)
  return sites * store * gone / (store - sites + sites * gone)
}

/** One kind of vesicle of a finite store: how many [1] and the rate at which each attaches to each empty site [1/s]. */
export interface StoreKind { count: number, perSitePerS: number }

/**
 * Filled sites with several kinds of vesicle and a finite store. With u = ∫ (empty sites) dt the kinds are used up independently, Mᵢ(1 − e^(−κᵢu)); empty sites are v(u) = S − Σ used, and dt = du/v.
 * u(t) by fourth-order Runge–Kutta with 64 steps in the fastest time constant: error below 1e-9 of S.
 * @param sites - S [1]
 * @param kinds - the store
 * @param timeS - t [s]
 * @returns filled sites in all and vesicles used of each kind [1]
 */
export function mixedStoreFilled(sites: number, kinds: readonly StoreKind[], timeS: number): { filled: number, used: number[] } {
  const used = (u: number) => kinds.map(kind => -kind.count * Math.expm1(-kind.perSitePerS * u))
  const empty = (u: number) => sites - used(u).reduce((sum, one) => sum + one, 0)
  let state = 0
  // du/dt = v(u): fourth-order Runge–Kutta; v falls monotonically and its slope is bounded by Σ κᵢMᵢ, which sets the step.
  const fastest = kinds.reduce((sum, kind) => sum + kind.perSitePerS * kind.count, 0)
  const steps = Math.max(64, Math.ceil(timeS * fastest * 64)), h = timeS / steps
  for (let i = 0; i < steps; i++) {
    const k1 = empty(state), k2 = empty(state + h / 2 * k1), k3 = empty(state + h / 2 * k2), k4 = empty(state + h * k3)
    state += h / 6 * (k1 + 2 * k2 + 2 * k3 + k4)
  }
  const each = used(state)
  return { filled: each.reduce((sum, one) => sum + one, 0), used: each }
}
