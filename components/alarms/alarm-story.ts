import type { AlarmDto } from '@/lib/alarms/schema'
import { formatClock } from '@/lib/format'

/** What became of an alarm, in words: how long it stood, who saw it when, whether it was shelved or suppressed. */
export function alarmStory(alarm: AlarmDto): string[] {
  const cameMs = Date.parse(alarm.cameAt)
  const after = (at: string) => formatClock((Date.parse(at) - cameMs) / 1000)
  const parts: string[] = []
  if (alarm.overAt === null) parts.push(alarm.state === 'shelved' ? 'shelved now' : 'on now')
  else parts.push(`stood ${after(alarm.overAt)}`)
  if (alarm.seen !== null) parts.push(`seen by ${alarm.seen.by} after ${after(alarm.seen.at)}`)
  else if (alarm.state === 'unacknowledged' || alarm.state === 'returned unacknowledged')
    parts.push('not seen yet')
  if (alarm.shelf !== null) {
    const minutes = Math.round((Date.parse(alarm.shelf.until) - Date.parse(alarm.shelf.at)) / 60_000)
    parts.push(`shelved by ${alarm.shelf.by} for ${minutes} min: ${alarm.shelf.reason}`)
  }
  if (alarm.suppressedBy !== null) parts.push(`put away: ${alarm.suppressedBy}`)
  return parts
}

/** Capital at the start, parted by semicolons. */
export function storySentence(alarm: AlarmDto): string {
  const words = alarmStory(alarm).join('; ')
  return `${words.charAt(0).toUpperCase()}${words.slice(1)}`
}
