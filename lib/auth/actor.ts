export const staffRoles = ['administrator', 'master cooper', 'chemist', 'toaster'] as const
export const roles = [...staffRoles, 'customer'] as const
export type Role = (typeof roles)[number]

/** Who does a verb: a signed-in person, or the system itself (set-up, seeds, sealing). */
export type PersonActor = {
  kind: 'person'
  accountId: string
  sessionId: string
  name: string
  role: Role
  customerId: string | null
  temperatureUnit: 'C' | 'F'
}

export type SystemActor = { kind: 'system'; name: string }

export type Actor = PersonActor | SystemActor

/** The system, named by what it is doing ("sealing", "set-up"). */
export function systemActor(name: string): SystemActor {
  return { kind: 'system', name }
}
