import { requirePositive, requireWhole } from './domain'
import type { Estimate } from './estimate'
import { medianInterval } from './median-interval'

/**
 * What the last firings had in common, for whoever fires the next: a median of deviations that is sure enough to be
 * said, or nothing.
 */

/** One curve on its way up, s and °C; null is no reading. */
export type RisingCurve = { timeS: ArrayLike<number>; tempC: ArrayLike<number | null> }

/** The first moment at which the curve stands at `tempC` or above, straight between readings, s; null when never. */
export function firstReachS({ timeS, tempC: temps }: RisingCurve, tempC: number): number | null {
  let before: { timeS: number; tempC: number } | null = null
  for (let i = 0; i < timeS.length; i += 1) {
    const at = timeS[i]
    const now = temps[i] ?? null
    if (at === undefined || now === null || Number.isNaN(now)) continue
    if (now >= tempC) {
      if (before === null) return at
      return before.timeS + ((tempC - before.tempC) / (now - before.tempC)) * (at - before.timeS)
    }
    before = { timeS: at, tempC: now }
  }
  return null
}

/** The temperature that a plan is timed to: 150 °C, or the highest ten that it passes by 5 °C or more. */
export function milestoneTempC(planMaxTempC: number): number {
  return Math.min(150, Math.floor((planMaxTempC - 5) / 10) * 10)
}

export type CommonDeviation = Estimate & { n: number }

/** From how many on something is said, how sure it must be (two-sided), and how small is not worth a word. */
export type CommonRule = { leastCount: number; confidence: number; leastDeviation: number }

/** With 5 values no interval of a median is surer than 93.75 %, hence 90 % (judgement). */
export const MINUTES_RULE: CommonRule = { leastCount: 5, confidence: 0.9, leastDeviation: 1 }
/** log10 of dose: 0.04 is a tenth of it (judgement). */
export const DOSE_RULE: CommonRule = { leastCount: 5, confidence: 0.9, leastDeviation: 0.04 }

/**
 * The median of the deviations when there are enough of them, its interval leaves out 0 and it is large enough to be
 * worth a word; null otherwise.
 *
 * @throws RangeError for a deviation that is not finite or a rule outside its domain
 */
export function commonDeviation(deviations: readonly number[], rule: CommonRule): CommonDeviation | null {
  requireWhole('leastCount', rule.leastCount, 1)
  requirePositive('leastDeviation', rule.leastDeviation)
  if (deviations.length < rule.leastCount) return null
  const interval = medianInterval(deviations, rule.confidence)
  if (interval === null || Math.abs(interval.value) < rule.leastDeviation) return null
  if (interval.low <= 0 && interval.high >= 0) return null
  return { ...interval, n: deviations.length }
}
