import { requireFinite, requireNotNegative } from './domain'

/** How far along time a ramp may be early or late and still be in its band (SCIENCE §5), minutes. */
export const RAMP_BAND_MINUTES = 2

/** A stage as its band needs it: where it begins and ends, °C, its length, and the recipe's ± °C. */
export type BandedStage = {
  kind: 'ramp' | 'hold'
  startTempC: number
  endTempC: number
  durationS: number
  bandC: number
}

/**
 * Half-width of a stage's band, °C, the same above and below the plan. On a hold the recipe's ± °C; on a ramp the
 * wider of that and the ramp's own line moved by 2 min along time: max(±°C, 2 min · |climb|), so that being a little
 * early or late on a steep ramp is no fault (SCIENCE §5). A ramp without length has no climb and keeps ± °C.
 *
 * @throws RangeError for a value that is not finite, or a length or band below 0
 */
export function bandHalfWidthC(stage: BandedStage): number {
  requireNotNegative('bandC', stage.bandC)
  requireFinite('startTempC', stage.startTempC)
  requireFinite('endTempC', stage.endTempC)
  requireNotNegative('durationS', stage.durationS)
  if (stage.kind === 'hold' || stage.durationS === 0) return stage.bandC
  const climbCPerMin = (stage.endTempC - stage.startTempC) / (stage.durationS / 60)
  return Math.max(stage.bandC, RAMP_BAND_MINUTES * Math.abs(climbCPerMin))
}
