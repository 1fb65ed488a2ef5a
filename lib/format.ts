import { TZDate } from '@date-fns/tz'
import { format } from 'date-fns'
import {
  celsiusDifferenceFromF,
  celsiusFromF,
  fahrenheitDifferenceFromC,
  fahrenheitFromC,
} from '@/lib/science/temperature'

/**
 * How quantities are written for a person. Pure; temperatures come in °C, durations in seconds, instants
 * as UTC. Figures and their unit are held together by a no-break space. A real minus sign (U+2212) is used.
 */

export type TemperatureUnit = 'C' | 'F'

const NO_BREAK_SPACE = '\u00a0'
const MINUS = '\u2212'

/** °C to the person's unit. */
export function toShownTemp(tempC: number, unit: TemperatureUnit): number {
  return unit === 'F' ? fahrenheitFromC(tempC) : tempC
}

/** The person's unit to °C, the inverse of {@link toShownTemp}. */
export function fromShownTemp(shown: number, unit: TemperatureUnit): number {
  return unit === 'F' ? celsiusFromF(shown) : shown
}

/** A difference (band, spread, deviation, °C/min) to the person's unit; the 32 does not belong to it. */
export function toShownDifference(differenceC: number, unit: TemperatureUnit): number {
  return unit === 'F' ? fahrenheitDifferenceFromC(differenceC) : differenceC
}

/** The inverse of {@link toShownDifference}. */
export function fromShownDifference(shown: number, unit: TemperatureUnit): number {
  return unit === 'F' ? celsiusDifferenceFromF(shown) : shown
}

/** "°C" or "°F". */
export function unitName(unit: TemperatureUnit): string {
  return unit === 'F' ? '°F' : '°C'
}

/** A number with a fixed count of decimals and a true minus; never "−0". */
export function formatNumber(value: number, decimals = 0): string {
  const fixed = Math.abs(value).toFixed(decimals)
  return value < 0 && Number(fixed) !== 0 ? MINUS + fixed : fixed
}

/** A number with its sign, "+0.8", "−3", and "0" without one. */
export function formatSigned(value: number, decimals = 0): string {
  const text = formatNumber(value, decimals)
  return Number(Math.abs(value).toFixed(decimals)) !== 0 && value > 0 ? `+${text}` : text
}

/** "184 °C" or "363 °F". */
export function formatTemp(tempC: number, unit: TemperatureUnit, decimals = 0): string {
  return `${formatNumber(toShownTemp(tempC, unit), decimals)}${NO_BREAK_SPACE}${unitName(unit)}`
}

/** "184°": an axis tick or a figure whose unit stands nearby. */
export function formatTempBare(tempC: number, unit: TemperatureUnit, decimals = 0): string {
  return `${formatNumber(toShownTemp(tempC, unit), decimals)}°`
}

/** "7 °C" or "13 °F" (12.6): a difference, without the 32. */
export function formatTempDifference(differenceC: number, unit: TemperatureUnit, decimals = 0): string {
  return `${formatNumber(toShownDifference(differenceC, unit), decimals)}${NO_BREAK_SPACE}${unitName(unit)}`
}

/** "3 above plan", "25 below plan", "on plan", by the figure a person would read. */
export function formatFromPlan(differenceC: number, unit: TemperatureUnit): string {
  const shown = Math.round(toShownDifference(differenceC, unit))
  if (shown === 0) return 'on plan'
  return `${Math.abs(shown)} ${shown > 0 ? 'above' : 'below'} plan`
}

/** A climb rate, "+0.8°/min". */
export function formatClimb(climbCPerMin: number, unit: TemperatureUnit): string {
  return `${formatSigned(toShownDifference(climbCPerMin, unit), 1)}°/min`
}

/** A duration as a clock would show it: "0:42", "11:20", "1:05:00". Whole seconds, rounded down. */
export function formatClock(durationS: number): string {
  const whole = Math.floor(Math.abs(durationS))
  const sign = durationS < 0 && whole > 0 ? MINUS : ''
  const seconds = String(whole % 60).padStart(2, '0')
  const minutes = Math.floor(whole / 60) % 60
  const hours = Math.floor(whole / 3600)
  return (
    sign + (hours > 0 ? `${hours}:${String(minutes).padStart(2, '0')}:${seconds}` : `${minutes}:${seconds}`)
  )
}

/** A duration in minutes without idle decimals: "12 min", "26.2 min". */
export function formatMinutes(durationS: number): string {
  return `${formatNumber(Math.round(durationS / 6) / 10, Math.round(durationS / 6) % 10 === 0 ? 0 : 1)}${NO_BREAK_SPACE}min`
}

