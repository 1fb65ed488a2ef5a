import type { FiringReadings, FiringSeries } from '@/lib/ingest/firing-readings'
import type { SignalRules } from '@/lib/science/signal-trouble'
import { checkCurve, hasLongRun } from '@/lib/science/signal-trouble'

type Curve = { timeS: Float64Array; tempC: Float64Array }

/** In s since 1970, as the live hub takes them: the same arithmetic gives the same verdicts. */
function curveOf(series: FiringSeries): Curve {
  return { timeS: series.atMs.map((at) => at / 1000), tempC: series.tempC }
}

/**
 * A firing's wood curves with NaN where a reading was stuck or jumped, as the fireside took them. The coals say
 * whether a probe that stood still was stuck; without them the other wood probe does. Raw readings stay as they are.
 */
export function checkReadings(readings: FiringReadings, rules: SignalRules): FiringReadings {
  if (!rules.areChecked) return readings
  const by = (role: FiringSeries['role']) => readings.series.find((series) => series.role === role)
  const coals = by('coals')
  return {
    ...readings,
    series: readings.series.map((series) => {
      if (series.role === 'coals') return series
      const witness = coals ?? by(series.role === 'lead' ? 'opposite' : 'lead')
      const checked = checkCurve(curveOf(series), witness === undefined ? null : curveOf(witness), rules)
      return { ...series, tempC: checked.tempC }
    }),
  }
}

/** True when a wood probe stood still for so long that the coals have to be read to judge it. */
export function needsCoals(readings: FiringReadings, rules: SignalRules): boolean {
  return rules.areChecked && readings.series.some((series) => hasLongRun(curveOf(series), rules))
}
