import type * as z from 'zod'
import { alarmCatalog } from '@/lib/alarms/alarm-kinds'
import { holdAlarm, moveByHand, readAlarm } from '@/lib/alarms/move-by-hand'
import type { AlarmDto, shelveAlarmSchema } from '@/lib/alarms/schema'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { invalidField } from '@/lib/errors'
import { notifyAlarmsChanged } from '@/lib/live/notify'
import { now } from '@/lib/runtime'
import { currentSite } from '@/lib/site/current-site'

type Input = z.infer<typeof shelveAlarmSchema> & { id: string }

/** Puts an alarm away for some minutes, with a reason; it comes back by itself while what it says still holds. */
export async function shelveAlarm(actor: Actor, input: Input): Promise<AlarmDto> {
  requirePermission(actor, 'alarms:shelve')
  const person = requirePerson(actor)
  const alarm = await inTransaction(async (em) => {
    const { shelveAtMostMin } = (await currentSite(em)).rules.alarms
    if (input.minutes > shelveAtMostMin) {
      throw invalidField('minutes', `This site shelves an alarm for at most ${shelveAtMostMin} min.`)
    }
    const held = await holdAlarm(em, input.id)
    const shelvedUntil = new Date(now().getTime() + input.minutes * 60_000)
    await moveByHand(em, person, held, 'shelve', { reason: input.reason, shelvedUntil })
    await writeAuditEntry(
      em,
      actor,
      'alarm.shelved',
      { type: 'firing', id: held.firingId },
      {
        alarm: alarmCatalog[held.kind].name,
        occurrence: held.occurrenceId,
        minutes: input.minutes,
        reason: input.reason,
      },
    )
    return readAlarm(em, input.id)
  })
  notifyAlarmsChanged(alarm.firingId)
  return alarm
}
