/** Who may do what: the one table that decides on the server and drives what the interface offers. */

export const ROLES = ['lead', 'member', 'trainee', 'guest'] as const
export type Role = typeof ROLES[number]

/** `all`: on everything of the bench · `own`: on what the person made · `shared`: on items shared with them · `none`. */
export type Reach = 'all' | 'own' | 'shared' | 'none'

const TABLE = {
  'bench.read': { lead: 'all', member: 'all', trainee: 'all', guest: 'none' },
  'bench.settings': { lead: 'all', member: 'none', trainee: 'none', guest: 'none' },
  'member.list': { lead: 'all', member: 'all', trainee: 'all', guest: 'none' },
  'member.manage': { lead: 'all', member: 'none', trainee: 'none', guest: 'none' },
  'scenario.read': { lead: 'all', member: 'all', trainee: 'all', guest: 'shared' },
  'scenario.create': { lead: 'all', member: 'all', trainee: 'own', guest: 'none' },
  'scenario.edit': { lead: 'all', member: 'all', trainee: 'own', guest: 'none' },
  'scenario.delete': { lead: 'all', member: 'own', trainee: 'own', guest: 'none' },
  'run.read': { lead: 'all', member: 'all', trainee: 'all', guest: 'shared' },
  /** A trainee's run is saved only after a prediction; until predictions exist the server answers 409. */
  'run.save': { lead: 'all', member: 'all', trainee: 'own', guest: 'none' },
  'run.delete': { lead: 'all', member: 'own', trainee: 'own', guest: 'none' },
  'recording.read': { lead: 'all', member: 'all', trainee: 'all', guest: 'shared' },
  'recording.create': { lead: 'all', member: 'all', trainee: 'own', guest: 'none' },
  'recording.edit': { lead: 'all', member: 'all', trainee: 'own', guest: 'none' },
  'recording.delete': { lead: 'all', member: 'own', trainee: 'own', guest: 'none' },
  'weigh-up.read': { lead: 'all', member: 'all', trainee: 'all', guest: 'shared' },
  'weigh-up.create': { lead: 'all', member: 'all', trainee: 'own', guest: 'none' },
  'weigh-up.edit': { lead: 'all', member: 'all', trainee: 'own', guest: 'none' },
  'weigh-up.delete': { lead: 'all', member: 'own', trainee: 'own', guest: 'none' },
} satisfies Record<string, Record<Role, Reach>>

export type Action = keyof typeof TABLE
export const ACTIONS = Object.keys(TABLE) as Action[]

/** How far an action reaches for a role. */
export const reachOf = (role: Role, action: Action): Reach => TABLE[action][role]

/** May someone in this role do this to an item? `owns`: they made it; `shared`: it was shared with them. Without an item, any reach but `none` allows. */
export function may(role: Role, action: Action, item?: { owns: boolean, shared?: boolean }): boolean {
  const reach = reachOf(role, action)
  if (reach === 'none') return false
  if (reach === 'all' || !item) return true
  return reach === 'own' ? item.owns : Boolean(item.shared)
}
