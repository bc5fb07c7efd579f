/** Debian's packages that the commands need, installed only where they are missing and only where that is possible. */
import { existsSync, mkdirSync, rmSync, writeFileSync } from 'node:fs'
import { delimiter, join } from 'node:path'
import { isRoot } from './as-user.mjs'
import { findPostgres } from './cluster.mjs'
import { lastLines, run } from './run.mjs'
import { Refusal, duration, say } from './say.mjs'

/** Where a program of the search path stands. @returns {string | null} path, null when absent */
export function onPath(name) {
  const folders = [...(process.env.PATH ?? '').split(delimiter), '/usr/bin', '/usr/sbin', '/sbin']
  const folder = folders.find(one => one && existsSync(join(one, name)))
  return folder ? join(folder, name) : null
}

/** The browser of the tests: MOORAGE_CHROMIUM, else Debian's. @returns {string | null} path, null when absent */
export function findChromium() {
  const named = process.env.MOORAGE_CHROMIUM
  if (named) return existsSync(named) ? named : null
  return onPath('chromium')
}

const NEEDS = {
  'postgresql': { present: () => findPostgres() !== null, what: 'PostgreSQL\'s server' },
  'chromium': { present: () => findChromium() !== null, what: 'the browser Chromium' },
  'gcc': { present: () => onPath('gcc') !== null && existsSync('/usr/include/stdio.h'), what: 'the C compiler' },
  'python3-numpy': { present: () => false, what: 'numpy' },
}

/** Packages that come with each; gcc alone brings no C library headers. */
const WITH = { 'postgresql': ['postgresql'], 'chromium': ['chromium', 'fonts-liberation'], 'gcc': ['gcc', 'libc6-dev'], 'python3-numpy': ['python3-numpy'] }

/** As root directly, else by a sudo that asks nothing. @returns {Promise<string[] | null>} words to put first, null when neither works */
async function privilege() {
  if (isRoot()) return []
  if (!onPath('sudo')) return null
  const { status } = await run('sudo', ['-n', 'true'], { quiet: true })
  return status === 0 ? ['sudo', '-n'] : null
}

const APT_FOLDER = '/etc/postgresql-common/createcluster.d'
const NO_MAIN_CLUSTER = join(APT_FOLDER, 'moorage.conf')

/** Debian starts a cluster of its own on the usual port unless told not to; told for the length of this installation only. */
async function withoutMainCluster(first, install) {
  if (first.length) {
    await run(first[0], [...first.slice(1), 'sh', '-c', `mkdir -p ${APT_FOLDER} && echo "create_main_cluster = false" > ${NO_MAIN_CLUSTER}`], { quiet: true })
  } else {
    mkdirSync(APT_FOLDER, { recursive: true })
    writeFileSync(NO_MAIN_CLUSTER, 'create_main_cluster = false\n')
  }
  try {
    return await install()
  } finally {
    if (first.length) await run(first[0], [...first.slice(1), 'rm', '-f', NO_MAIN_CLUSTER], { quiet: true })
    else rmSync(NO_MAIN_CLUSTER, { force: true })
  }
}

async function apt(first, words) {
  const environment = { ...process.env, DEBIAN_FRONTEND: 'noninteractive', LC_ALL: 'C.UTF-8' }
  const command = [...first, ...(first.length ? ['env', 'DEBIAN_FRONTEND=noninteractive'] : []), 'apt-get', '-y', '-q',
    '-o', 'DPkg::Lock::Timeout=300', '-o', 'Acquire::Retries=2', '-o', 'Dpkg::Options::=--force-confdef', '-o', 'Dpkg::Options::=--force-confold', ...words]
  return await run(command[0], command.slice(1), { env: environment, quiet: true })
}

/**
 * Installs those of the named packages that are missing.
 * @param {('postgresql' | 'chromium' | 'gcc' | 'python3-numpy')[]} names Debian packages
 * @param {(sentence: string) => void} [tell] where progress is told
 */
export async function installPackages(names, tell = say) {
  const missing = names.filter(name => !NEEDS[name].present())
  if (!missing.length) return
  const wanted = missing.flatMap(name => WITH[name])
  const what = missing.map(name => NEEDS[name].what).join(' and ')
  const byHand = `Install it by hand (on Debian, as root: apt-get install ${wanted.join(' ')}), then repeat the command. Nothing was changed.`
  if (!onPath('apt-get')) throw new Refusal(`This machine lacks ${what}, and it has no apt-get to install it with. ${byHand}`)
  const first = await privilege()
  if (!first) throw new Refusal(`This machine lacks ${what}, and only root may install it. ${byHand}`)
  const started = Date.now()
  tell(`Installing Debian's ${wanted.join(', ')} …`)
  const update = await apt(first, ['update'])
  const install = () => apt(first, ['install', ...(missing.includes('chromium') ? [] : ['--no-install-recommends']), ...wanted])
  const done = missing.includes('postgresql') ? await withoutMainCluster(first, install) : await install()
  if (done.status !== 0 || missing.some(name => name !== 'python3-numpy' && !NEEDS[name].present()))
    throw new Refusal(`${what[0].toUpperCase()}${what.slice(1)} could not be installed; apt-get ended with ${done.status}${update.status === 0 ? '' : ' (its lists could not be fetched: is there a network connection?)'}. It can be repeated safely. apt-get says:\n${lastLines(done.output)}`)
  tell(`Debian's ${wanted.join(', ')}: installed (${duration(Date.now() - started)}).`)
}
