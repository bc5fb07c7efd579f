/** The sites of one replicate in the plain walk. */
import { firstOccupantChance } from '../../shared/walk/chances'
import type { Stream } from '../../shared/walk/streams'
import type { WalkPlan } from '../../shared/walk/types'
import type { BlockTally } from './tally'

export interface Site {
  siteClass: number
  state: 'empty' | 'captured' | 'ready'
  /** Class of the vesicle that it holds or held last. */
  occupant: number
  /** It was filled at the start or has attached before. */
  attachedOnce: boolean
}

export class Sites {
  readonly sites: Site[]
  /** Factor on every attachment probability in the current step. */
  factor = 1
  private power = 1
  private nextSample = 0
  private nextRelease = 0
  private readonly detaches: boolean

  constructor(private readonly plan: WalkPlan, private readonly stream: Stream, private readonly tally: BlockTally, private readonly replicate: number) {
    this.detaches = plan.detachPerStep.some(chance => chance > 0)
    this.sites = Array.from(plan.classOfSite, siteClass => ({ siteClass, state: 'empty', occupant: 0, attachedOnce: false }))
    for (const site of this.sites) {
      if (!stream.chance(plan.initialFill)) continue
      Object.assign(site, { state: 'ready', occupant: this.drawOccupant(), attachedOnce: true })
    }
  }

  /** Class of an occupant that the walk does not tell. */
  drawOccupant(): number {
    return this.plan.vesicles.length === 1 || this.stream.chance(firstOccupantChance(this.plan)) ? 0 : 1
  }

  attach(site: Site, vesicleClass: number, n: number): void {
    this.tally.attachment(site.siteClass, this.replicate, n, !site.attachedOnce)
    Object.assign(site, { state: this.plan.readyPerStep[site.siteClass] === null ? 'ready' : 'captured', occupant: vesicleClass, attachedOnce: true })
  }

  /** Sites per class that fulfil a condition. */
  private count(condition: (site: Site) => boolean): number[] {
    const counts = this.plan.sitesPerClass.map(() => 0)
    for (const site of this.sites) if (condition(site)) counts[site.siteClass]!++
    return counts
  }

  private takeSample(): void {
    this.tally.sample(this.nextSample++, this.count(site => site.state !== 'empty'), this.count(site => site.state === 'ready'))
  }

  sampleAt(n: number): void {
    if (this.plan.sampleSteps[this.nextSample] === n) this.takeSample()
  }

  sampleRest(): void {
    while (this.nextSample < this.plan.sampleSteps.length) this.takeSample()
  }

  private release(n: number): void {
    for (; this.plan.releases[this.nextRelease]?.step === n; this.nextRelease++) {
      const { fraction } = this.plan.releases[this.nextRelease]!
      for (const site of this.sites) if (site.state === 'ready' && this.stream.chance(fraction)) site.state = 'empty'
      this.power = 1
    }
  }

  private detach(letGo: (site: number, occupant: number) => void, blocked: (site: number) => boolean): void {
    this.sites.forEach((site, i) => {
      const chance = this.plan.detachPerStep[site.siteClass]!
      if (site.state === 'empty' || chance <= 0 || blocked(i) || !this.stream.chance(chance)) return
      site.state = 'empty'
      letGo(i, site.occupant)
    })
  }

  private ripen(): void {
    for (const site of this.sites)
      if (site.state === 'captured' && this.stream.chance(this.plan.readyPerStep[site.siteClass]!)) site.state = 'ready'
  }

  /** Everything at index n before the moves; false when nothing can change any more. */
  beginStep(n: number, letGo: (site: number, occupant: number) => void, blocked: (site: number) => boolean): boolean {
    this.release(n)
    this.detach(letGo, blocked)
    this.ripen()
    const settled = this.sites.every(site => site.state === 'ready') && this.nextRelease === this.plan.releases.length && !this.detaches
    if (settled) return false
    const { decline } = this.plan
    this.factor = decline ? decline.restFactor + (1 - decline.restFactor) * this.power : 1
    this.power *= decline?.perStep ?? 1
    this.count(site => site.state === 'empty').forEach((empty, siteClass) => this.tally.exposure(siteClass, this.replicate, empty, this.factor))
    return true
  }
}
