import type { EntityManager } from '@mikro-orm/postgresql'
import type { AlarmMove } from '@/lib/alarms/firing-alarms'
import { violatedConstraint } from '@/lib/db/database-errors'
import { queryRows } from '@/lib/db/orm'

export type KeptMove = AlarmMove & {
  firingId: string
  /** Whose hand it was; null for what the alarm did by itself. */
  accountId: string | null
  shelvedUntilMs: number | null
}

/** Writes one move down. The table itself refuses one that does not begin where the alarm stands. */
export async function insertAlarmMove(em: EntityManager, move: KeptMove): Promise<void> {
  await queryRows(
    em,
    `insert into alarm_events (firing_id, kind, subject, occurrence_id, from_state, to_state, at, account_id, words,
       value, limit_value, reason, shelved_until)
     values (?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?)`,
    [
      move.firingId,
      move.kind,
      move.subject,
      move.occurrenceId,
      move.from,
      move.to,
      new Date(move.atMs),
      move.accountId,
      move.words,
      move.value,
      move.limit,
      move.reason,
      move.shelvedUntilMs === null ? null : new Date(move.shelvedUntilMs),
    ],
  )
}

/** True when the alarm stood elsewhere by then: somebody was faster. */
export function isOutOfTurn(error: unknown): boolean {
  return violatedConstraint(error) === 'alarm_events_in_turn'
}
