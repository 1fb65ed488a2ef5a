import type { DeviceActor } from '@/lib/auth/actor'
import { listHearths } from '@/lib/probes/list-hearths'

/** Where a tablet begins: at its own hearth's firing while there is one, else in the room. */
export async function deviceHome(device: DeviceActor): Promise<string> {
  if (device.place === 'wall screen') return '/room/wall'
  if (device.hearthNumber === null) return '/room'
  const { items } = await listHearths(device)
  const own = items.find((hearth) => hearth.number === device.hearthNumber)
  return own?.live ? `/fireside/${own.live.firingId}` : '/room'
}
