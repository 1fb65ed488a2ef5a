import type { DeviceActor, DeviceKind, PersonActor } from '@/lib/auth/actor'

/** The enrolled tablet or screen that shows this, as its pages need it. */
export type DeviceView = {
  name: string
  kind: DeviceKind
  hearthNumber: number | null
  idleMinutes: number
}

/** Who is signed in, as the fireside needs it. */
export type PersonView = { id: string; name: string }

/** Who and where, for the pages of the room. Null device: an ordinary browser; null person: nobody at the device. */
export type AtTheFire = { person: PersonView | null; device: DeviceView | null }

/** What the pages may be told of who reads them. */
export function atTheFire(actor: PersonActor | DeviceActor, device: DeviceActor | null): AtTheFire {
  return {
    person: actor.kind === 'person' ? { id: actor.accountId, name: actor.name } : null,
    device:
      device === null
        ? null
        : {
            name: device.name,
            kind: device.place,
            hearthNumber: device.hearthNumber,
            idleMinutes: device.idleMinutes,
          },
  }
}
