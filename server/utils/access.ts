/** Every handler says in its first line who may come: `publicRoute`, `signedIn` or `requireMember`. `routes.ts` lists the same for all. */
import { getHeader, getRouterParam, type H3Event } from 'h3'
import { may, type Action, type Role } from '../../shared/permissions'
import { findBenchScope, findItemScope, type ItemKind, type Scope } from '../services/scopes'
import type { Person } from '../services/sessions'
import { idParam } from './input'
import { personOf } from './person'
import { problem } from './problem'

/** Someone with a role on the bench that the request is about, allowed to do what it asks. */
export interface Member extends Person { benchId: string, role: Role, itemId: string }

/** Open to strangers. */
export function publicRoute(_event: H3Event): void {}

export async function signedIn(event: H3Event): Promise<Person> {
  const person = await personOf(event)
  if (!person) throw problem('sign_in_first')
  const meant = getHeader(event, 'x-moorage-person')
  // The page belongs to an account that is not the one signed in any more: nothing is done in another's name.
  if (meant !== undefined && meant !== person.userId) throw problem('sign_in_first', { detail: 'Another account is signed in here now. Sign in again as the one that this page belongs to.' })
  return person
}

/** Actions that make something new: whose the item in the path is does not matter. */
const MAKES_NEW = new Set<Action>(['scenario.create', 'run.save', 'recording.create', 'weigh-up.create'])

/**
 * The person as a member of the bench behind the path, or a refusal: 401 signed out · 404 what they may not know of ·
 * 403 what they may read but not do.
 * @param options - `bin`: also items in the bin
 */
export async function requireMember(event: H3Event, action: Action, options: { bin?: boolean } = {}): Promise<Member> {
  const person = await signedIn(event)
  const scope = await scopeOf(event, person.userId)
  if (!scope?.role || (scope.deleted && !options.bin)) throw problem('not_found')
  const item = scope.kind === 'bench' ? undefined : { owns: scope.ownerId === person.userId, shared: false }
  if (scope.kind !== 'bench' && !may(scope.role, `${scope.kind}.read`, item)) throw problem('not_found')
  if (!may(scope.role, action, MAKES_NEW.has(action) ? undefined : item)) throw problem('not_allowed')
  return { ...person, benchId: scope.benchId, role: scope.role, itemId: scope.itemId }
}

const PARAMETERS: [string, ItemKind][] = [['runId', 'run'], ['scenarioId', 'scenario'], ['recordingId', 'recording'], ['weighUpId', 'weigh-up']]
/** The innermost thing that the path names decides. */
function scopeOf(event: H3Event, userId: string): Promise<Scope | undefined> {
  const db = useDatabase()
  for (const [parameter, kind] of PARAMETERS) if (getRouterParam(event, parameter) !== undefined) return findItemScope(db, kind, idParam(event, parameter), userId)
  return findBenchScope(db, idParam(event, 'benchId'), userId)
}
