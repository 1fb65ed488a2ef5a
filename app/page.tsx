import { redirect } from 'next/navigation'
import { homeOf } from '@/components/shell/navigation'
import { pageActor, pageDevice, requirePageActor } from '@/lib/auth/page-actor'
import { deviceHome } from '@/lib/devices/device-home'

/** Off to where this person's work begins; an enrolled device with nobody signed in, to its own place. */
export default async function StartPage() {
  const [person, device] = await Promise.all([pageActor(), pageDevice()])
  if (device !== null && (person === null || person.byPinAt !== undefined)) redirect(await deviceHome(device))
  const actor = await requirePageActor()
  redirect(homeOf(actor.role))
}
