/** Two roles of one database: an owner that migrates, and the application's, which gets its row rights from the migrations. */
import { addressOf, SUPERUSER } from './cluster.mjs'

/** Names that the migrations' grants rely on. */
export const OWNER_ROLE = 'moorage_owner'
export const APPLICATION_ROLE = 'moorage_app'

const ATTRIBUTES = 'LOGIN NOSUPERUSER NOCREATEDB NOCREATEROLE NOREPLICATION'

async function connect(connectionString) {
  const { default: pg } = await import('pg')
  const client = new pg.Client({ connectionString })
  await client.connect()
  return client
}

/** Passwords are made of base64url letters only, so that no quoting is needed; anything else is refused. */
function literal(text) {
  if (!/^[\w-]+$/.test(text)) throw new Error('roles: a name or password has letters that need quoting')
  return text
}

async function ensureRole(client, role, password) {
  const { rowCount } = await client.query('select 1 from pg_roles where rolname = $1', [role])
  await client.query(`${rowCount ? 'alter' : 'create'} role ${literal(role)} with ${ATTRIBUTES} password '${literal(password)}'`)
}

/**
 * Makes both roles and the database where they are missing, and sets the passwords to those given.
 * @param {{ port: number, superPassword: string, ownerPassword: string, applicationPassword: string, database?: string }} how the cluster and its secrets
 * @returns {Promise<{ ownerUrl: string, applicationUrl: string, superUrl: string }>} addresses of the database as owner, application and superuser
 */
export async function prepareDatabase({ port, superPassword, ownerPassword, applicationPassword, database = 'moorage' }) {
  const client = await connect(addressOf({ port, user: SUPERUSER, password: superPassword, database: 'postgres' }))
  try {
    await ensureRole(client, OWNER_ROLE, ownerPassword)
    await ensureRole(client, APPLICATION_ROLE, applicationPassword)
    const { rowCount } = await client.query('select 1 from pg_database where datname = $1', [database])
    if (!rowCount) await client.query(`create database ${literal(database)} owner ${OWNER_ROLE} encoding 'UTF8' template template0`)
    await client.query(`revoke all on database ${literal(database)} from public`)
    await client.query(`grant connect on database ${literal(database)} to ${APPLICATION_ROLE}`)
  } finally {
    await client.end()
  }
  return {
    ownerUrl: addressOf({ port, user: OWNER_ROLE, password: ownerPassword, database }),
    applicationUrl: addressOf({ port, user: APPLICATION_ROLE, password: applicationPassword, database }),
    superUrl: addressOf({ port, user: SUPERUSER, password: superPassword, database }),
  }
}
