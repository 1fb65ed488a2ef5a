import { ZERO_CELSIUS_K } from './constants'
import { requireWithin } from './domain'

/**
 * Saturation line of water, region 4 of IAPWS-IF97 (IAPWS R7-97(2012), Table 34), and the pressure of the standard
 * atmosphere: what a boiling-point check of a probe needs. Use the station's own pressure, never one reduced to sea
 * level: 1 hPa is 0.028 °C.
 */

/** n1 to n10 of IAPWS R7-97(2012), Table 34. */
const N1 = 0.11670521452767e4
const N2 = -0.72421316703206e6
const N3 = -0.17073846940092e2
const N4 = 0.1202082470247e5
const N5 = -0.32325550322333e7
const N6 = 0.1491510861353e2
const N7 = -0.48232657361591e4
const N8 = 0.40511340542057e6
const N9 = -0.23855557567849
const N10 = 0.65017534844798e3

/** The saturation line runs from the melting point at atmospheric pressure to the critical point. */
const LOWEST_TEMP_K = ZERO_CELSIUS_K
const CRITICAL_TEMP_K = 647.096
const CRITICAL_PRESSURE_MPA = 22.064

/** IAPWS R7-97(2012), Eq. 30, for a temperature already in its domain. */
function pressureAt(tempK: number): number {
  const theta = tempK + N9 / (tempK - N10)
  const a = theta * theta + N1 * theta + N2
  const b = N3 * theta * theta + N4 * theta + N5
  const c = N6 * theta * theta + N7 * theta + N8
  return ((2 * c) / (-b + Math.sqrt(b * b - 4 * a * c))) ** 4
}

const LOWEST_PRESSURE_MPA = pressureAt(LOWEST_TEMP_K)
/** Eq. 30 meets the critical pressure to the last digit only: the higher of the two is let in. */
const HIGHEST_PRESSURE_MPA = Math.max(CRITICAL_PRESSURE_MPA, pressureAt(CRITICAL_TEMP_K))

/**
 * Saturation pressure of water, MPa, from its temperature, K. IAPWS R7-97(2012), Eq. 30. Domain 273.15…647.096 K.
 *
 * @throws RangeError outside the domain
 */
export function saturationPressureMpa(tempK: number): number {
  return pressureAt(requireWithin('tempK', tempK, LOWEST_TEMP_K, CRITICAL_TEMP_K))
}

/**
 * Saturation temperature of water, K, from its pressure, MPa. IAPWS R7-97(2012), Eq. 31. Domain 611.213 Pa…22.064 MPa.
 *
 * @throws RangeError outside the domain
 */
export function saturationTempK(pressureMpa: number): number {
  return temperatureAt(requireWithin('pressureMpa', pressureMpa, LOWEST_PRESSURE_MPA, HIGHEST_PRESSURE_MPA))
}

function temperatureAt(pressureMpa: number): number {
  const beta = pressureMpa ** 0.25
  const e = beta * beta + N3 * beta + N6
  const f = N1 * beta * beta + N4 * beta + N7
  const g = N2 * beta * beta + N5 * beta + N8
  const d = (2 * g) / (-f - Math.sqrt(f * f - 4 * e * g))
  return (N10 + d - Math.sqrt((N10 + d) ** 2 - 4 * (N9 + N10 * d))) / 2
}

const MPA_PER_HPA = 1e-4

/**
 * Boiling point of water, °C, at a station pressure, hPa. IAPWS R7-97(2012), Eq. 31; 99.974 °C at 1013.25 hPa.
 * Domain 6.112…220,640 hPa.
 *
 * @throws RangeError outside the domain
 */
export function boilingPointC(pressureHpa: number): number {
  requireWithin(
    'pressureHpa',
    pressureHpa,
    LOWEST_PRESSURE_MPA / MPA_PER_HPA,
    HIGHEST_PRESSURE_MPA / MPA_PER_HPA,
  )
  return temperatureAt(pressureHpa * MPA_PER_HPA) - ZERO_CELSIUS_K
}

/** ISO 2533:1975 (ICAO Doc 7488), troposphere. */
const SEA_LEVEL_PRESSURE_PA = 101_325
const SEA_LEVEL_TEMP_K = 288.15
const LAPSE_K_PER_M = 0.0065
const STANDARD_GRAVITY_M_PER_S2 = 9.80665
const AIR_CONSTANT_J_PER_KG_K = 287.05287
const BAROMETRIC_EXPONENT = STANDARD_GRAVITY_M_PER_S2 / (LAPSE_K_PER_M * AIR_CONSTANT_J_PER_KG_K)

/**
 * Pressure of the standard atmosphere, Pa, at a geopotential altitude, m: p0·(1 − 0.0065·h/288.15)^5.2559 (ISO 2533,
 * ICAO Doc 7488, troposphere). Domain −2,000…11,000 m. A day's true pressure differs by up to some 50 hPa.
 *
 * @throws RangeError outside the domain
 */
export function standardPressurePa(altitudeM: number): number {
  requireWithin('altitudeM', altitudeM, -2000, 11_000)
  return SEA_LEVEL_PRESSURE_PA * (1 - (LAPSE_K_PER_M * altitudeM) / SEA_LEVEL_TEMP_K) ** BAROMETRIC_EXPONENT
}
