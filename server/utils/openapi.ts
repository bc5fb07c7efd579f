/** OpenAPI 3.1 and JSON Schemas, made from the table of routes and the Zod schemas; nothing is written twice. */
import { z } from 'zod'
import { ROLES } from '../../shared/permissions'
import { OutcomeSchema } from '../../shared/schemas/outcome'
import { PROBLEM_STATUS } from '../../shared/schemas/problem'
import { ScenarioSchema } from '../../shared/schemas/scenario'
import { ROUTES, type RouteRow } from './routes'

/** What a person or a file may give: defaults are optional. Rules that join fields cannot be said in JSON Schema; the server judges them. */
const jsonSchema = (schema: z.ZodType): Record<string, unknown> => z.toJSONSchema(schema, { io: 'input', unrepresentable: 'any' })

let schemas: { scenario: Record<string, unknown>, outcome: Record<string, unknown> } | undefined
export function documentSchemas() {
  return schemas ??= {
    scenario: { ...jsonSchema(ScenarioSchema), title: 'moorage-scenario, version 1' },
    outcome: { ...jsonSchema(OutcomeSchema), title: 'moorage-outcome, version 1' },
  }
}

const withoutDialect = ({ $schema: _dialect, ...schema }: Record<string, unknown>) => schema
const header = (name: string, description: string) => ({ name, in: 'header', required: true, schema: { type: 'string' }, description })

function parametersOf(route: RouteRow) {
  const inPath = [...route.path.matchAll(/:(\w+)/g)].map(([, name]) => ({ name, in: 'path', required: true, schema: { type: 'string' } }))
  const { properties = {} } = (route.query ? jsonSchema(route.query) : {}) as { properties?: Record<string, unknown> }
  return [
    ...inPath,
    ...Object.entries(properties).map(([name, schema]) => ({ name, in: 'query', required: false, schema })),
    ...(route.ifMatch ? [header('If-Match', 'The revision that the edit was made from, in quotes: "4".')] : []),
    ...(route.idempotent ? [header('Idempotency-Key', 'The client\'s own name of this attempt: a retry finds the first.')] : []),
    ...(route.method === 'GET' ? [] : [header('Origin', 'The origin of the page or program, equal to this host; browsers send it by themselves.')]),
  ]
}

/** Answers that carry a document point to its schema; the others are named. */
const answerSchema = (answer: string) =>
  answer === 'JSONSchema' || answer === 'OpenAPI' ? { type: 'object' } : { title: answer, ...(answer.endsWith('[]') ? { type: 'array' } : { type: 'object' }) }

function operationOf(route: RouteRow) {
  return {
    'summary': route.summary,
    'operationId': `${route.method.toLowerCase()}${route.path.replace('/api', '').replace(/[^A-Za-z]+(\w)/g, (_, letter: string) => letter.toUpperCase())}`,
    'x-moorage-access': route.access,
    ...(route.access === 'public' ? { security: [] } : {}),
    'parameters': parametersOf(route),
    ...(route.body && { requestBody: { required: true, content: { 'application/json': { schema: withoutDialect(jsonSchema(route.body)) } } } }),
    'responses': {
      [route.status]: { description: route.answer ?? 'Done.', ...(route.answer && { content: { 'application/json': { schema: answerSchema(route.answer) } } }) },
      default: { $ref: '#/components/responses/Problem' },
    },
  }
}

let document: Record<string, unknown> | undefined
export function openApiDocument(): Record<string, unknown> {
  if (document) return document
  const paths: Record<string, Record<string, unknown>> = {}
  for (const route of ROUTES) (paths[route.path.replace(/:(\w+)/g, '{$1}')] ??= {})[route.method.toLowerCase()] = operationOf(route)
  document = {
    openapi: '3.1.0',
    info: { title: 'Moorage', version: '1', description: `Scenarios, runs and benches. Roles: ${ROLES.join(', ')}. Every refusal is RFC 9457 problem details.` },
    security: [{ session: [] }],
    paths,
    components: {
      securitySchemes: { session: { type: 'apiKey', in: 'cookie', name: 'moorage-session' } },
      schemas: {
        Scenario: withoutDialect(documentSchemas().scenario), Outcome: withoutDialect(documentSchemas().outcome),
        Problem: {
          type: 'object', required: ['type', 'title', 'status', 'detail', 'code'],
          properties: {
            type: { type: 'string' }, title: { type: 'string' }, status: { type: 'integer' }, detail: { type: 'string' },
            code: { enum: Object.keys(PROBLEM_STATUS) }, current: {}, retryAfterSeconds: { type: 'number' },
            errors: { type: 'array', items: { type: 'object', properties: { path: { type: 'string' }, message: { type: 'string' } } } },
          },
        },
      },
      responses: { Problem: { description: 'A refusal.', content: { 'application/problem+json': { schema: { $ref: '#/components/schemas/Problem' } } } } },
    },
  }
  return document
}
