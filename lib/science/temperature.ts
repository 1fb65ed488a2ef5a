/**
 * The two scales in which people read temperatures. F = 1.8·C + 32, exact by definition of the scales; a difference,
 * a band or a climb rate has no 32 in it. Values that are not finite pass through: NaN stays no reading.
 */

const FAHRENHEIT_PER_CELSIUS = 1.8
const FAHRENHEIT_AT_ZERO_CELSIUS = 32

/** °C → °F. */
export function fahrenheitFromC(tempC: number): number {
  return tempC * FAHRENHEIT_PER_CELSIUS + FAHRENHEIT_AT_ZERO_CELSIUS
}

/** °F → °C, the inverse of `fahrenheitFromC`. */
export function celsiusFromF(tempF: number): number {
  return (tempF - FAHRENHEIT_AT_ZERO_CELSIUS) / FAHRENHEIT_PER_CELSIUS
}

/** A difference in °C → the same difference in °F. */
export function fahrenheitDifferenceFromC(differenceC: number): number {
  return differenceC * FAHRENHEIT_PER_CELSIUS
}

/** A difference in °F → the same difference in °C. */
export function celsiusDifferenceFromF(differenceF: number): number {
  return differenceF / FAHRENHEIT_PER_CELSIUS
}
