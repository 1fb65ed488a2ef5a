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
  'customers:read': ['administrator', 'master cooper', 'chemist', 'toaster'],
  'customers:write': ['administrator', 'master cooper'],
  'audit:read': ['administrator', 'master cooper'],
} as const satisfies Record<string, readonly Role[]>

export type Permission = keyof typeof permissions

export function rolesWith(permission: Permission): readonly Role[] {
  return permissions[permission]
}

export function isAllowed(actor: Actor, permission: Permission): boolean {
  return actor.kind === 'system' || rolesWith(permission).includes(actor.role)
}

/** @throws AppError 'not allowed' when the actor's role lacks the permission. */
export function requirePermission(actor: Actor, permission: Permission): void {
  if (isAllowed(actor, permission)) return
  const who = rolesWith(permission).join(' or ')
  throw new AppError(
    'not allowed',
    `This needs the role ${who}. Ask your administrator if it should be yours.`,
  )
}

/** The actor as a person. @throws AppError 'not allowed' for the system: some things a person must do. */
export function requirePerson(actor: Actor): PersonActor {
  if (actor.kind === 'person') return actor
  throw new AppError('not allowed', 'A person has to do this, signed in.')
}
