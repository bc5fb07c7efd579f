/** The parts of the commands that judge: what counts as a failure, which Node will do, which address is open to others. */
import { afterEach, describe, expect, it, vi } from 'vitest'
import { versionAllowed } from '../../scripts/support/node-version.mjs'
import { duration } from '../../scripts/support/say.mjs'
import { countReport } from '../../scripts/support/suites.mjs'
import { isLoopback, listenAddress, serverEnvironment } from '../../scripts/support/web-server.mjs'

const file = (status: string, tests: string[]) => ({ name: 'a.test.ts', status, message: 'It broke.', assertionResults: tests.map(one => ({ status: one, fullName: one })) })

describe('counting of tests', () => {
  it('counts what passed', () => {
    expect(countReport({ testResults: [file('passed', ['passed', 'passed'])] })).toEqual({ passed: 2, failed: 0, complaints: [] })
  })

  it.each(['pending', 'skipped', 'todo', 'disabled'])('takes %s for a failure', (status) => {
    expect(countReport({ testResults: [file('passed', ['passed', status])] })).toMatchObject({ passed: 1, failed: 1 })
  })

  it('takes a file that cannot be loaded for a failure', () => {
    expect(countReport({ testResults: [file('failed', []), file('failed', ['passed'])] })).toMatchObject({ passed: 1, failed: 2 })
  })
})

describe('ranges of Node versions', () => {
  it.each([
    ['v20.20.2', '>=20.19.0 <21 || >=22.12.0', true], ['v21.0.0', '>=20.19.0 <21 || >=22.12.0', false], ['v22.12.0', '>=20.19.0 <21 || >=22.12.0', true],
    ['v20.20.2', '^20.19.0 || >=22.12.0', true], ['v20.18.9', '^20.19.0', false], ['v21.0.0', '^20.19.0', false], ['v20.20.2', '>= 18', true],
    ['v20.20.2', '^18.18.0 || ^20.9.0 || >=21.1.0', true], ['v20.20.2', '18 || 20 || >=22', true], ['v20.20.2', '~20.20.0', true], ['v20.20.2', '~20.19.0', false],
    ['v20.20.2', '*', true], ['v20.20.2', '>=20.x', true], ['v20.20.2', '20.x', true], ['v20.20.2', '>20', false], ['v20.20.2', '<=20', true], ['v20.20.2', '>=24.0.0', false],
  ])('%s in %s: %s', (version, range, allowed) => {
    expect(versionAllowed(version, range)).toBe(allowed)
  })
})

describe('where to listen', () => {
  afterEach(() => {
    vi.unstubAllEnvs()
  })

  it('knows the addresses that others cannot reach', () => {
    for (const host of ['127.0.0.1', '127.8.0.1', 'localhost', '::1']) expect(isLoopback(host)).toBe(true)
    for (const host of ['0.0.0.0', '::', '192.168.1.5', '127.0.0.1.example', 'moorage.example']) expect(isLoopback(host)).toBe(false)
  })

  it.each(['0', '65536', 'abc', '-1', '3000x', '1e3'])('refuses PORT %s', (port) => {
    vi.stubEnv('PORT', port)
    expect(() => listenAddress()).toThrow(/whole number from 1 to 65535/)
  })

  it('listens on loopback unless told otherwise', () => {
    vi.stubEnv('PORT', '')
    vi.stubEnv('HOST', '')
    expect(listenAddress()).toEqual({ host: '127.0.0.1', port: 3000 })
  })

  it('keeps the caller\'s environment from the server', () => {
    vi.stubEnv('AWS_SECRET', 'invented')
    vi.stubEnv('DATABASE_URL', 'postgresql://invented')
    vi.stubEnv('NUXT_THROTTLE_PER_ACCOUNT', '9')
    const passed = serverEnvironment({ host: '127.0.0.1', port: 3000 }, { NUXT_DATABASE_URL: 'x' })
    expect(passed).not.toHaveProperty('AWS_SECRET')
    expect(passed).not.toHaveProperty('DATABASE_URL')
    expect(passed).toMatchObject({ NUXT_THROTTLE_PER_ACCOUNT: '9', NUXT_DATABASE_URL: 'x', PORT: '3000' })
  })
})

describe('durations', () => {
  it('are written for people', () => {
    expect([duration(840), duration(12_300), duration(125_000)]).toEqual(['0.8 s', '12 s', '2 min 5 s'])
  })
})
