import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { readFiringAir } from '@/lib/conditions/read-firing-air'
import type { FiringAir } from '@/lib/conditions/schema'
import { dayOf } from '@/lib/site/site-day'
import { forkEm } from '@/lib/db/orm'
import { requireReadableFiring } from '@/lib/firings/may-read-firing'
import { readFiring } from '@/lib/firings/read-firing'
import { currentSite } from '@/lib/site/current-site'

/** The air that stood around a firing, by the site's rule; null before it has begun. */
export async function getFiringAir(actor: Actor, input: { id: string }): Promise<FiringAir | null> {
  requirePermission(actor, 'conditions:read')
  const em = await forkEm()
  const firing = await readFiring(em, input.id)
  requireReadableFiring(actor, firing)
  const at = firing.toastAt ?? firing.preheatAt
  if (at === null) return null
  const site = await currentSite(em)
  const air = (await readFiringAir(em, site, [firing.id])).get(firing.id)
  return { day: dayOf(new Date(at), site.timeZone), room: air?.room ?? null, yard: air?.yard ?? null }
}
