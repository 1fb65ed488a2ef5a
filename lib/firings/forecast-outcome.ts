import type { Plan } from '@/lib/recipes/plan-of'
import type { RecipeContent } from '@/lib/recipes/schema'
import { forecastDose, planFrom } from '@/lib/science/forecast'
import { isForecastRight } from '@/lib/science/forecast-record'
import type { FilledSeries } from '@/lib/science/gaps'
import { fillGaps } from '@/lib/science/gaps'
import { createDoseAccumulator } from '@/lib/science/heat-dose'
import { sameMountHalfLog10 } from '@/lib/science/same-mount'
import type { ScoreInput } from '@/lib/science/score-types'

/** A forecast that came true within so many minutes was right. */
export const FORECAST_WITHIN_MIN = 1.5

export type ForecastOutcomeFacts = {
  /** Half of the plan's toast, s from the toast start: the stated moment. */
  atS: number
  forecastMinutes: number
  earliestMinutes: number
  latestMinutes: number | null
  reachedMinutes: number | null
  restedMinutes: number
  withinMinutes: number
  isWithin: boolean | null
}

/**
 * What the fireside's forecast said at half of the plan's toast, made again from the stored readings up to then by the
 * same computation, and what came of it. Null when nothing was forecast then: the rest came first, the lead probe gave
 * no reading, or the target was reached already or out of reach.
 */
export function forecastOutcomeOf(
  input: ScoreInput,
  plan: Plan,
  content: Pick<RecipeContent, 'doseToleranceLog10' | 'limits'>,
): ForecastOutcomeFacts | null {
  const restS = input.firing.restStartS
  const atS = plan.totalS / 2
  if (restS === null || restS <= atS) return null
  const filled = fillGaps(input.lead, { fromS: 0, toS: restS }, input.rules.gaps)
  if (filled === null || filled.gaps.some((gap) => gap.startS <= atS && atS <= gap.endS)) return null
  const walk = walkDose(filled, input, plan.targetDoseMin, atS)
  if (walk.tempCAtS === null) return null
  const { plan: line } = forecastDose({
    doseMin: walk.doseMinAtS,
    tempC: walk.tempCAtS,
    climbCPerMin: 0,
    planRemaining: planFrom(plan.points, atS),
    targetDoseMin: plan.targetDoseMin,
    toleranceLog10: content.doseToleranceLog10,
    woodMaxTempC: content.limits.woodMaximumC,
    climbMaxCPerMin: content.limits.climbMaximumCPerMin,
    intervalLog10: sameMountHalfLog10(input.rules),
    model: input.rules.dose,
    rules: input.rules.forecast,
  })
  const { minutesToTarget, earliestMinutes, latestMinutes } = line
  if (minutesToTarget === null || minutesToTarget === 0 || earliestMinutes === null) return null
  const outcome = {
    forecastMinutes: minutesToTarget,
    reachedMinutes: walk.reachedS === null ? null : (walk.reachedS - atS) / 60,
    restedMinutes: (restS - atS) / 60,
    withinMinutes: FORECAST_WITHIN_MIN,
  }
  return { atS, earliestMinutes, latestMinutes, ...outcome, isWithin: isForecastRight(outcome) }
}

type Walk = { doseMinAtS: number; tempCAtS: number | null; reachedS: number | null }

/** Dose and temperature at a moment, and when the target was reached, straight between readings. */
function walkDose(filled: FilledSeries, input: ScoreInput, targetDoseMin: number, atS: number): Walk {
  const dose = createDoseAccumulator(input.rules.dose)
  const walk: Walk = { doseMinAtS: 0, tempCAtS: null, reachedS: null }
  let before = { timeS: 0, doseMin: 0 }
  for (let i = 0; i < filled.timeS.length && walk.reachedS === null; i += 1) {
    const timeS = filled.timeS[i] ?? 0
    const tempC = filled.tempC[i] ?? 0
    const doseMin = dose.add(timeS, tempC)
    if (timeS <= atS) Object.assign(walk, { doseMinAtS: doseMin, tempCAtS: tempC })
    if (doseMin >= targetDoseMin) {
      const share =
        doseMin === before.doseMin ? 1 : (targetDoseMin - before.doseMin) / (doseMin - before.doseMin)
      walk.reachedS = before.timeS + share * (timeS - before.timeS)
    }
    before = { timeS, doseMin }
  }
  return walk
}
