import type { TemperatureUnit } from '@/lib/format'
import { formatNumber, toShownDifference, toShownTemp } from '@/lib/format'

/**
 * An alarm's words in the person's unit. They are kept in °C: "215 °C" is a temperature, "8 °C apart" and
 * "8 °C above" a difference, "22 °C a minute" a rate.
 */
export function shownAlarmWords(words: string, unit: TemperatureUnit): string {
  if (unit === 'C') return words
  return words.replaceAll(/(\d+(?:\.\d+)?) °C( apart| above| below| a minute)?/g, (_whole, figure, after) => {
    const convert = after === undefined ? toShownTemp : toShownDifference
    return `${formatNumber(convert(Number(figure), unit))} °F${String(after ?? '')}`
  })
}

/** An alarm's words as headline and instruction: its first sentence, and the rest. */
export function splitAlarmWords(words: string): { headline: string; instruction: string } {
  const end = words.indexOf('. ')
  if (end < 0) return { headline: words, instruction: '' }
  return { headline: words.slice(0, end + 1), instruction: words.slice(end + 2) }
}
