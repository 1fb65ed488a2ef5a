import { requireNotNegative, requirePositive } from './domain'

/**
 * Uncertainty of one probe check, °C, k = 2: the reference's own half-width, twice the scatter while it settled, and
 * the resolution as a rectangle (a/√12, so 2a/√12), as squares (JCGM 100:2008, 4.3.7 and 5.1.2).
 *
 * @param referenceC half-width of the reference, k = 2, °C
 * @param settledSdC sample standard deviation of the readings, °C; 0 when they were read by eye
 * @param resolutionC smallest step of the reading, °C
 * @throws RangeError for a reference that is not positive, or others that are negative
 */
export function checkUncertaintyC(referenceC: number, settledSdC: number, resolutionC: number): number {
  requirePositive('referenceC', referenceC)
  requireNotNegative('settledSdC', settledSdC)
  requireNotNegative('resolutionC', resolutionC)
  return Math.hypot(referenceC, 2 * settledSdC, (2 * resolutionC) / Math.sqrt(12))
}
