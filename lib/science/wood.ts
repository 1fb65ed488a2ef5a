import { requireFinite, requireNotNegative, requirePositive, requireWithin } from './domain'

/**
 * Properties of wood by the Wood Handbook (USDA Forest Products Laboratory, FPL-GTR-282, chapter 4). Moisture is in
 * percent of the oven-dry mass throughout.
 */

/**
 * Equilibrium moisture content, %, of wood in air: the Hailwood–Horrobin fit, Wood Handbook Eq. 4-5, SI coefficients,
 * within 0.06 of Table 4-2. M = 1800/W·[Kh/(1−Kh) + (K1Kh + 2K1K2K²h²)/(1 + K1Kh + K1K2K²h²)], h = RH/100.
 * Domain: 0–100 % relative humidity, −30…132.3 °C; the table spans −1.1…132 °C, and soon outside it the fit bends back.
 *
 * @throws RangeError outside the domain
 */
export function equilibriumMoisturePercent(tempC: number, relativeHumidityPercent: number): number {
  const t = requireWithin('tempC', tempC, -30, 132.3)
  const h = requireWithin('relativeHumidityPercent', relativeHumidityPercent, 0, 100) / 100
  const w = 349 + 1.29 * t + 0.0135 * t * t
  const k = 0.805 + 0.000736 * t - 0.00000273 * t * t
  const k1 = 6.27 - 0.00938 * t - 0.000303 * t * t
  const k2 = 1.91 + 0.0407 * t - 0.000293 * t * t
  const kh = k * h
  const monolayer = k1 * kh
  const bilayer = k1 * k2 * kh * kh
  return (1800 / w) * (kh / (1 - kh) + (monolayer + 2 * bilayer) / (1 + monolayer + bilayer))
}

/** Heat capacity of water in the handbook's mixture rule, kJ/(kg·K). */
const WATER_HEAT_CAPACITY_KJ_PER_KG_K = 4.18

/**
 * Heat capacity of moist wood, J/(kg·K). Wood Handbook Eqs. 4-16a, 4-17, 4-18: cp0 = 0.1031 + 0.003867·T (kJ/(kg·K));
 * cp = (cp0 + 4.18·x/100)/(1 + x/100) + x·(−0.06191 + 2.36e-4·T − 1.33e-4·x), x in percent; dry wood has no
 * correction. Stated for 280–420 K and below fibre saturation; the correction for bound water is used as it stands.
 *
 * @throws RangeError when the temperature is not above 0 K, or the moisture is below 0 or above 100 %
 */
export function heatCapacityJPerKgK(tempK: number, moisturePercent: number): number {
  const t = requirePositive('tempK', tempK)
  const x = requireWithin('moisturePercent', moisturePercent, 0, 100)
  const dry = 0.1031 + 0.003867 * t
  const mixed = (dry + (WATER_HEAT_CAPACITY_KJ_PER_KG_K * x) / 100) / (1 + x / 100)
  const boundWater = x * (-0.06191 + 2.36e-4 * t - 1.33e-4 * x)
  return 1000 * (mixed + boundWater)
}

/** Above this moisture, %, the handbook's conductivity formula is not stated: mark a value made there. */
export const CONDUCTIVITY_MOISTURE_LIMIT_PERCENT = 25

/** Whether wood is so wet, % of dry mass, that its conductivity lies outside the handbook's formula. */
export function isConductivityOutsideFormula(moisturePercent: number): boolean {
  return moisturePercent >= CONDUCTIVITY_MOISTURE_LIMIT_PERCENT
}

/**
 * Thermal conductivity across the grain near 24 °C, W/(m·K): k = G·(0.1941 + 0.004064·M) + 0.01864. Wood Handbook
 * Eq. 4-15, G above 0.3 on the oven-dry mass and the volume at M, M below 25 %: above that the value is computed and
 * the caller marks it (`CONDUCTIVITY_MOISTURE_LIMIT_PERCENT`).
 *
 * @throws RangeError when G is not above 0 or the moisture is below 0 or not finite
 */
export function conductivityWPerMK(specificGravity: number, moisturePercent: number): number {
  requirePositive('specificGravity', specificGravity)
  requireNotNegative('moisturePercent', moisturePercent)
  return specificGravity * (0.1941 + 0.004064 * moisturePercent) + 0.01864
}

/**
 * Moisture content, %, by oven-drying: (wet − dry)/dry·100, on the dry mass (definition of ASTM D4442).
 *
 * @param wetMassG mass before drying, g, not below the dry mass
 * @param ovenDryMassG mass after drying, g, above 0
 * @throws RangeError when a mass is not finite, the dry mass is not above 0, or the wet mass is below it
 */
export function moisturePercent(wetMassG: number, ovenDryMassG: number): number {
  requireFinite('wetMassG', wetMassG)
  requirePositive('ovenDryMassG', ovenDryMassG)
  if (wetMassG < ovenDryMassG) {
    throw new RangeError(`wetMassG must not be below ovenDryMassG: ${wetMassG} under ${ovenDryMassG}`)
  }
  return ((wetMassG - ovenDryMassG) / ovenDryMassG) * 100
}

/**
 * Density of moist wood, kg/m³: 1000·G·(1 + M/100), G on the volume at M. Wood Handbook chapter 4.
 *
 * @throws RangeError when G is not above 0 or the moisture is below 0 or not finite
 */
export function densityKgPerM3(specificGravity: number, moisturePercent: number): number {
  requirePositive('specificGravity', specificGravity)
  requireNotNegative('moisturePercent', moisturePercent)
  return 1000 * specificGravity * (1 + moisturePercent / 100)
}
