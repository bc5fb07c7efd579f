/** The first thing that any command checks: a Node that the packages were made for. */
import { readFileSync } from 'node:fs'
import { Refusal } from './say.mjs'

const asNumbers = version => version.replace(/^v/, '').split('.').map(Number)

function atLeast(version, floor) {
  for (let i = 0; i < 3; i += 1) {
    if (version[i] !== (floor[i] ?? 0)) return version[i] > (floor[i] ?? 0)
  }
  return true
}

/**
 * Whether a version lies in a range such as ">=20.19.0 <21 || >=22.12.0" (only these two comparisons are read).
 * @param {string} version such as v20.20.2
 * @param {string} range as in package.json
 */
export function versionAllowed(version, range) {
  const have = asNumbers(version)
  return range.split('||').some(part => part.trim().split(/\s+/).every((rule) => {
    if (rule.startsWith('>=')) return atLeast(have, asNumbers(rule.slice(2)))
    if (rule.startsWith('<')) return !atLeast(have, asNumbers(rule.slice(1)))
    return false
  }))
}

/** Refuses a Node that is too old, before anything else is tried. */
export function checkNodeVersion() {
  const { engines } = JSON.parse(readFileSync(new URL('../../package.json', import.meta.url), 'utf8'))
  if (versionAllowed(process.version, engines.node)) return
  throw new Refusal(`Moorage needs Node ${engines.node}; this is Node ${process.version}. Install one of those from nodejs.org or your system's packages, then repeat the command.`)
}
