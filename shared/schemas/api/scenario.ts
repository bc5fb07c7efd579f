/** Bodies of scenarios and their revisions. */
import { z } from 'zod'
import { ScenarioSchema, type Scenario } from '../scenario'
import { neutraliseText } from '../text'

export const TagSchema = z.string().transform(neutraliseText).pipe(z.string().min(1).max(40))
/** POST /api/benches/:benchId/scenarios → ScenarioDetail (201). Import is the same call with a file's document. */
export const ScenarioCreateSchema = z.strictObject({
  document: ScenarioSchema, message: z.string().max(500).default(''), tags: z.array(TagSchema).max(20).default([]),
})
/** PUT /api/scenarios/:scenarioId, If-Match: "<revision>" → ScenarioDetail. An unchanged document makes no new revision. 412 carries who and when. */
export const ScenarioEditSchema = ScenarioCreateSchema
/** PATCH /api/scenarios/:scenarioId → ScenarioDetail: tags alone make no revision. */
export const ScenarioTagsSchema = z.strictObject({ tags: z.array(TagSchema).max(20) })
/** POST /api/scenarios/:scenarioId/duplicate → ScenarioDetail (201) */
export const ScenarioDuplicateSchema = z.strictObject({
  title: z.string().transform(neutraliseText).pipe(z.string().min(1, 'A scenario needs a title.').max(200, 'At most 200 characters.')).optional(),
})
/** GET /api/benches/:benchId/scenarios?search=&tag=&sort=updated|title|created&order=asc|desc&bin=0|1&cursor=&limit= → Page<ScenarioRow> */
export const ScenarioListSchema = z.strictObject({
  search: z.string().max(200).default(''), tag: z.string().max(40).default(''),
  sort: z.enum(['updated', 'title', 'created']).default('updated'), order: z.enum(['asc', 'desc']).default('desc'),
  bin: z.enum(['0', '1']).default('0'), cursor: z.string().max(500).default(''), limit: z.coerce.number().int().min(1).max(100).default(25),
})
export interface ScenarioRow {
  scenarioId: string, title: string, revision: number, tags: string[], createdBy: string, updatedBy: string, createdAt: string, updatedAt: string
  deletedAt: string | null, runs: number, mayEdit: boolean, mayDelete: boolean
}
/** GET /api/scenarios/:scenarioId (ETag "<revision>"), and every answer of a change */
export interface ScenarioDetail extends ScenarioRow {
  benchId: string
  document: Scenario
  digest: string
}
/** GET /api/scenarios/:scenarioId/revisions → RevisionRow[] (newest first) · GET …/revisions/:revision → RevisionDetail */
export interface RevisionRow { revision: number, author: string, savedAt: string, message: string, digest: string, runs: number[] }
export interface RevisionDetail extends RevisionRow { document: Scenario }
/** DELETE /api/scenarios/:scenarioId (bin) · POST /api/scenarios/:scenarioId/restore (from the bin) */
/** POST /api/scenarios/:scenarioId/revisions/:revision/restore, If-Match → ScenarioDetail: an old revision becomes the newest again */
/** `problem.current` of a 412 */
export interface StaleEdit { revision: number, author: string, savedAt: string }
