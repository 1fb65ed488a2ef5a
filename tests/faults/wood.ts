import { emfMv } from '@/lib/science/thermocouple'

/** The wood of the suite swings once in this time, and is under the dose's base where a swing begins. */
export const swingMs = 40_000

/**
 * 90 to 210 °C, 90 at every whole swing since 1970, so that a firing that begins and ends there has no dose at its
 * edges. The opposite probe is 3 °C cooler, the coals far hotter; noise of some 0.3 °C tells readings apart.
 */
export function woodTempC(trueMs: number, channel: number, noise: number): number {
  const swing = 150 - 60 * Math.cos((2 * Math.PI * trueMs) / swingMs)
  const place = channel === 0 ? 0 : channel === 1 ? -3 : 300 + 20 * channel
  return swing + place + 0.6 * (noise - 0.5)
}

/** What a type K thermocouple says of it, rounded as it is kept. */
export function emfOf(tempC: number, coldJunctionC: number): { microvolts: number; coldJunctionC: number } {
  const cold = Math.round(coldJunctionC * 100) / 100
  return {
    microvolts: Math.round(10_000 * (emfMv('K', tempC) - emfMv('K', cold))) / 10,
    coldJunctionC: cold,
  }
}
