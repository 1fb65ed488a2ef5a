import { requireFinite, requireNotNegative, requirePositive } from './domain'
import type { Estimate } from './estimate'
import { proportionInterval } from './proportion-interval'

/** How right a forecast was. All minutes count from the moment at which it was made. */
export type ForecastOutcome = {
  forecastMinutes: number
  /** Until the dose reached its target; null when the rest came first. */
  reachedMinutes: number | null
  restedMinutes: number
  /** How far off counts as right. */
  withinMinutes: number
}

/**
 * True when the target was reached within so many minutes of the forecast. Without reaching it: false when it should
 * have been reached well before the rest, null when the rest came before anybody could tell.
 *
 * @throws RangeError for a value outside its domain
 */
export function isForecastRight(outcome: ForecastOutcome): boolean | null {
  const forecast = requireFinite('forecastMinutes', outcome.forecastMinutes)
  const within = requirePositive('withinMinutes', outcome.withinMinutes)
  const rested = requireNotNegative('restedMinutes', outcome.restedMinutes)
  if (outcome.reachedMinutes === null) return forecast + within < rested ? false : null
  return Math.abs(requireNotNegative('reachedMinutes', outcome.reachedMinutes) - forecast) <= within
}

export type ForecastRecord = { n: number; rightCount: number; share: Estimate }

/** The record of those that could be told, with the exact interval of its share; null below `leastCount`. */
export function forecastRecord(outcomes: readonly (boolean | null)[], leastCount = 5): ForecastRecord | null {
  const told = outcomes.filter((outcome) => outcome !== null)
  if (told.length < leastCount || told.length === 0) return null
  const rightCount = told.filter((outcome) => outcome).length
  return { n: told.length, rightCount, share: proportionInterval(rightCount, told.length) }
}
