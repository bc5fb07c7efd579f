/** Someone at a browser: keeps the cookie, sends the origin, reads JSON. */
import { randomBytes, scryptSync } from 'node:crypto'
import { memberships, users } from '../../server/db/schema'
import type { Database } from '../../server/db/client'
import type { Role } from '../../shared/permissions'
import type { Me } from '../../shared/schemas/api/account'

export const PASS_PHRASE = 'wave after wave after wave'

export interface Answer<Body> { status: number, headers: Headers, body: Body }
export type AnyBody = Record<string, never> & { [name: string]: unknown }

export class Visitor {
  cookie = ''
  userId = ''
  constructor(readonly base: string) {}

  async send<Body = AnyBody>(method: string, path: string, body?: unknown, headers: Record<string, string> = {}): Promise<Answer<Body>> {
    const answer = await fetch(this.base + path, {
      method, redirect: 'manual',
      headers: {
        ...(method === 'GET' ? {} : { origin: this.base }),
        ...(body === undefined ? {} : { 'content-type': 'application/json' }),
        ...(this.cookie && { cookie: this.cookie }),
        ...headers,
      },
      ...(body === undefined ? {} : { body: typeof body === 'string' || body instanceof Uint8Array ? body as BodyInit : JSON.stringify(body) }),
    })
    for (const line of answer.headers.getSetCookie()) this.cookie = line.split(';')[0]!
    const text = await answer.text()
    return { status: answer.status, headers: answer.headers, body: (text && answer.headers.get('content-type')?.includes('json') ? JSON.parse(text) : text) as Body }
  }

  get = <Body = AnyBody>(path: string, headers?: Record<string, string>) => this.send<Body>('GET', path, undefined, headers)
  post = <Body = AnyBody>(path: string, body?: unknown, headers?: Record<string, string>) => this.send<Body>('POST', path, body, headers)
  put = <Body = AnyBody>(path: string, body?: unknown, headers?: Record<string, string>) => this.send<Body>('PUT', path, body, headers)
  patch = <Body = AnyBody>(path: string, body?: unknown, headers?: Record<string, string>) => this.send<Body>('PATCH', path, body, headers)
  delete = <Body = AnyBody>(path: string, headers?: Record<string, string>) => this.send<Body>('DELETE', path, undefined, headers)

  async signIn(mail: string, passPhrase = PASS_PHRASE): Promise<Answer<Me>> {
    const answer = await this.post<Me>('/api/account/sign-in', { mail, passPhrase })
    if (answer.status === 200) this.userId = answer.body.userId
    return answer
  }
}

/** A hash at a test's cost; the server reads the cost from the hash. */
export function quickHash(passPhrase: string, cost = 1024): string {
  const salt = randomBytes(16)
  const key = scryptSync(passPhrase, salt, 64, { N: cost, r: 8, p: 1, maxmem: 268_435_456 })
  const text = (bytes: Buffer) => bytes.toString('base64').replace(/=+$/, '')
  return `$scrypt$n=${cost},r=8,p=1$${text(salt)}$${text(key)}`
}

let count = 0
/** An account in the database, signed in at the server; with a bench and a role where given. */
export async function arrive(db: Database, base: string, name: string, on?: { benchId: string, role: Role }): Promise<Visitor> {
  count += 1
  const mail = `${name.toLowerCase().replace(/\W+/g, '-')}-${count}@tests.example`
  const [user] = await db.insert(users).values({ mail, name, passHash: quickHash(PASS_PHRASE) }).returning({ userId: users.userId })
  if (on) await db.insert(memberships).values({ ...on, userId: user!.userId })
  const visitor = new Visitor(base)
  const { status } = await visitor.signIn(mail)
  if (status !== 200) throw new Error(`${mail} could not sign in: ${status}`)
  return visitor
}
