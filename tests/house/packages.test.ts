/** Packages: exact versions, all of them made for the Node that the project promises, and folders that are known by name. */
import { execFileSync } from 'node:child_process'
import { readdirSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { versionAllowed } from '../../scripts/support/node-version.mjs'
import { ROOT, textOf } from './support/sources'

const manifest = JSON.parse(textOf('package.json')) as Record<'dependencies' | 'devDependencies' | 'scripts', Record<string, string>> & { engines: { node: string } }
const lock = JSON.parse(textOf('package-lock.json')) as { packages: Record<string, { version?: string, engines?: { node?: string } }> }
const direct = Object.entries({ ...manifest.dependencies, ...manifest.devDependencies })
/** The oldest Node that is promised to work, as measured. */
const PROMISED = 'v20.20.2'

/** Top-level folders; a new one is a decision, not an accident. */
const FOLDERS = ['.ci', 'app', 'docs', 'drizzle', 'public', 'scripts', 'server', 'shared', 'tests', 'workers']

describe('packages', () => {
  it.each(direct)('%s is pinned and locked at %s', (name, version) => {
    expect(version).toMatch(/^\d+\.\d+\.\d+(-[\w.]+)?$/)
    expect(lock.packages[`node_modules/${name}`]?.version).toBe(version)
  })

  it.each(direct)('%s %s is made for the promised Node', (name) => {
    const range = lock.packages[`node_modules/${name}`]?.engines?.node
    if (range) expect(versionAllowed(PROMISED, range), `${name} wants Node ${range}`).toBe(true)
    else expect(lock.packages[`node_modules/${name}`]).toBeDefined()
  })

  it('allow the promised Node by the project\'s own word', () => {
    expect(versionAllowed(PROMISED, manifest.engines.node)).toBe(true)
    for (const old of ['v18.20.8', 'v20.18.0', 'v21.7.3', 'v22.11.0']) expect(versionAllowed(old, manifest.engines.node), old).toBe(false)
  })

  it('name only commands whose file is there', () => {
    for (const command of Object.values(manifest.scripts)) {
      const file = /(?:node|tsx) (\S+\.(?:mjs|ts))/.exec(command)?.[1]
      if (file && !file.startsWith('.output')) expect(() => textOf(file), file).not.toThrow()
    }
  })
})

describe('the top of the tree', () => {
  it('holds only known folders', () => {
    let folders: string[]
    try {
      const files = execFileSync('git', ['ls-files'], { cwd: ROOT, encoding: 'utf8', stdio: ['ignore', 'pipe', 'ignore'] }).split('\n')
      folders = [...new Set(files.filter(path => path.includes('/')).map(path => path.split('/')[0]!))]
    } catch {
      // A copy without its history: what tools make is left out by name.
      folders = readdirSync(ROOT, { withFileTypes: true }).filter(one => one.isDirectory() && !['node_modules', '.nuxt', '.output', '.data', '.git', 'coverage'].includes(one.name)).map(one => one.name)
    }
    expect(folders.filter(name => !FOLDERS.includes(name))).toEqual([])
  })
})
