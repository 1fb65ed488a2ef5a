import type { CarbonMonoxideDay } from '@/lib/conditions/schema'
import { formatCount, formatInstant, formatNumber } from '@/lib/format'
import { alarmDecides, noCarbonMonoxideToday } from '@/lib/conditions/missing-words'

/** Today's carbon monoxide in one line for the start list: a reminder, which says each time what decides. */
export function carbonMonoxideLine(today: readonly CarbonMonoxideDay[], zone: string): string {
  const worst = today.reduce<CarbonMonoxideDay | null>(
    (most, one) => (most === null || one.mean8hPpm > most.mean8hPpm ? one : most),
    null,
  )
  if (worst === null) return noCarbonMonoxideToday
  const count = formatCount(
    today.reduce((sum, one) => sum + one.readingCount, 0),
    'CO reading',
  )
  const latest = today.map((one) => one.latest.at).sort()
  const at = formatInstant(latest.at(-1) ?? worst.latest.at, zone, 'time')
  const peakPpm = Math.max(...today.map((one) => one.peakPpm))
  const over = today.some((one) => one.over.length > 0) ? ' A limit was passed.' : ''
  return `${count} today, the last at ${at}: 8-hour mean ${formatNumber(worst.mean8hPpm)} ppm, peak ${formatNumber(peakPpm)} ppm.${over} ${alarmDecides}`
}
