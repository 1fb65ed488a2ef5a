import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { carbonMonoxideLine } from '@/lib/conditions/carbon-monoxide-line'
import { carbonMonoxideStanding } from '@/lib/conditions/exposure-standing'
import { readExposurePoints } from '@/lib/conditions/read-exposure-points'
import { dayBounds, dayOf } from '@/lib/site/site-day'
import { forkEm } from '@/lib/db/orm'
import { now } from '@/lib/runtime'
import { currentSite } from '@/lib/site/current-site'

/** What today's record says of carbon monoxide, for who is about to light a fire. */
export async function getCarbonMonoxideLine(actor: Actor): Promise<string> {
  requirePermission(actor, 'conditions:read')
  const em = await forkEm()
  const { timeZone, room } = await currentSite(em)
  const at = now()
  const { fromAt, untilAt } = dayBounds(dayOf(at, timeZone), timeZone)
  const points = await readExposurePoints(em, fromAt, untilAt)
  return carbonMonoxideLine(carbonMonoxideStanding(points, room.exposure, at.getTime()), timeZone)
}
