/** Dependencies go one way: shared ← workers ← server and app, which never meet. */
import { describe, expect, it } from 'vitest'
import { filesIn, importsOf, packageOf, targetOf, textOf, withoutComments } from './support/sources'

const CODE = ['.ts', '.vue', '.mjs']
const filesOf = (room: string) => filesIn(room, CODE).filter(path => !path.startsWith('workers/kernel/assembly/'))

/** Rooms that each room may import from. */
const MAY_IMPORT: Record<string, string[]> = {
  shared: ['shared'],
  workers: ['workers', 'shared'],
  server: ['server', 'shared', 'workers'],
  app: ['app', 'shared', 'workers'],
}
const PURE_PACKAGES = ['zod', 'seedrandom', '@noble/hashes', 'canonicalize', 'papaparse']

function strayImports(room: string, allowed: (specifier: string, target: string | null, path: string) => boolean): string[] {
  return filesOf(room).flatMap(path => importsOf(path).filter(specifier => !allowed(specifier, targetOf(path, specifier), path)).map(specifier => `${path} imports ${specifier}`))
}

describe('rooms', () => {
  it.each(Object.entries(MAY_IMPORT))('%s imports only from %j', (room, from) => {
    expect(filesOf(room).length).toBeGreaterThan(0)
    expect(strayImports(room, (_, target) => target === null || from.includes(target.split('/')[0]!))).toEqual([])
  })

  it('shared uses small pure packages only', () => {
    expect(strayImports('shared', (specifier, target) => target !== null || PURE_PACKAGES.includes(packageOf(specifier)))).toEqual([])
  })

  it('shared names nothing of a browser or of Node', () => {
    const alien = /\b(window|document|navigator|localStorage|process|Buffer|require|__dirname|indexedDB)\b(?=\s*[.[(])/
    expect(filesOf('shared').filter(path => alien.test(withoutComments(textOf(path)).replace(/'[^'\n]*'|`[^`]*`/g, '\'\'')))).toEqual([])
  })

  it('app and the workers that browsers load use nothing of Node', () => {
    const ofNode = (specifier: string) => specifier.startsWith('node:')
    expect(strayImports('app', specifier => !ofNode(specifier))).toEqual([])
    expect(strayImports('workers', (specifier, _, path) => !ofNode(specifier) || /(^|\/)(node[^/]*\.ts|build\.mjs)$/.test(path))).toEqual([])
  })

  it('code that a plain loader runs imports by relative paths', () => {
    const relativeOnly = (specifier: string) => !/^(#|~|@\/)/.test(specifier)
    for (const room of ['shared', 'workers', 'scripts']) expect(strayImports(room, relativeOnly)).toEqual([])
  })
})

describe('inside the server', () => {
  it('handlers name no table and no driver', () => {
    const handlers = [...filesOf('server/api'), ...filesOf('server/routes')]
    const stray = handlers.flatMap(path => importsOf(path)
      .filter(specifier => targetOf(path, specifier)?.startsWith('server/db') || ['drizzle-orm', 'pg'].includes(packageOf(specifier)))
      .map(specifier => `${path} imports ${specifier}`))
    expect(stray).toEqual([])
  })
})

describe('inside the application', () => {
  it('base and field components know no domain word', () => {
    const domain = /\b(scenarios?|ribbons?|vesicles?|replicates?|benches|bench|outcomes?|runs?|recordings?|attachment|trainees?)\b/i
    // What a refusal says must name what was refused.
    const parts = [...filesOf('app/components/base'), ...filesOf('app/components/field')].filter(path => !path.endsWith('/BaseRefused.vue'))
    expect(parts.length).toBeGreaterThan(0)
    expect(parts.filter(path => domain.test(withoutComments(textOf(path)))).map(path => `${path}: ${domain.exec(withoutComments(textOf(path)))![0]}`)).toEqual([])
  })

  it('only composables speak to the crew of workers', () => {
    const stray = filesOf('app').filter(path => !path.startsWith('app/composables/'))
      .filter(path => importsOf(path).some(specifier => /^workers\/(crew|browser|walk\.worker)/.test(targetOf(path, specifier) ?? '')))
    expect(stray).toEqual([])
  })
})
