import type { TemperatureUnit } from '@/lib/format'
import { formatNumber, toShownDifference, toShownTemp } from '@/lib/format'

/** Fields that hold a difference or a rate, which is converted without the 32. */
const differenceFields = /(bandC|spreadC|climbMaximumCPerMin)$/

/** A field's sentence in the person's unit: the schema writes °C; "from 0 to 280 °C" becomes "from 32 to 536 °F". */
export function shownSentence(path: string, sentence: string, unit: TemperatureUnit): string {
  if (unit === 'C') return sentence
  return sentence.replaceAll(
    /(?:(-?[\d.]+) to )?(-?[\d.]+) °C( a minute)?/g,
    (_whole, low: string | undefined, high: string, rate: string | undefined) => {
      const isDifference = rate !== undefined || differenceFields.test(path)
      const shown = (typed: string) => {
        const value = (isDifference ? toShownDifference : toShownTemp)(Number(typed), unit)
        return formatNumber(value, Number.isInteger(Math.round(value * 10) / 10) ? 0 : 1)
      }
      return `${low === undefined ? '' : `${shown(low)} to `}${shown(high)} °F${rate ?? ''}`
    },
  )
}
