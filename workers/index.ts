/** What the page may use of this room. Node has `node.ts` instead. */
export { browserWorker } from './browser'
export { createCrew, crewSize, type CrewOptions } from './crew'
export type { Crew, RunOrder, RunProgress, RunResult } from './protocol'
