import type { Actor, PersonActor, Role } from '@/lib/auth/actor'
import { AppError } from '@/lib/errors'

/** PRODUCT.md's table "Who may do what", as data. What is not here is denied. */
const permissions = {
  'accounts:read': ['administrator', 'master cooper', 'chemist', 'toaster'],
  'accounts:write': ['administrator'],
  'room:read': ['administrator', 'master cooper', 'chemist', 'toaster'],
  'room:write': ['administrator'],
  'site:read': ['administrator', 'master cooper', 'chemist', 'toaster'],
  'site:write': ['administrator'],
  'checks:read': ['administrator', 'master cooper', 'chemist', 'toaster'],
  'checks:write': ['administrator', 'master cooper', 'toaster'],
  /** Makes measured repeat placements the site's own figure: a part of the settings that the master cooper judges by. */
  'repeatability:adopt': ['administrator', 'master cooper'],
  'recipes:read': ['administrator', 'master cooper', 'chemist', 'toaster'],
  'recipes:read unapproved': ['administrator', 'master cooper', 'chemist'],
  'recipes:write': ['master cooper', 'chemist'],
  'recipes:approve': ['master cooper'],
  'markers:read': ['administrator', 'master cooper', 'chemist'],
  'markers:write': ['master cooper', 'chemist'],
  'firings:run': ['master cooper', 'toaster'],
  'firings:run trial': ['master cooper', 'toaster', 'chemist'],
  'firings:follow': ['administrator', 'master cooper', 'chemist', 'toaster'],
  'firings:read all': ['administrator', 'master cooper', 'chemist'],
  'alarms:read': ['administrator', 'master cooper', 'chemist', 'toaster'],
  'alarms:read all': ['administrator', 'master cooper', 'chemist'],
  'alarms:shelve': ['master cooper', 'toaster'],
  'batches:read': ['administrator', 'master cooper', 'chemist', 'toaster', 'customer'],
  'batches:read all': ['administrator', 'master cooper', 'chemist', 'toaster'],
  'batches:write': ['master cooper'],
  'conditions:read': ['administrator', 'master cooper', 'chemist', 'toaster'],
  'conditions:write': ['master cooper', 'toaster'],
  'customers:read': ['administrator', 'master cooper', 'chemist', 'toaster'],
  'customers:write': ['administrator', 'master cooper'],
  'devices:read': ['administrator', 'master cooper'],
  'devices:write': ['administrator'],
  'audit:read': ['administrator', 'master cooper'],
} as const satisfies Record<string, readonly Role[]>

export type Permission = keyof typeof permissions

/** What a session that a PIN opened may use of its role: the fireside's work. What is not here needs the password. */
const byPin: ReadonlySet<Permission> = new Set<Permission>([
  'room:read',
  'site:read',
  'checks:read',
  'recipes:read',
  'firings:run',
  'firings:run trial',
  'firings:follow',
  'alarms:read',
  'alarms:shelve',
  'batches:read',
  'batches:read all',
  'conditions:read',
])

/** What an enrolled device may read with nobody signed in: what stands over the fires, and what waits for them. */
const byDevice: ReadonlySet<Permission> = new Set<Permission>([
  'room:read',
  'firings:follow',
  'batches:read',
  'batches:read all',
])

export function rolesWith(permission: Permission): readonly Role[] {
  return permissions[permission]
}

export function isAllowed(actor: Actor, permission: Permission): boolean {
  if (actor.kind === 'system') return true
  if (actor.kind === 'device') return byDevice.has(permission)
  return rolesWith(permission).includes(actor.role) && (actor.byPinAt === undefined || byPin.has(permission))
}

/**
 * @throws AppError 'not allowed' when the actor's role lacks the permission or a PIN does not open it, 'not signed in'
 *   for a device with nobody at it
 */
export function requirePermission(actor: Actor, permission: Permission): void {
  if (isAllowed(actor, permission)) return
  if (actor.kind === 'device') throw nobodyAtTheDevice()
  if (actor.kind === 'person' && rolesWith(permission).includes(actor.role)) throw notByPin()
  const who = rolesWith(permission).join(' or ')
  throw new AppError(
    'not allowed',
    `This needs the role ${who}. Ask your administrator if it should be yours.`,
  )
}

/** The actor as a person. @throws AppError 'not allowed' for the system: some things a person must do. */
export function requirePerson(actor: Actor): PersonActor {
  if (actor.kind === 'person') return actor
  if (actor.kind === 'device') throw nobodyAtTheDevice()
  throw new AppError('not allowed', 'A person has to do this, signed in.')
}

/** For what a PIN never opens: one's own account. @throws AppError 'not allowed' */
export function requirePasswordSession(actor: PersonActor): void {
  if (actor.byPinAt !== undefined) throw notByPin()
}

export function notByPin(): AppError {
  return new AppError('not allowed', 'A PIN opens the fireside alone. Sign in with your password for this.')
}

function nobodyAtTheDevice(): AppError {
  return new AppError('not signed in', 'Nobody is signed in here. Choose your name and type your PIN.')
}
