import { log10FromOffset } from './dose-ratio'
import type { SiteRules } from './site-rules'

/**
 * Half-width of the site's same-mount interval without gaps, log10 of dose, k = 2 (SCIENCE §2): the repeatability of
 * placing the probe, and, once that is measured, the drift between two checks as a dose (drift ÷ z), as squares. The
 * assumed figure covers drift. A scored dose takes drift by shifting its own curve instead (`doseInterval`).
 */
export function sameMountHalfLog10(rules: Pick<SiteRules, 'errors' | 'dose'>): number {
  const { sameMountLog10, isSameMountAssumed, driftC } = rules.errors
  return isSameMountAssumed ? sameMountLog10 : Math.hypot(sameMountLog10, log10FromOffset(rules.dose, driftC))
}
