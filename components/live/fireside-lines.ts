import { capitalize } from '@/lib/format'
import { isSounding } from '@/lib/alarms/alarm-states'
import { shownAlarmWords, splitAlarmWords } from '@/lib/alarms/alarm-words'
import { formatClock, formatInstant } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import type { FiringState } from '@/lib/live/events'
import type { MarkQueue } from './fireside-mark-queue'
import { isCut } from './fireside-reading'
import type { TopLineProps } from './fireside-top-line'

export type ShownAlarm = FiringState['alarms'][number]

/**
 * The alarms that are on, with what this screen has just taken note of counted as seen: the unseen first, each group
 * with the gravest first, as the server sends them.
 */
export function soundingAlarms(state: FiringState | null, seenHere: ReadonlySet<string>): ShownAlarm[] {
  const alarms = (state?.alarms ?? []).filter((alarm) => isSounding(alarm.state))
  const isUnseen = (alarm: ShownAlarm) => alarm.mayAcknowledge && !seenHere.has(alarm.id)
  const unseen = alarms.filter(isUnseen)
  // One that had ended and has been seen now is over.
  const seen = alarms.filter((alarm) => !isUnseen(alarm) && alarm.state !== 'returned unacknowledged')
  return [...unseen, ...seen.map((alarm) => ({ ...alarm, mayAcknowledge: false }))]
}

/** Those that are on, and behind them the shelved ones. */
export function listedAlarms(state: FiringState | null, seenHere: ReadonlySet<string>): ShownAlarm[] {
  const shelved = (state?.alarms ?? []).filter((alarm) => alarm.state === 'shelved')
  return [...soundingAlarms(state, seenHere), ...shelved]
}

/** The one line across the top: that this screen is cut off, else the alarm, else a mark that was refused, or none. */
export function topLineOf(input: {
  state: FiringState | null
  queue: MarkQueue
  /** The server's sentence when it let nobody in: signed out, not allowed. */
  refusal: string | null
  /** Alarms by id that this screen has taken note of and the server may not have told back yet. */
  seenHere: ReadonlySet<string>
  unit: TemperatureUnit
  nowMs: number
  zone: string
}): (TopLineProps & { about: 'connection' | 'alarm' | 'mark'; alarmId: string | null }) | null {
  const { state, queue, nowMs } = input
  if (input.refusal !== null) {
    return line('connection', {
      headline: 'Not connected.',
      instruction: input.refusal,
      age: '',
      level: 'amber',
    })
  }
  if (isCut(state, nowMs) && state !== null) return cutLine(state, queue, nowMs, input)
  const [alarm, ...more] = soundingAlarms(state, input.seenHere)
  if (alarm !== undefined) {
    return {
      about: 'alarm',
      alarmId: alarm.id,
      ...splitAlarmWords(shownAlarmWords(alarm.words, input.unit)),
      age: formatClock((nowMs - alarm.sinceMs) / 1000),
      level: alarm.level,
      isSeen: !alarm.mayAcknowledge,
      moreCount: more.length,
    }
  }
  const refused = queue.find((queued) => queued.refusal !== null)
  if (refused === undefined) return null
  return line('mark', {
    headline: `${refused.mark.kind === 'undone' ? 'Undo' : capitalize(refused.mark.kind)} was not taken.`,
    instruction: refused.refusal ?? '',
    age: formatInstant(refused.mark.at, input.zone, 'time'),
    level: 'amber',
  })
}

function cutLine(
  state: FiringState,
  queue: MarkQueue,
  nowMs: number,
  { zone, unit }: { zone: string; unit: TemperatureUnit },
) {
  const waiting = queue.filter((queued) => queued.refusal === null).length
  const headline = `As of ${formatInstant(state.atMs, zone, 'seconds')}. Not live.`
  const marks =
    waiting === 0
      ? 'Go on marking: marks are kept here.'
      : `${waiting} ${waiting === 1 ? 'mark waits' : 'marks wait'} here and ${waiting === 1 ? 'is' : 'are'} sent once it is back.`
  const before = state.alarm === null ? '' : ` Before that: ${shownAlarmWords(state.alarm.words, unit)}`
  return line('connection', {
    headline,
    instruction: `No connection; the figures are from then. ${marks}${before}`,
    age: formatClock((nowMs - state.atMs) / 1000),
    level: state.alarm?.level ?? 'amber',
  })
}

function line(about: 'connection' | 'mark', words: Omit<TopLineProps, 'isSeen'>) {
  return { about, alarmId: null, isSeen: true, ...words }
}
