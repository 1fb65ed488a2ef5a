import { formatNumber, toShownDifference, unitName } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import { percentAboveFromLog10, percentBelowFromLog10 } from '@/lib/science/dose-ratio'

/** "± 0.053 in log10 of dose": a half-width as the bench and the score use it. */
export function log10Words(log10: number): string {
  return `± ${formatNumber(log10, 3)}`
}

/** "13 % more or 11 % less dose" of a half-width in log10. */
export function doseShareWords(log10: number): string {
  const more = formatNumber(percentAboveFromLog10(log10), 0)
  const less = formatNumber(percentBelowFromLog10(log10), 0)
  return `${more} % more or ${less} % less dose`
}

/** "± 1.8 °C" */
export function halfWidthWords(halfC: number, unit: TemperatureUnit): string {
  return `± ${formatNumber(toShownDifference(halfC, unit), 1)}\u00a0${unitName(unit)}`
}
