import { requireFinite, requireNotNegative, requirePositive } from './domain'
import type { DoseModel } from './heat-dose'

/**
 * Ratios of doses. Doses are compared as log10 (SCIENCE §2) and shown as percent or as times; these few lines are
 * the only place where one becomes the other.
 */

/** log10 of a ratio of doses → the ratio, 10^x. 0 is 1. */
export function ratioFromLog10(log10Ratio: number): number {
  return 10 ** log10Ratio
}

/**
 * log10 of a ratio → how far above 1 it lies, %: 100·(10^x − 1). 0.12 is 31.8 %.
 *
 * @param log10Half a half-width or distance, log10, 0 or more
 */
export function percentAboveFromLog10(log10Half: number): number {
  return (ratioFromLog10(log10Half) - 1) * 100
}

/**
 * log10 of a half-width → how far below 1 its lower end lies, %: 100·(1 − 10^−x). 0.12 is 24.1 %.
 *
 * @param log10Half a half-width or distance, log10, 0 or more
 */
export function percentBelowFromLog10(log10Half: number): number {
  return (1 - ratioFromLog10(-log10Half)) * 100
}

/** log10 by which a dose changes when every temperature of its curve is off by `offsetC`, base aside: d/z. */
export function log10FromOffset(model: DoseModel, offsetC: number): number {
  return requireFinite('offsetC', offsetC) / requirePositive('zC', model.zC)
}

/** The same as a factor, 10^(d/z): +1 °C all along at z 34 is 1.070. */
export function doseFactorFromOffset(model: DoseModel, offsetC: number): number {
  return Math.exp(Math.LN10 * log10FromOffset(model, offsetC))
}

/** How much dose one degree Celsius all along is worth, %: 100·(10^(1/z) − 1); 7.0 at z 34. */
export function percentOfDosePerC(model: DoseModel): number {
  return percentAboveFromLog10(log10FromOffset(model, 1))
}

/**
 * The doses between which a tolerance holds, minutes: target·10^−t and target·10^t; both 0 about no dose at all.
 *
 * @throws RangeError for a target or a tolerance below 0
 */
export function toleranceBoundsMin(
  targetDoseMin: number,
  toleranceLog10: number,
): { lowMin: number; highMin: number } {
  requireNotNegative('targetDoseMin', targetDoseMin)
  requireNotNegative('toleranceLog10', toleranceLog10)
  return {
    lowMin: targetDoseMin * ratioFromLog10(-toleranceLog10),
    highMin: targetDoseMin * ratioFromLog10(toleranceLog10),
  }
}
