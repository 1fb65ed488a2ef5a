import type { Role } from '@/lib/auth/actor'

export type Place = { href: string; label: string }

const places: readonly (Place & { roles: readonly Role[] })[] = [
  { href: '/room', label: 'Room', roles: ['administrator', 'master cooper', 'chemist', 'toaster'] },
  { href: '/recipes', label: 'Recipes', roles: ['administrator', 'master cooper', 'chemist', 'toaster'] },
  { href: '/markers', label: 'Markers', roles: ['administrator', 'master cooper', 'chemist'] },
  { href: '/firings', label: 'Firings', roles: ['administrator', 'master cooper', 'chemist', 'toaster'] },
  { href: '/batches', label: 'Batches', roles: ['administrator', 'master cooper', 'chemist', 'toaster'] },
  { href: '/barrels', label: 'Barrels', roles: ['administrator', 'master cooper', 'chemist', 'toaster'] },
  { href: '/probes', label: 'Probes', roles: ['administrator', 'master cooper', 'chemist', 'toaster'] },
  {
    href: '/conditions',
    label: 'Conditions',
    roles: ['administrator', 'master cooper', 'chemist', 'toaster'],
  },
  { href: '/alarms', label: 'Alarms', roles: ['administrator', 'master cooper', 'chemist', 'toaster'] },
  { href: '/devices', label: 'Devices', roles: ['administrator', 'master cooper'] },
  { href: '/accounts', label: 'Accounts', roles: ['administrator'] },
  { href: '/audit', label: 'Audit', roles: ['administrator', 'master cooper'] },
  { href: '/settings', label: 'Settings', roles: ['administrator'] },
  { href: '/orders', label: 'Orders', roles: ['customer'] },
]

/** What a role finds in the bar, in order. */
export function placesOf(role: Role): readonly Place[] {
  return places.filter((place) => place.roles.includes(role)).map(({ href, label }) => ({ href, label }))
}

const homes: Record<Role, string> = {
  administrator: '/accounts',
  'master cooper': '/room',
  chemist: '/recipes',
  toaster: '/room',
  customer: '/orders',
}

/** Where a person begins. */
export function homeOf(role: Role): string {
  return homes[role]
}
