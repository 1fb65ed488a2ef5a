import { holdAlarm, moveByHand, readAlarm } from '@/lib/alarms/move-by-hand'
import type { AlarmDto } from '@/lib/alarms/schema'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { notifyAlarmsChanged } from '@/lib/live/notify'

/**
 * Takes note of one coming of an alarm: "Seen". Who may fire may do it. A second hand on another screen is a success
 * that changes nothing.
 */
export async function acknowledgeAlarm(actor: Actor, input: { id: string }): Promise<AlarmDto> {
  requirePermission(actor, 'firings:run trial')
  const person = requirePerson(actor)
  const alarm = await inTransaction(async (em) => {
    const held = await holdAlarm(em, input.id)
    if (!held.isTrial) requirePermission(actor, 'firings:run')
    const before = await readAlarm(em, input.id)
    if (held.state === 'acknowledged' || (held.state === 'normal' && before.seen !== null)) return before
    await moveByHand(em, person, held, 'acknowledge')
    return readAlarm(em, input.id)
  })
  notifyAlarmsChanged(alarm.firingId)
  return alarm
}
