import type { FiringSummary } from '@/lib/firings/schema'

export type SummedDose = {
  /** Firings in the sum, at least two. */
  count: number
  /** Firings that toasted and have no dose. */
  missingCount: number
  doseMin: number
  lowMin: number
  highMin: number
}

/**
 * The doses of a piece's firings added up, minutes at the reference temperature, lowest to lowest and highest to
 * highest: what shifts one probe's reading shifts every firing at that place. Null below two doses.
 */
export function summedDose(firings: readonly FiringSummary[]): SummedDose | null {
  const toasted = firings.filter((firing) => firing.toastAt !== null && firing.endedAt !== null)
  const doses = toasted.flatMap(({ score }) =>
    score === null || score.doseMinutes === null
      ? []
      : [
          {
            doseMin: score.doseMinutes,
            lowMin: score.doseLowMinutes ?? score.doseMinutes,
            highMin: score.doseHighMinutes ?? score.doseMinutes,
          },
        ],
  )
  if (doses.length < 2) return null
  const sumOf = (pick: (dose: (typeof doses)[number]) => number) =>
    doses.reduce((sum, dose) => sum + pick(dose), 0)
  return {
    count: doses.length,
    missingCount: toasted.length - doses.length,
    doseMin: sumOf((dose) => dose.doseMin),
    lowMin: sumOf((dose) => dose.lowMin),
    highMin: sumOf((dose) => dose.highMin),
  }
}
