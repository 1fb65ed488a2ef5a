import type { FitCurve, FitPicture, FitResult } from '@/lib/markers/schema'
import { markerFamilies } from '@/lib/science/marker-families'
import type { FamilyId } from '@/lib/science/marker-families'
import type { FitOutcome, MarkerFit } from '@/lib/science/marker-fit'
import { fitMarker, predictMarker } from '@/lib/science/marker-fit'

const curvePoints = 60

/** Fits resolved rows. */
export function fitResults(family: FamilyId, results: readonly FitResult[]): FitOutcome {
  const keys = markerFamilies[family].predictors
  return fitMarker(
    family,
    results.map((result) => ({
      x: keys.map((key) => result[key] ?? Number.NaN),
      value: result.value,
      isBelowLimit: result.isBelowLimit,
    })),
  )
}

/** The fitted curve with its prediction interval from the lowest to the highest result; none for two predictors. */
export function fitCurve(fit: MarkerFit): FitCurve {
  const [range, second] = fit.ranges
  if (range === undefined || second !== undefined) return []
  // A dose is log-normal: steps are even in its logarithm, so that the low end is as smooth as the high one.
  const isLog = range.key === 'doseMin' && range.low > 0
  const at = (share: number) =>
    isLog ? range.low * (range.high / range.low) ** share : range.low + share * (range.high - range.low)
  return Array.from({ length: curvePoints + 1 }, (_, i) => {
    // The last point is the highest itself: a rounding beyond it would be outside.
    const x = i === 0 ? range.low : i === curvePoints ? range.high : at(i / curvePoints)
    const { low, value, high } = requirePrediction(fit, x)
    return { x, value, low, high }
  })
}

function requirePrediction(fit: MarkerFit, x: number) {
  const predicted = predictMarker(fit, [x])
  if (!predicted.ok) throw new Error(`A fit refused a point of its own range: ${predicted.refusal}`)
  return predicted
}

export function toFitPicture(fit: MarkerFit, results: readonly FitResult[]): FitPicture {
  return { fit, results: [...results], curve: fitCurve(fit) }
}
