/** The first thing that any command checks: a Node that the packages were made for. */
import { readFileSync } from 'node:fs'
import { Refusal } from './say.mjs'

/** Numbers of a version; parts that are left out or written x are dropped. */
const asNumbers = version => version.replace(/^v/, '').split('.').filter(part => /^\d+/.test(part)).map(part => Number.parseInt(part, 10))

/** Below, equal or above: -1, 0, 1; only as many parts count as the rule names. */
function compare(version, rule) {
  for (let i = 0; i < rule.length; i += 1)
    if (version[i] !== rule[i]) return version[i] > rule[i] ? 1 : -1
  return 0
}

const RULES = {
  '>=': (have, rule) => compare(have, rule) >= 0,
  '<=': (have, rule) => compare(have, rule) <= 0,
  '>': (have, rule) => compare(have, rule) > 0,
  '<': (have, rule) => compare(have, rule) < 0,
  '^': (have, rule) => compare(have, rule) >= 0 && have[0] === rule[0],
  '~': (have, rule) => compare(have, rule) >= 0 && compare(have, rule.slice(0, 2)) === 0,
  '': (have, rule) => compare(have, rule) === 0,
}

/**
 * Whether a version lies in a range of npm's kind, such as ">=20.19.0 <21 || ^22.12.0".
 * @param {string} version such as v20.20.2
 * @param {string} range as in package.json
 */
export function versionAllowed(version, range) {
  const have = asNumbers(version)
  return range.split('||').some((part) => {
    const rules = [...part.matchAll(/(>=|<=|>|<|\^|~|)\s*v?(\d+(?:\.(?:\d+|x|\*))*|\*)/g)]
    return rules.every(([, sign, text]) => RULES[sign](have, asNumbers(text)))
  })
}

/** Refuses a Node that is too old, before anything else is tried. */
export function checkNodeVersion() {
  const { engines } = JSON.parse(readFileSync(new URL('../../package.json', import.meta.url), 'utf8'))
  if (versionAllowed(process.version, engines.node)) return
  throw new Refusal(`Moorage needs Node ${engines.node}; this is Node ${process.version}. Install one of those from nodejs.org or your system's packages, then repeat the command.`)
}
