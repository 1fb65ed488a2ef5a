import { alarmCatalog } from '@/lib/alarms/alarm-kinds'
import { holdAlarm, moveByHand, readAlarm } from '@/lib/alarms/move-by-hand'
import type { AlarmDto } from '@/lib/alarms/schema'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { notifyAlarmsChanged } from '@/lib/live/notify'

/** Takes a shelved alarm back before its time; it has to be seen again. */
export async function unshelveAlarm(actor: Actor, input: { id: string }): Promise<AlarmDto> {
  requirePermission(actor, 'alarms:shelve')
  const person = requirePerson(actor)
  const alarm = await inTransaction(async (em) => {
    const held = await holdAlarm(em, input.id)
    await moveByHand(em, person, held, 'unshelve')
    await writeAuditEntry(
      em,
      actor,
      'alarm.taken back',
      { type: 'firing', id: held.firingId },
      { alarm: alarmCatalog[held.kind].name, occurrence: held.occurrenceId },
    )
    return readAlarm(em, input.id)
  })
  notifyAlarmsChanged(alarm.firingId)
  return alarm
}
