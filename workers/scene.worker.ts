/** The worker behind the terminal's pictures: one walk at a time, stepped when the page asks. */
import { expose, transfer } from 'comlink'
import type { Scenario } from '../shared/schemas/scenario'
import { densitySection, placeOf, SceneWalk, scenePlan, type DensitySection, type SceneFrame, type ScenePlace } from './scene'

let walk: SceneWalk | undefined
const offices = {
  open(scenario: Scenario, seed: string): ScenePlace {
    walk = new SceneWalk(scenePlan(scenario), seed)
    return placeOf(scenario, walk.plan)
  },
  advance(steps: number): SceneFrame {
    if (!walk) throw new Error('No walk is open.')
    const frame = walk.advance(steps)
    return transfer(frame, [frame.vesicles.buffer])
  },
  section(scenario: Scenario, timeS: number): DensitySection {
    return densitySection(scenePlan(scenario), timeS)
  },
}
export type SceneOffices = typeof offices
expose(offices)
