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

/** A substance in the air beside the limit that holds for it, both in one unit. */
export type MixturePart = { concentration: number; limit: number }

/**
 * Index of several substances that act alike: Σ concentration/limit. Above 1 the mixture is over its limit, though each
 * substance may be under its own. 29 CFR 1910.1000(d)(2).
 *
 * @throws RangeError for no parts, a concentration below 0 or a limit not above 0, or one that is not finite
 */
export function mixtureIndex(parts: readonly MixturePart[]): number {
  if (parts.length === 0) throw new RangeError('parts must hold at least one substance')
  return parts.reduce(
    (sum, part, i) =>
      sum +
      requireNotNegative(`parts[${i}].concentration`, part.concentration) /
        requirePositive(`parts[${i}].limit`, part.limit),
    0,
  )
}

/** Molar mass of carbon monoxide, g/mol. */
export const CARBON_MONOXIDE_MOLAR_MASS_G_PER_MOL = 28.01

/** Litres that a mole of gas fills at 25 °C and 760 mmHg, for which air limits are written (OSHA Table Z-1, note a). */
const MOLAR_VOLUME_L = 24.45

/**
 * A gas's concentration by mass, mg/m³, from its parts by volume: ppm · molar mass/24.45, at 25 °C and 760 mmHg.
 *
 * @throws RangeError for a concentration below 0 or a molar mass not above 0, or one that is not finite
 */
export function mgPerM3FromPpm(ppm: number, molarMassGPerMol: number): number {
  return (
    (requireNotNegative('ppm', ppm) * requirePositive('molarMassGPerMol', molarMassGPerMol)) / MOLAR_VOLUME_L
  )
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
 * Wet-bulb globe temperature in the sun, °C: 0.7·Tnw + 0.2·Tg + 0.1·Ta (ISO 7243). For the yard.
 *
 * @param tnwC natural wet-bulb temperature, °C
 * @param tgC globe temperature, °C
 * @param taC air temperature, °C
 * @throws RangeError when one of them is not finite
 */
export function wbgtOutdoorC(tnwC: number, tgC: number, taC: number): number {
  return 0.7 * requireFinite('tnwC', tnwC) + 0.2 * requireFinite('tgC', tgC) + 0.1 * requireFinite('taC', taC)
}

/** A part of an hour or two at one wet-bulb globe temperature: a place of work or of rest. */
export type WbgtSegment = { wbgtC: number; minutes: number }

/**
 * Time-weighted wet-bulb globe temperature, °C: Σ WBGTᵢ·tᵢ/Σ tᵢ, over 60 min of steady work or 120 min of work by turns
 * (ISO 7243; OSHA Technical Manual III:4).
 *
 * @throws RangeError for no segments, no time in all, a negative time, or a value that is not finite
 */
export function timeWeightedWbgtC(segments: readonly WbgtSegment[]): number {
  if (segments.length === 0) throw new RangeError('segments must hold at least one segment')
  let sumCMinutes = 0
  let sumMinutes = 0
  segments.forEach((segment, i) => {
    const minutes = requireNotNegative(`segments[${i}].minutes`, segment.minutes)
    sumCMinutes += requireFinite(`segments[${i}].wbgtC`, segment.wbgtC) * minutes
    sumMinutes += minutes
  })
  if (sumMinutes === 0) throw new RangeError('segments must hold some minutes')
  return sumCMinutes / sumMinutes
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
