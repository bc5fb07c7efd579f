/**
 * Every route of the API: who may come, what it takes and gives. The OpenAPI document, the Allow header and the permission test
 * are made from this table; a handler without a row, or with another access than its row says, fails the tests.
 */
import type { z } from 'zod'
import { FitSettingsSchema } from '../../shared/fitting/kept-fit'
import type { Action } from '../../shared/permissions'
import { MemberEditSchema, BenchEditSchema } from '../../shared/schemas/api/bench'
import { RegisterSchema, SignInSchema } from '../../shared/schemas/api/account'
import { MappingQuerySchema, PointsAsideSchema, RecordingCreateSchema, RecordingEditSchema, RecordingListSchema, UploadQuerySchema } from '../../shared/schemas/api/recording'
import { RunListSchema, RunSaveSchema } from '../../shared/schemas/api/run'
import { WeighAgainSchema, WeighUpCreateSchema, WeighUpListSchema } from '../../shared/schemas/api/weigh-up'
import { ScenarioCreateSchema, ScenarioDuplicateSchema, ScenarioEditSchema, ScenarioListSchema, ScenarioTagsSchema } from '../../shared/schemas/api/scenario'

export type RouteMethod = 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE'
export interface RouteRow {
  method: RouteMethod
  /** Parameters as `:name`. */
  path: string
  access: 'public' | 'signed-in' | Action
  summary: string
  /** Status of a success. */
  status: 200 | 201 | 204
  /** Name of the shape that is answered; none with 204. */
  answer?: string
  body?: z.ZodType
  query?: z.ZodType
  /** Wants If-Match with the revision. */
  ifMatch?: true
  /** Wants Idempotency-Key. */
  idempotent?: true
}

const row = (method: RouteMethod, path: string, access: RouteRow['access'], summary: string, rest: Partial<RouteRow> = {}): RouteRow =>
  ({ method, path, access, summary, status: 200, ...rest })

const BENCH = '/api/benches/:benchId'
const SCENARIO = '/api/scenarios/:scenarioId'
const RUN = '/api/runs/:runId'
const RECORDING = '/api/recordings/:recordingId'
const WEIGH_UP = '/api/weigh-ups/:weighUpId'