/** How long ago in words: "42 s", "3 min", "2 h", "5 days". */
export function formatAge(ageS: number): string {
  const whole = Math.max(0, Math.floor(ageS))
  if (whole < 120) return `${whole}${NO_BREAK_SPACE}s`
  if (whole < 7_200) return `${Math.floor(whole / 60)}${NO_BREAK_SPACE}min`
  if (whole < 172_800) return `${Math.floor(whole / 3_600)}${NO_BREAK_SPACE}h`
  return `${Math.floor(whole / 86_400)}${NO_BREAK_SPACE}days`
}

/**
 * The figure of a dose, in minutes at the reference temperature: two significant figures below 10, three
 * from 10, whole from 100, since its interval is seldom tighter than a tenth of it.
 */
export function formatDoseFigure(equivalentMin: number): string {
  if (equivalentMin <= 0) return '0'
  if (equivalentMin < 0.005) return 'under 0.01'
  if (equivalentMin < 0.995) return equivalentMin.toFixed(2)
  return equivalentMin < 99.95 ? equivalentMin.toFixed(1) : equivalentMin.toFixed(0)
}

/** "15.2 min at 200 °C (13.9 to 16.6)"; the range is the dose's k = 2 interval. */
export function formatDose(
  equivalentMin: number,
  range: { lowMin: number; highMin: number } | null,
  refTempC: number,
  unit: TemperatureUnit,
): string {
  const figure = `${formatDoseFigure(equivalentMin)}${NO_BREAK_SPACE}min at ${formatTemp(refTempC, unit)}`
  return range === null ? figure : `${figure} (${formatDoseRange(range)})`
}

/** "13.9 to 16.6". */
export function formatDoseRange(range: { lowMin: number; highMin: number }): string {
  return `${formatDoseFigure(range.lowMin)} to ${formatDoseFigure(range.highMin)}`
}

/** "36 %" from 0.36; what is not nought but rounds to it says so ("under 1 %"), and likewise at the top. */
export function formatPercent(fraction: number, decimals = 0): string {
  const percent = fraction * 100
  const step = 10 ** -decimals
  if (percent > 0 && percent < step / 2) return `under ${step}${NO_BREAK_SPACE}%`
  if (percent < 100 && percent >= 100 - step / 2)
    return `over ${formatNumber(100 - step, decimals)}${NO_BREAK_SPACE}%`
  return `${formatNumber(percent, decimals)}${NO_BREAK_SPACE}%`
}

export type InstantStyle = 'time' | 'seconds' | 'day' | 'date' | 'dateTime'

const instantPatterns: Record<InstantStyle, string> = {
  time: 'HH:mm',
  seconds: 'HH:mm:ss',
  day: 'd MMMM',
  date: 'd MMMM yyyy',
  dateTime: 'd MMMM yyyy, HH:mm',
}

/**
 * An instant in the site's time zone (IANA name).
 * @throws RangeError when the instant is not a date.
 */
export function formatInstant(
  at: Date | string | number,
  zone: string,
  style: InstantStyle = 'dateTime',
): string {
  const instant = new Date(at)
  if (Number.isNaN(instant.getTime())) throw new RangeError('at')
  return format(new TZDate(instant.getTime(), zone), instantPatterns[style])
}

/** A count with its noun: "1 barrel", "14 barrels". */
export function formatCount(count: number, one: string, many = `${one}s`): string {
  return `${count} ${count === 1 ? one : many}`
}

/**
 * What a person typed, as a number, or null. Decimal comma and point both serve; a true minus, a plus and
 * spaces are taken; a thousands mark is not, because it cannot be told from a decimal mark.
 */
export function parseDecimal(typed: string): number | null {
  const plain = typed
    .replace(/[\s\u00a0]/g, '')
    .replace(MINUS, '-')
    .replace(',', '.')
  return /^[+-]?(\d+\.?\d*|\.\d+)$/.test(plain) ? Number(plain) : null
}

/**
 * What a person typed as a length of time, in seconds, or null: "11:20" is minutes and seconds, "1:05:00"
 * hours too, "12" or "12,5" is minutes.
 */
export function parseDuration(typed: string): number | null {
  const clock = /^(?:(\d+):)?(\d{1,3}):([0-5]\d)$/.exec(typed.trim())
  if (clock !== null) return Number(clock[1] ?? 0) * 3_600 + Number(clock[2]) * 60 + Number(clock[3])
  const minutes = parseDecimal(typed)
  return minutes === null || minutes < 0 ? null : minutes * 60
}

/** The same words with a capital first, where they begin a sentence. */
export function capitalize(words: string): string {
  return words.charAt(0).toUpperCase() + words.slice(1)
}
