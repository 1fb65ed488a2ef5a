import type { EntityManager } from '@mikro-orm/postgresql'
import { insertAlarmMove } from '@/lib/alarms/insert-alarm-move'
import { lockAlarms } from '@/lib/alarms/lock-alarms'
import { readAlarmStandings } from '@/lib/alarms/read-alarm-standings'

/** Suppresses by design what is still on when a firing ends, in the transaction that ends it. */
export async function endFiringAlarms(em: EntityManager, firingId: string, at: Date): Promise<void> {
  await lockAlarms(em, firingId)
  for (const standing of await readAlarmStandings(em, firingId)) {
    if (standing.state === 'suppressed') continue
    await insertAlarmMove(em, {
      firingId,
      kind: standing.kind,
      subject: standing.subject,
      occurrenceId: standing.occurrenceId,
      from: standing.state,
      to: 'suppressed',
      atMs: at.getTime(),
      words: standing.words,
      value: null,
      limit: null,
      reason: 'The firing has ended.',
      accountId: null,
      shelvedUntilMs: null,
    })
  }
}