export const ROUTES: RouteRow[] = [
  row('GET', '/api/health', 'public', 'Ready only when the database answers.', { answer: 'Health' }),
  row('GET', '/api/openapi.json', 'public', 'This description of the interface, OpenAPI 3.1.', { answer: 'OpenAPI' }),
  row('GET', '/api/schemas/:name', 'public', 'JSON Schema of a document: scenario or outcome.', { answer: 'JSONSchema' }),

  row('POST', '/api/account/register', 'public', 'Makes an account and signs in.', { status: 201, body: RegisterSchema, answer: 'Me' }),
  row('POST', '/api/account/sign-in', 'public', 'Signs in.', { body: SignInSchema, answer: 'Me' }),
  row('POST', '/api/account/sign-out', 'signed-in', 'Ends this session.', { status: 204 }),
  row('GET', '/api/account/me', 'signed-in', 'The account and its benches.', { answer: 'Me' }),
  row('GET', '/api/account/sessions', 'signed-in', 'Where the account is signed in.', { answer: 'SessionRow[]' }),
  row('DELETE', '/api/account/sessions', 'signed-in', 'Signs out everywhere.', { status: 204 }),

  row('POST', '/api/benches', 'signed-in', 'Makes a bench; its maker becomes its lead.', { status: 201, body: BenchEditSchema, answer: 'Bench' }),
  row('GET', BENCH, 'bench.read', 'A bench.', { answer: 'Bench' }),
  row('PATCH', BENCH, 'bench.settings', 'Renames a bench.', { body: BenchEditSchema, answer: 'Bench' }),
  row('GET', `${BENCH}/home`, 'bench.read', 'What stands where on a bench, newest first.', { answer: 'BenchHome' }),
  row('GET', `${BENCH}/members`, 'member.list', 'Who belongs to a bench.', { answer: 'Member[]' }),
  row('PATCH', `${BENCH}/members/:userId`, 'member.manage', 'Gives a member another role; the last lead stays.', { body: MemberEditSchema, answer: 'Member' }),
  row('DELETE', `${BENCH}/members/:userId`, 'member.manage', 'Removes a member; the last lead stays.', { status: 204 }),
  row('GET', `${BENCH}/scenarios`, 'scenario.read', 'Scenarios of a bench.', { query: ScenarioListSchema, answer: 'Page<ScenarioRow>' }),
  row('POST', `${BENCH}/scenarios`, 'scenario.create', 'Makes a scenario from a document; import is the same call.', { status: 201, body: ScenarioCreateSchema, answer: 'ScenarioDetail' }),
  row('GET', `${BENCH}/runs`, 'run.read', 'Runs of a bench, newest first.', { query: RunListSchema, answer: 'Page<RunRow>' }),

  row('POST', `${BENCH}/uploads`, 'recording.create', 'Keeps a file byte for byte, sent as application/octet-stream; the same bytes under one name are kept once.', { status: 201, query: UploadQuerySchema, answer: 'Upload' }),
  row('GET', `${BENCH}/recordings`, 'recording.read', 'Recordings of a bench, last change first.', { query: RecordingListSchema, answer: 'Page<RecordingRow>' }),
  row('POST', `${BENCH}/recordings`, 'recording.create', 'Makes recordings from a kept file; the server reads it by the choices given.', { status: 201, body: RecordingCreateSchema, answer: 'RecordingDetail[]' }),
  row('GET', `${BENCH}/weigh-ups`, 'weigh-up.read', 'Weigh-ups of a bench, last change first.', { query: WeighUpListSchema, answer: 'Page<WeighUpRow>' }),
  row('POST', `${BENCH}/weigh-ups`, 'weigh-up.create', 'Weighs explanations on recordings and keeps what was found.', { status: 201, body: WeighUpCreateSchema, answer: 'WeighUpDetail' }),
  row('GET', `${BENCH}/mappings`, 'recording.read', 'How a file of this shape was read last.', { query: MappingQuerySchema, answer: 'KeptMapping' }),

  row('GET', SCENARIO, 'scenario.read', 'A scenario with its newest document; its revision is the ETag.', { answer: 'ScenarioDetail' }),
  row('PUT', SCENARIO, 'scenario.edit', 'Saves an edit as a new revision; an unchanged document makes none.', { body: ScenarioEditSchema, ifMatch: true, answer: 'ScenarioDetail' }),
  row('PATCH', SCENARIO, 'scenario.edit', 'Sets the tags; makes no revision.', { body: ScenarioTagsSchema, answer: 'ScenarioDetail' }),
  row('DELETE', SCENARIO, 'scenario.delete', 'Puts a scenario into the bin.', { status: 204 }),
  row('POST', `${SCENARIO}/restore`, 'scenario.delete', 'Takes a scenario out of the bin.', { answer: 'ScenarioDetail' }),
  row('POST', `${SCENARIO}/duplicate`, 'scenario.create', 'Makes a new scenario from this one.', { status: 201, body: ScenarioDuplicateSchema, answer: 'ScenarioDetail' }),
  row('GET', `${SCENARIO}/revisions`, 'scenario.read', 'History, newest first.', { answer: 'RevisionRow[]' }),
  row('GET', `${SCENARIO}/revisions/:revision`, 'scenario.read', 'One saved state.', { answer: 'RevisionDetail' }),
  row('POST', `${SCENARIO}/revisions/:revision/restore`, 'scenario.edit', 'Makes an old revision the newest again.', { ifMatch: true, answer: 'ScenarioDetail' }),
  row('GET', `${SCENARIO}/runs`, 'run.read', 'Runs of a scenario, newest first.', { query: RunListSchema, answer: 'Page<RunRow>' }),
  row('POST', `${SCENARIO}/runs`, 'run.save', 'Saves a run; every figure is made again from its blocks.', { status: 201, body: RunSaveSchema, idempotent: true, answer: 'RunDetail' }),

  row('GET', RUN, 'run.read', 'A run with its outcome.', { answer: 'RunDetail' }),
  row('DELETE', RUN, 'run.delete', 'Puts a run into the bin.', { status: 204 }),
  row('POST', `${RUN}/restore`, 'run.delete', 'Takes a run out of the bin.', { answer: 'RunDetail' }),
  row('GET', RECORDING, 'recording.read', 'A recording with its points; its revision is the ETag.', { answer: 'RecordingDetail' }),
  row('PUT', RECORDING, 'recording.edit', 'Names, details, notes and tags.', { body: RecordingEditSchema, ifMatch: true, answer: 'RecordingDetail' }),
  row('PATCH', RECORDING, 'recording.edit', 'Sets points aside with a reason, or takes them back.', { body: PointsAsideSchema, ifMatch: true, answer: 'RecordingDetail' }),
  row('DELETE', RECORDING, 'recording.delete', 'Puts a recording into the bin.', { status: 204 }),
  row('POST', `${RECORDING}/restore`, 'recording.delete', 'Takes a recording out of the bin.', { answer: 'RecordingDetail' }),
  row('GET', `${RECORDING}/fits`, 'recording.read', 'Kept fits, newest first.', { answer: 'KeptFit[]' }),
  row('POST', `${RECORDING}/fits`, 'recording.edit', 'Fits one and two exponentials and keeps what was found.', { status: 201, body: FitSettingsSchema, answer: 'KeptFit' }),
  row('GET', `${RECORDING}/original`, 'recording.read', 'The file byte for byte as it came.', { answer: 'Binary' }),

  row('GET', WEIGH_UP, 'weigh-up.read', 'A weigh-up, its newest version.', { answer: 'WeighUpDetail' }),
  row('DELETE', WEIGH_UP, 'weigh-up.delete', 'Puts a weigh-up into the bin.', { status: 204 }),
  row('POST', `${WEIGH_UP}/restore`, 'weigh-up.delete', 'Takes a weigh-up out of the bin.', { answer: 'WeighUpDetail' }),
  row('POST', `${WEIGH_UP}/versions`, 'weigh-up.edit', 'Weighs again from the recordings as they stand now.', { status: 201, body: WeighAgainSchema, answer: 'WeighUpDetail' }),
  row('GET', `${WEIGH_UP}/versions/:revision`, 'weigh-up.read', 'One kept version.', { answer: 'WeighUpDetail' }),

  row('GET', `${RUN}/blocks`, 'run.read', 'The integers behind the outcome, block by block.', { answer: 'ReplicateBlock[]' }),
]

const patternOf = (path: string) => new RegExp(`^${path.replaceAll('.', '\\.').replace(/:\w+/g, '[^/]+')}/?$`)

/** Methods that an address takes, for 405 and its Allow header. */
export const methodsOf = (pathname: string): RouteMethod[] =>
  ROUTES.filter(one => patternOf(one.path).test(pathname)).map(one => one.method)
