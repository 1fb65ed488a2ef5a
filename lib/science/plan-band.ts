import { requireFinite, requireNotNegative } from './domain'
import { ruleset1 } from './score-ruleset'

/** A stage as its band needs it: where it begins and ends, °C, its length, and the recipe's ± °C. */
export type BandedStage = {
  kind: 'ramp' | 'hold'
  startTempC: number
  endTempC: number
  durationS: number
  bandC: number
}

/**
 * Half-width of a stage's band, °C, the same above and below the plan: the one source for bench, fireside and score.
 * On a hold the recipe's ± °C; on a ramp the wider of that and the ramp's own line moved by ±2 min along time, so that
 * being a little early or late on a steep ramp is no fault (SCIENCE §5): max(±°C, 2 min · |climb|). A line moved along
 * time never leaves the ramp's two ends, so a ramp of 2 min or less (a step is one of none) has its rise.
 *
 * @param rampBandMin how far along time, min, from the ruleset
 * @throws RangeError for a value that is not finite, or a length, band or time below 0
 */
export function bandHalfWidthC(stage: BandedStage, rampBandMin: number = ruleset1.rampBandMin): number {
  requireNotNegative('bandC', stage.bandC)
  requireFinite('startTempC', stage.startTempC)
  requireFinite('endTempC', stage.endTempC)
  const minutes = requireNotNegative('durationS', stage.durationS) / 60
  requireNotNegative('rampBandMin', rampBandMin)
  if (stage.kind === 'hold') return stage.bandC
  const riseC = Math.abs(stage.endTempC - stage.startTempC)
  const alongTimeC = minutes > rampBandMin ? (riseC / minutes) * rampBandMin : riseC
  return Math.max(stage.bandC, alongTimeC)
}
