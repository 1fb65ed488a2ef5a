import { requireNumbers } from './domain'
import { log10FromOffset } from './dose-ratio'
import type { DoseModel } from './heat-dose'
import { chiSquareQuantile, mean, sampleSd } from './statistics'

/** Fewer paired placements than this say too little: with four, the interval reaches to 3.7 times the figure. */
export const leastPlacements = 5
/** Of the interval about the figure. */
const confidence = 0.95
/** Coverage factor of every interval in the product. */
const k = 2

/** What a site's repeat placements say about placing a probe once more at the same mount. */
export type Repeatability = {
  n: number
  /** Mean of the differences, °C: what sets the two places apart; it does not count. */
  meanC: number
  /** Sample standard deviation of one placement, °C. */
  sdC: number
  /** Half-width of one placement, k = 2, °C, and its 95 % interval. */
  halfWidthC: number
  halfWidthLowC: number
  halfWidthHighC: number
  /** The same as log10 of dose: ÷ z. */
  halfWidthLog10: number
  halfWidthLowLog10: number
  halfWidthHighLog10: number
}

/**
 * Repeatability of placing a probe, from n paired placements at steady heat. Each difference d = placed − reference
 * takes the room's own drift out; their sample standard deviation s is that of one placement (with the two readings'
 * scatter in it, so it is never flattering). Half-width 2·s (k = 2, SCIENCE §2); as a dose 2·s/z, since one °C all
 * along is 1/z in log10. Interval of s by the chi-square distribution with n − 1 degrees of freedom:
 * s·√((n − 1)/χ²(0.975)) to s·√((n − 1)/χ²(0.025)) (NIST/SEMATECH e-Handbook, 1.3.5.8 and 7.2.3.1).
 *
 * @param differencesC °C, one a placement
 * @param model whose z turns °C into log10 of dose
 * @throws RangeError for fewer than {@link leastPlacements}, one that is not finite, or differences that are all alike
 */
export function repeatabilityOf(differencesC: readonly number[], model: DoseModel): Repeatability {
  requireNumbers('differencesC', differencesC, leastPlacements)
  const n = differencesC.length
  const sdC = sampleSd(differencesC)
  if (sdC === 0) throw new RangeError('differencesC must not all be alike: read them more finely')
  const halfWidthC = k * sdC
  const df = n - 1
  const halfWidthLowC = halfWidthC * Math.sqrt(df / chiSquareQuantile((1 + confidence) / 2, df))
  const halfWidthHighC = halfWidthC * Math.sqrt(df / chiSquareQuantile((1 - confidence) / 2, df))
  return {
    n,
    meanC: mean(differencesC),
    sdC,
    halfWidthC,
    halfWidthLowC,
    halfWidthHighC,
    halfWidthLog10: log10FromOffset(model, halfWidthC),
    halfWidthLowLog10: log10FromOffset(model, halfWidthLowC),
    halfWidthHighLog10: log10FromOffset(model, halfWidthHighC),
  }
}
