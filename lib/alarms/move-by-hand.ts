import type { EntityManager } from '@mikro-orm/postgresql'
import type { AlarmHand, AlarmState } from '@/lib/alarms/alarm-states'
import { stateAfterHand } from '@/lib/alarms/alarm-states'
import type { AlarmKind } from '@/lib/alarms/alarm-kinds'
import { insertAlarmMove } from '@/lib/alarms/insert-alarm-move'
import { lockAlarms } from '@/lib/alarms/lock-alarms'
import type { AlarmDto } from '@/lib/alarms/schema'
import type { AlarmRow } from '@/lib/alarms/to-alarm'
import { alarmSelect, toAlarm } from '@/lib/alarms/to-alarm'
import type { PersonActor } from '@/lib/auth/actor'
import { queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { now } from '@/lib/runtime'

/** One coming of an alarm as it stands, held still until the transaction ends. */
export type HeldAlarm = {
  firingId: string
  isTrial: boolean
  kind: AlarmKind
  subject: string
  occurrenceId: string
  state: AlarmState
  words: string
}

type Row = {
  firing_id: string
  is_trial: boolean
  kind: AlarmKind
  subject: string
  to_state: AlarmState
  words: string
}

/** @throws AppError 'not found' */
export async function holdAlarm(em: EntityManager, occurrenceId: string): Promise<HeldAlarm> {
  const read = () =>
    queryRows<Row>(
      em,
      `select e.firing_id, f.is_trial, e.kind, e.subject, e.to_state, e.words
         from alarm_events e join firings f on f.id = e.firing_id
        where e.occurrence_id = ? order by e.id desc limit 1`,
      [occurrenceId],
    )
  const [found] = await read()
  if (found !== undefined) await lockAlarms(em, found.firing_id)
  const [row] = found === undefined ? [] : await read()
  if (row === undefined) throw new AppError('not found', 'There is no such alarm.')
  return {
    firingId: row.firing_id,
    isTrial: row.is_trial,
    kind: row.kind,
    subject: row.subject,
    occurrenceId,
    state: row.to_state,
    words: row.words,
  }
}

/**
 * Writes what a hand does to a held alarm.
 *
 * @throws AppError 'conflict' when it cannot be done as the alarm stands
 */
export async function moveByHand(
  em: EntityManager,
  person: PersonActor,
  alarm: HeldAlarm,
  hand: AlarmHand,
  more: { reason?: string; shelvedUntil?: Date } = {},
): Promise<void> {
  const to = stateAfterHand(alarm.state, hand)
  if (to === null) throw new AppError('conflict', refusals[hand](alarm.state))
  await insertAlarmMove(em, {
    firingId: alarm.firingId,
    kind: alarm.kind,
    subject: alarm.subject,
    occurrenceId: alarm.occurrenceId,
    from: alarm.state,
    to,
    atMs: now().getTime(),
    words: alarm.words,
    value: null,
    limit: null,
    reason: more.reason ?? null,
    accountId: person.accountId,
    shelvedUntilMs: more.shelvedUntil?.getTime() ?? null,
  })
}

const refusals: Record<AlarmHand, (state: AlarmState) => string> = {
  acknowledge: (state) =>
    state === 'shelved' ? 'This alarm is shelved. Take it back first.' : 'This alarm is over already.',
  shelve: (state) =>
    state === 'shelved' ? 'This alarm is shelved already.' : 'This alarm is over already. Nothing to shelve.',
  unshelve: () => 'This alarm is not shelved any more.',
}

/** @throws AppError 'not found' */
export async function readAlarm(em: EntityManager, occurrenceId: string): Promise<AlarmDto> {
  const [row] = await queryRows<AlarmRow>(
    em,
    `${alarmSelect} where e.from_state = 'normal' and e.occurrence_id = ?`,
    [occurrenceId],
  )
  if (row === undefined) throw new AppError('not found', 'There is no such alarm.')
  return toAlarm(row)
}
