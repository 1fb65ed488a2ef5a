import { requireNotNegative } from './domain'

/**
 * Half-width of the comparison in one probe check, °C, k = 2: twice the scatter while the probe settled, the
 * resolution as a rectangle (a/√12, so 2a/√12), and what the reference has beyond an ice bath's or a barometer's own
 * (`referenceUncertaintyC` adds those), as squares (JCGM 100:2008, 4.3.7 and 5.1.2).
 *
 * @param referenceC half-width of a block's or thermometer's own, or of a pressure that was not read, k = 2, °C
 * @param settledSdC sample standard deviation of the readings, °C; 0 when they were read by eye
 * @param resolutionC smallest step of the reading, °C
 * @throws RangeError for a figure that is negative or not finite
 */
export function checkUncertaintyC(referenceC: number, settledSdC: number, resolutionC: number): number {
  requireNotNegative('referenceC', referenceC)
  requireNotNegative('settledSdC', settledSdC)
  requireNotNegative('resolutionC', resolutionC)
  return Math.hypot(referenceC, 2 * settledSdC, (2 * resolutionC) / Math.sqrt(12))
}
