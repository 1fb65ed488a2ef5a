import { TZDate } from '@date-fns/tz'
import { addDays, format, startOfDay } from 'date-fns'

/** A day of the site, from its midnight until the next: 23 or 25 h long when the clocks change. */
export type DayBounds = { fromAt: Date; untilAt: Date }

/** The day ("2027-03-14") that an instant belongs to in a zone. */
export function dayOf(at: Date, zone: string): string {
  return format(new TZDate(at.getTime(), zone), 'yyyy-MM-dd')
}

/** @throws RangeError when the text is no day */
export function dayBounds(day: string, zone: string): DayBounds {
  const [year, month, date] = day.split('-').map(Number)
  if (year === undefined || month === undefined || date === undefined) throw new RangeError('day')
  const from = startOfDay(new TZDate(year, month - 1, date, zone))
  if (Number.isNaN(from.getTime())) throw new RangeError('day')
  return { fromAt: new Date(from.getTime()), untilAt: new Date(addDays(from, 1).getTime()) }
}

/** The day so many days after (or before) another. */
export function shiftDay(day: string, days: number): string {
  return new Date(Date.parse(`${day}T00:00:00Z`) + days * 86_400_000).toISOString().slice(0, 10)
}
