import { formatClock, formatInstant } from '@/lib/format'
import type { FiringState } from '@/lib/live/events'
import type { MarkQueue } from './fireside-mark-queue'
import { isCut } from './fireside-reading'
import type { TopLineProps } from './fireside-top-line'
import { splitAlarmWords } from './fireside-top-line'

/** One alarm of one firing; seen once it is taken note of. */
export function alarmKey(alarm: NonNullable<FiringState['alarm']>): string {
  return `${alarm.sinceMs} ${alarm.level}`
}

/** The one line across the top: that this screen is cut off, else the alarm, else a mark that was refused, or none. */
export function topLineOf(input: {
  state: FiringState | null
  queue: MarkQueue
  /** The server's sentence when it let nobody in: signed out, not allowed. */
  refusal: string | null
  seenAlarm: string | null
  nowMs: number
  zone: string
}): (TopLineProps & { about: 'connection' | 'alarm' | 'mark' }) | null {
  const { state, queue, nowMs } = input
  if (input.refusal !== null) {
    return line('connection', {
      headline: 'Not connected.',
      instruction: input.refusal,
      age: '',
      level: 'amber',
    })
  }
  if (isCut(state, nowMs) && state !== null) return cutLine(state, queue, nowMs, input.zone)
  const alarm = state?.alarm ?? null
  if (alarm !== null) {
    const age = formatClock((nowMs - alarm.sinceMs) / 1000)
    const isSeen = input.seenAlarm === alarmKey(alarm)
    return { about: 'alarm', ...splitAlarmWords(alarm.words), age, level: alarm.level, isSeen }
  }
  const refused = queue.find((queued) => queued.refusal !== null)
  if (refused === undefined) return null
  return line('mark', {
    headline: `${refused.mark.kind === 'undone' ? 'Undo' : capital(refused.mark.kind)} was not taken.`,
    instruction: refused.refusal ?? '',
    age: formatInstant(refused.mark.at, input.zone, 'time'),
    level: 'amber',
  })
}

function cutLine(state: FiringState, queue: MarkQueue, nowMs: number, zone: string) {
  const waiting = queue.filter((queued) => queued.refusal === null).length
  const marks =
    waiting === 0
      ? 'Go on marking: marks are kept here.'
      : `${waiting} ${waiting === 1 ? 'mark waits' : 'marks wait'} here and ${waiting === 1 ? 'is' : 'are'} sent once it is back.`
  const before = state.alarm === null ? '' : ` Before that: ${state.alarm.words}`
  return line('connection', {
    headline: `No connection since ${formatInstant(state.atMs, zone, 'time')}.`,
    instruction: `Figures are from then. ${marks}${before}`,
    age: formatClock((nowMs - state.atMs) / 1000),
    level: state.alarm?.level ?? 'amber',
  })
}

function line(about: 'connection' | 'mark', words: Omit<TopLineProps, 'isSeen'>) {
  return { about, isSeen: true, ...words }
}

export function capital(words: string): string {
  return words.charAt(0).toUpperCase() + words.slice(1)
}
