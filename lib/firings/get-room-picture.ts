import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm } from '@/lib/db/orm'
import { firingStaveHistory } from '@/lib/firings/firing-stave'
import { readFiring } from '@/lib/firings/read-firing'
import { scoreInputOf } from '@/lib/firings/score-input'
import type { Sketch } from '@/lib/firings/sketch'
import { bandOf, makeSketch } from '@/lib/firings/sketch'
import { toastReadings } from '@/lib/firings/toast-readings'
import { hubDoor } from '@/lib/live/hub-door'
import { planOf } from '@/lib/recipes/plan-of'
import { siteOfVersion } from '@/lib/site/current-site'

/** Columns of the stave before it is thinned to a sketch's. */
const woodColumns = 60

/**
 * The small pair of a live firing, drawn from the same sketch as a list's row: computed here, so that the room's page
 * carries neither plan nor stave model; by the hub where one holds the firing, else from the stored readings. The plan
 * alone before the toast; null when the firing has no recipe copy yet.
 */
export async function getRoomPicture(
  actor: Actor,
  input: { id: string },
): Promise<{ sketch: Sketch | null }> {
  requirePermission(actor, 'firings:follow')
  const held = hubDoor().current?.sketchOf(input.id) ?? null
  if (held !== null) return { sketch: held }
  const em = await forkEm()
  const firing = await readFiring(em, input.id)
  if (firing.recipeCopy === null) return { sketch: null }
  const { rules } = await siteOfVersion(em, firing.siteSettingsVersion ?? 1)
  const plan = planOf(firing.recipeCopy.content, rules.dose)
  const planAlone = { timeS: [], tempC: [], band: bandOf(plan), wood: null }
  if (firing.toastAt === null) return { sketch: planAlone }
  const readings = await toastReadings(em, firing.id, firing.toastAt, rules.signals)
  const score = scoreInputOf(firing, readings, rules)
  if (score === null) return { sketch: planAlone }
  const timeS = Array.from(score.lead.timeS)
  const first = timeS.findIndex((at) => at >= 0)
  if (first < 0) return { sketch: planAlone }
  const lead = { timeS: timeS.slice(first), tempC: Array.from(score.lead.tempC).slice(first) }
  return { sketch: makeSketch(plan, lead, firingStaveHistory(firing, score, rules, woodColumns)) }
}
