import type { EntityManager } from '@mikro-orm/postgresql'
import type { AlarmDto } from '@/lib/alarms/schema'
import type { AlarmRow } from '@/lib/alarms/to-alarm'
import { alarmSelect, toAlarm } from '@/lib/alarms/to-alarm'
import { queryRows } from '@/lib/db/orm'

/** The alarms of a firing in the order in which they came, reminders too; unauthorised. */
export async function readFiringAlarms(em: EntityManager, firingId: string): Promise<AlarmDto[]> {
  const rows = await queryRows<AlarmRow>(
    em,
    `${alarmSelect} where e.from_state = 'normal' and e.firing_id = ? order by e.id`,
    [firingId],
  )
  return rows.map(toAlarm)
}
