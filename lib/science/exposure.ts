import { requireFinite, requireNotNegative, requirePositive } from './domain'

/**
 * Carbon monoxide and heat limits, kept as data with their source because they change by country. A reminder and a
 * record, not a safety device: an 8-hour mean is no alarm.
 */

/** Limits for carbon monoxide in air, ppm. OSHA 29 CFR 1910.1000 Table Z-1; NIOSH Pocket Guide; ACGIH TLV list. */
export const CARBON_MONOXIDE_LIMITS_PPM = {
  oshaPelTwa: 50,
  nioshRelTwa: 35,
  nioshCeiling: 200,
  acgihTlvTwa: 25,
  immediatelyDangerous: 1200,
} as const

/** A part of a shift at one mean concentration. */
export type ExposureSegment = { ppm: number; hours: number }

/** The divisor of the time-weighted mean is 8 h whatever the shift's length: 29 CFR 1910.1000(d)(1)(i). */
const TWA_HOURS = 8

/**
 * Eight-hour time-weighted mean concentration, ppm: Σ cᵢ·tᵢ / 8. 29 CFR 1910.1000(d)(1).
 *
 * @throws RangeError for no segments, or a concentration or time that is not finite or below 0
 */
export function timeWeighted8hPpm(segments: readonly ExposureSegment[]): number {
  if (segments.length === 0) throw new RangeError('segments must hold at least one segment')
  let sumPpmHours = 0
  segments.forEach((segment, i) => {
    sumPpmHours +=
      requireNotNegative(`segments[${i}].ppm`, segment.ppm) *
      requireNotNegative(`segments[${i}].hours`, segment.hours)
  })
  return sumPpmHours / TWA_HOURS
}

/**
 * Wet-bulb globe temperature without sun, °C: 0.7·Tnw + 0.3·Tg (ISO 7243).
 *
 * @param tnwC natural wet-bulb temperature, °C
 * @param tgC globe temperature, °C
 * @throws RangeError when either is not finite
 */
export function wbgtIndoorC(tnwC: number, tgC: number): number {
  return 0.7 * requireFinite('tnwC', tnwC) + 0.3 * requireFinite('tgC', tgC)
}

/**
 * NIOSH heat limits as WBGT, °C, from the metabolic rate, W: alert limit for people not used to heat, RAL = 59.9 −
 * 14.1·log10 M; exposure limit for people used to it, REL = 56.7 − 11.5·log10 M. NIOSH 2016-106 (formula from memory).
 *
 * @throws RangeError when the rate is not finite or not above 0
 */
export function nioshLimitsC(metabolicRateW: number): { ral: number; rel: number } {
  const logRate = Math.log10(requirePositive('metabolicRateW', metabolicRateW))
  return { ral: 59.9 - 14.1 * logRate, rel: 56.7 - 11.5 * logRate }
}
