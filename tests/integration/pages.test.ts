// What the built server sends with a page, and the interface's own description.
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest'
import { ROUTES } from '../../server/utils/routes'
import { openWorld, type World } from '../support/bench'
import { Visitor } from '../support/visitor'

let world: World, visitor: Visitor
beforeAll(async () => {
  world = await openWorld(inject('cluster'))
  visitor = new Visitor(world.server.base)
})
afterAll(() => world?.end())

describe('a page', () => {
  it('comes with a policy whose nonce is new each time and stands on every script', async () => {
    const nonces = new Set<string>()
    for (let i = 0; i < 3; i += 1) {
      const { status, headers, body } = await visitor.get<string>('/')
      expect(status).toBe(200)
      const policy = headers.get('content-security-policy')!
      const nonce = /'nonce-([\w+/=-]+)'/.exec(policy)![1]!
      nonces.add(nonce)
      for (const part of ['default-src \'self\'', 'base-uri \'none\'', 'object-src \'none\'', 'frame-ancestors \'none\'', 'script-src-attr \'none\'', 'connect-src \'self\'']) expect(policy).toContain(part)
      expect(policy).not.toMatch(/script-src[^;]*'unsafe-inline'|unsafe-eval'(?<!wasm-unsafe-eval')/)
      const scripts = body.match(/<script\b[^>]*>/g) ?? []
      expect(scripts.length).toBeGreaterThan(0)
      for (const script of scripts) expect(script).toContain(`nonce="${nonce}"`)
      expect(body).not.toMatch(/\son(click|load|error|submit|change|input)\s*=/i)
    }
    expect(nonces.size).toBe(3)
  })
  it('may not be framed, sniffed or traced', async () => {
    const { headers } = await visitor.get('/')
    expect(headers.get('x-content-type-options')).toBe('nosniff')
    expect(headers.get('referrer-policy')).toBe('no-referrer')
    expect(headers.get('cross-origin-opener-policy')).toBe('same-origin')
  })
  it('names no other host', async () => {
    const { body } = await visitor.get<string>('/')
    const hosts = [...body.matchAll(/(?:src|href|content)="(https?:)?\/\/([^/"]+)/g)].map(([, , host]) => host)
    expect(hosts).toEqual([])
  })
})

describe('the description of the interface', () => {
  it('has every route, with its body, headers and refusals', async () => {
    const { body } = await visitor.get<{ openapi: string, paths: Record<string, Record<string, { parameters: { name: string }[], requestBody?: unknown, responses: Record<string, unknown> }>> }>('/api/openapi.json')
    expect(body.openapi).toBe('3.1.0')
    for (const row of ROUTES) {
      const operation = body.paths[row.path.replace(/:(\w+)/g, '{$1}')]?.[row.method.toLowerCase()]
      expect(operation, `${row.method} ${row.path}`).toBeDefined()
      expect(Boolean(operation!.requestBody)).toBe(Boolean(row.body))
      expect(operation!.parameters.some(one => one.name === 'If-Match')).toBe(Boolean(row.ifMatch))
      expect(Object.keys(operation!.responses)).toEqual([String(row.status), 'default'])
    }
    const ids = Object.values(body.paths).flatMap(path => Object.values(path)).map(operation => (operation as unknown as { operationId: string }).operationId)
    expect(new Set(ids).size).toBe(ids.length)
  })
  it('serves the JSON Schema of a scenario, where defaults are optional', async () => {
    const { body, headers } = await visitor.get<{ required: string[], additionalProperties: boolean, properties: Record<string, unknown> }>('/api/schemas/scenario')
    expect(headers.get('content-type')).toContain('application/schema+json')
    expect(body.required).toContain('medium')
    expect(body.required).not.toContain('notes')
    expect(body.additionalProperties).toBe(false)
    expect((await visitor.get('/api/schemas/outcome')).status).toBe(200)
    expect((await visitor.get('/api/schemas/constructor')).status).toBe(404)
  })
})
