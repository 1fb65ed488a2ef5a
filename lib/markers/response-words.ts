import { formatCount } from '@/lib/format'
import type { MarkerResponseDto } from '@/lib/markers/schema'
import { markerFamilies, predictors } from '@/lib/science/marker-families'
import { threeDigits } from '@/lib/science/three-digits'

/** "Response 3, a fit: rise, then fall (formation and loss)". */
export function responseName(response: MarkerResponseDto): string {
  return response.kind === 'formula'
    ? `Formula ${response.formula}`
    : `Fit: ${markerFamilies[response.picture.fit.family].name.replace(/^./, (letter) => letter.toLowerCase())}`
}

/** What a response rests on: "14 barrels, dose 10 to 70 min, 3 below the limit"; a formula rests on no data. */
export function restsOn(response: MarkerResponseDto): string {
  if (response.kind === 'formula') return 'a formula: no data behind it, and so no interval'
  const { fit, results } = response.picture
  const barrels = results.filter((result) => result.serial !== null).length
  const typed = results.length - barrels
  const parts = [
    ...(barrels > 0 ? [formatCount(barrels, 'barrel')] : []),
    ...(typed > 0 ? [formatCount(typed, 'typed dose')] : []),
    ...fit.ranges.map((range) => {
      const { name, unit } = predictors[range.key]
      return `${name} ${threeDigits(range.low)} to ${threeDigits(range.high)} ${unit}`
    }),
    ...(fit.belowLimitCount > 0 ? [`${fit.belowLimitCount} below the limit`] : []),
  ]
  return parts.join(', ')
}
