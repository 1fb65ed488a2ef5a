/** Readings of one probe. `tempC` NaN is no reading. Both as long; `timeS` rises, s from toast start. */
export type ReadingSeries = {
  timeS: ArrayLike<number>
  tempC: ArrayLike<number>
  /** Nominal time between readings, s. */
  spacingS: number
}

/** How a gap is treated: joined by a straight line; joined, with the interval widened; or nothing can be said. */
export type GapTreatment = 'interpolated' | 'widened' | 'incomplete'

/** `startS` and `endS` are the last reading before and the first after; `missingS` is the time for which readings were due. */
export type Gap = { startS: number; endS: number; missingS: number; treatment: GapTreatment }
