/** The folder that holds a bench's database and secrets: chosen, opened to the accounts that need it, locked for one start at a time. */
import { chmodSync, existsSync, mkdirSync, openSync, readFileSync, readdirSync, renameSync, rmSync, writeFileSync, closeSync } from 'node:fs'
import { join, resolve } from 'node:path'
import { spawnSync } from 'node:child_process'
import { databaseAccount, isRoot, serverAccount } from './as-user.mjs'
import { randomSecret } from './cluster.mjs'
import { ROOT } from './run.mjs'
import { Refusal } from './say.mjs'

const MARK = 'moorage-data'

/** MOORAGE_DATA, else /var/lib/moorage for root (the postgres account cannot enter root's home), else .data in the checkout. */
export function dataFolderPath() {
  if (process.env.MOORAGE_DATA) return resolve(process.env.MOORAGE_DATA)
  return isRoot() ? '/var/lib/moorage' : join(ROOT, '.data')
}

/** Every parent must let the account through; a closed home is the usual reason why not. */
function checkEntry(folder, account, who) {
  if (!account) return
  const { status } = spawnSync('/usr/bin/test', ['-x', folder], { cwd: '/', uid: account.uid, gid: account.gid })
  if (status !== 0) throw new Refusal(`The data folder ${folder} lies behind a folder that the ${who} cannot enter. Choose another: MOORAGE_DATA=/var/lib/moorage npm start.`)
}

/**
 * Makes the folder where it is missing and checks that it is ours and can be entered.
 * @param {{ ownCluster: boolean }} wants whether the database's account needs it
 * @returns {string} path
 */
export function openDataFolder({ ownCluster }) {
  const folder = dataFolderPath()
  const isNew = !existsSync(folder)
  try {
    mkdirSync(folder, { recursive: true, mode: isRoot() ? 0o711 : 0o700 })
    const content = readdirSync(folder)
    if (content.length && !content.includes(MARK)) throw new Refusal(`${folder} holds files that are not Moorage's. Give MOORAGE_DATA a folder of its own.`)
    if (!content.length) {
      chmodSync(folder, isRoot() ? 0o711 : 0o700)
      writeFileSync(join(folder, MARK), 'Database, secrets and the served copy of one Moorage installation.\n')
    }
  } catch (error) {
    if (error instanceof Refusal) throw error
    throw new Refusal(`The data folder ${folder} cannot be used: ${error.message}. Choose another with MOORAGE_DATA.`)
  }
  try {
    if (ownCluster) checkEntry(folder, databaseAccount(), 'database\'s account')
    checkEntry(folder, serverAccount(), 'web server\'s account')
  } catch (error) {
    if (isNew) rmSync(folder, { recursive: true, force: true })
    throw error
  }
  return folder
}

/** When a process began, in the kernel's ticks; tells a living owner of a lock from a stranger with its number. */
function beganAt(pid) {
  try {
    return readFileSync(`/proc/${pid}/stat`, 'utf8').split(') ').pop().split(' ')[19]
  } catch {
    return null
  }
}

/**
 * Takes the folder for this process; a lock left by a killed one is taken over.
 * @param {string} folder data folder
 * @returns {() => void} gives the folder back
 */
export function lockDataFolder(folder) {
  const path = join(folder, 'start.lock')
  for (let attempt = 0; attempt < 3; attempt += 1) {
    try {
      const file = openSync(path, 'wx', 0o600)
      writeFileSync(file, `${process.pid} ${beganAt(process.pid)}`)
      closeSync(file)
      return () => rmSync(path, { force: true })
    } catch (error) {
      if (error.code !== 'EEXIST') throw new Refusal(`The data folder ${folder} cannot be written: ${error.message}.`)
    }
    const [pid, began] = readFileSync(path, 'utf8').split(' ')
    if (pid && beganAt(pid) !== null && beganAt(pid) === began)
      throw new Refusal(`Moorage already runs on the data folder ${folder} (process ${pid}). Stop that one first, or give this one a folder of its own with MOORAGE_DATA.`)
    rmSync(path, { force: true })
  }
  throw new Refusal(`The data folder ${folder} is being taken by another start at this moment.`)
}

/**
 * Secrets of this installation, made once, readable by their owner only.
 * @param {string} folder data folder
 * @returns {{ superPassword: string, ownerPassword: string, applicationPassword: string, sessionPassword: string }} passwords of the three database roles and the key of session cookies
 */
export function installationSecrets(folder) {
  const path = join(folder, 'secrets.json')
  if (existsSync(path)) return JSON.parse(readFileSync(path, 'utf8'))
  if (existsSync(join(folder, 'cluster/PG_VERSION'))) throw new Refusal(`${path} is missing, so the database beside it cannot be opened. Put the file back from a copy, or choose another MOORAGE_DATA.`)
  const secrets = { superPassword: randomSecret(), ownerPassword: randomSecret(), applicationPassword: randomSecret(), sessionPassword: randomSecret(48) }
  writeFileSync(`${path}.new`, JSON.stringify(secrets, null, 2), { mode: 0o600 })
  renameSync(`${path}.new`, path)
  return secrets
}
