import { TZDate } from '@date-fns/tz'

/** The instant of a time of day ("13:41") on a day ("2027-03-14") in the site's zone; null when the time is none. */
export function siteInstant(day: string, time: string, zone: string): string | null {
  const [year, month, date] = day.split('-').map(Number)
  const found = /^([01]?\d|2[0-3])[:.]([0-5]\d)$/.exec(time.trim())
  if (found === null || year === undefined || month === undefined || date === undefined) return null
  const at = new TZDate(year, month - 1, date, Number(found[1]), Number(found[2]), zone)
  return Number.isNaN(at.getTime()) ? null : new Date(at.getTime()).toISOString()
}
