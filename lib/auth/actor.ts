export const staffRoles = ['administrator', 'master cooper', 'chemist', 'toaster'] as const
export const roles = [...staffRoles, 'customer'] as const
export type Role = (typeof roles)[number]

/** Who does a verb: a signed-in person, an enrolled device with nobody at it, or the system itself (set-up, sealing). */
export type PersonActor = {
  kind: 'person'
  accountId: string
  sessionId: string
  name: string
  role: Role
  customerId: string | null
  temperatureUnit: 'C' | 'F'
  /** Set for a session that a PIN opened: only the fireside's work, at this device alone. */
  byPinAt?: { deviceId: string; deviceName: string } | undefined
}

export const deviceKinds = ['hearth', 'room', 'wall screen'] as const
export type DeviceKind = (typeof deviceKinds)[number]

/** A tablet or screen that an administrator enrolled, by its own cookie: it reads what stands in the room. */
export type DeviceActor = {
  kind: 'device'
  deviceId: string
  name: string
  place: DeviceKind
  /** Where it hangs; null for the whole room. */
  hearthNumber: number | null
  temperatureUnit: 'C' | 'F'
  /** After so long without a touch it signs the person out. */
  idleMinutes: number
}

export type SystemActor = { kind: 'system'; name: string }

export type Actor = PersonActor | DeviceActor | SystemActor

/** The system, named by what it is doing ("sealing", "set-up"). */
export function systemActor(name: string): SystemActor {
  return { kind: 'system', name }
}
