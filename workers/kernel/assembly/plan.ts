/** The compiled plan as the host lays it out in memory: field order and types are those of workers/placing.ts (f64 fields first). */

/** A table of counts: this head, then guide u32[256], then thresholds u32[last + 1]. */
@unmanaged
export class CountTable {
  first: i32
  last: i32
}

@unmanaged
export class Plan {
  initialFill: f64
  /** Chance that an occupant whose class the walk does not tell is of class 0. */
  firstOccupant: f64
  declineRest: f64
  declinePerStep: f64
  occupancy: f64
  /** Share of class 0 among the resting vesicles, and among those that enter under exclusion. */
  firstShare: f64
  inflowFirst: f64
  attach00: f64
  attach01: f64
  attach10: f64
  attach11: f64
  detach0: f64
  detach1: f64
  /** -1 where a captured vesicle is ready at once. */
  ready0: f64
  ready1: f64
  mobility0: f64
  mobility1: f64
  stirred0: f64
  stirred1: f64

  /** 0 stirred, 1 held, 2 sealed. */
  supply: i32
  exclusive: i32
  siteCount: i32
  siteClasses: i32
  vesicleClasses: i32
  steps: i32
  samples: i32
  binSteps: i32
  bins: i32
  releases: i32
  declines: i32
  cellCount: i32
  freeCount: i32
  boundaryCount: i32
  number0: i32
  number1: i32
  nx: i32
  ny: i32
  nz: i32

  /** u8[cellCount]; mask, 0, then (face = 6 voxel + direction, site) pairs, -1 where empty; i32[siteCount]; u8[siteCount]. */
  flags: usize
  siteBehind: usize
  voxelOfSite: usize
  classOfSite: usize
  /** u32[samples], i32[releases], f64[releases]. */
  sampleSteps: usize
  releaseSteps: usize
  releaseFractions: usize
  /** i32[freeCount] padded indices; i32[boundaryCount] voxel behind each outer face. */
  freeVoxels: usize
  boundary: usize
  /** i32[6] steps of index per hop direction. */
  offsets: usize
  /** CountTables (0 where unused): Poisson start and inflow per vesicle class, gaps between entries under exclusion. */
  start0: usize
  start1: usize
  inflow0: usize
  inflow1: usize
  gap: usize
  /** Working memory: u8[siteCount] three times, u8[cellCount]. */
  siteState: usize
  occupant: usize
  attachedOnce: usize
  cells: usize

  @inline
  attach(siteClass: i32, vesicleClass: i32): f64 {
    return siteClass == 0 ? (vesicleClass == 0 ? this.attach00 : this.attach01) : (vesicleClass == 0 ? this.attach10 : this.attach11)
  }

  @inline
  detach(siteClass: i32): f64 {
    return siteClass == 0 ? this.detach0 : this.detach1
  }

  @inline
  ready(siteClass: i32): f64 {
    return siteClass == 0 ? this.ready0 : this.ready1
  }

  @inline
  stirred(siteClass: i32): f64 {
    return siteClass == 0 ? this.stirred0 : this.stirred1
  }

  @inline
  mobility(vesicleClass: i32): f64 {
    return vesicleClass == 0 ? this.mobility0 : this.mobility1
  }
}

/** Bytes of the head, checked by the host. */
export function planBytes(): i32 {
  return offsetof<Plan>()
}
