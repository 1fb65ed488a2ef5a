import type { FiringState } from '@/lib/live/events'
import type { FiringFacts } from '@/lib/live/firing-facts'
import type { Signal } from '@/lib/live/live-signals'
import type { Advice, Forecast } from '@/lib/science/forecast'
import { forecastDose, planFrom } from '@/lib/science/forecast'

export type ForecastFacts = {
  facts: FiringFacts
  lead: Signal | undefined
  doseMin: number
  climbCPerMin: number | null
  intervalLog10: number
  atMs: number
}

/** The forecast in words, while toasting; when the reading is not fresh it says why there is none. */
export function liveForecast(input: ForecastFacts): FiringState['forecast'] {
  const { facts, lead, atMs } = input
  if (facts.state !== 'toasting' || facts.toastMs === null || lead === undefined) return null
  if (lead.condition !== 'live' || lead.tempC === null) {
    const age = lead.lastAtMs === null ? '' : `, ${Math.round((atMs - lead.lastAtMs) / 1000)} s ago`
    const sentence = `No forecast while ${lead.probeName} has no reading.`
    return { sentence, advice: `Dose stands at the last reading${age}.`, ask: null, ...noMinutes }
  }
  const { content, plan, rules } = facts
  const { plan: line, advice } = forecastDose({
    doseMin: input.doseMin,
    tempC: lead.tempC,
    climbCPerMin: input.climbCPerMin ?? 0,
    planRemaining: planFrom(plan.points, (atMs - facts.toastMs) / 1000),
    targetDoseMin: plan.targetDoseMin,
    toleranceLog10: content.doseToleranceLog10,
    woodMaxTempC: content.limits.woodMaximumC,
    climbMaxCPerMin: content.limits.climbMaximumCPerMin,
    intervalLog10: input.intervalLog10,
    model: rules.dose,
    rules: rules.forecast,
  })
  return {
    sentence: targetSentence(line),
    advice: advice.sentence,
    ask: askOf(advice),
    minutesToTargetLow: line.earliestMinutes,
    minutesToTargetHigh: line.latestMinutes,
  }
}

/** What hands could do; that nothing more is to be done, or that nothing helps, asks nothing of them. */
function askOf({ kind, minutes }: Advice): NonNullable<FiringState['forecast']>['ask'] {
  return kind === 'no extra time' || kind === 'out of reach' ? null : { kind, minutes }
}

const noMinutes = { minutesToTargetLow: null, minutesToTargetHigh: null }

function targetSentence(line: Forecast['plan']): string {
  if (line.minutesToTarget === 0) return 'The target dose is reached.'
  if (line.minutesToTarget === null || line.earliestMinutes === null) {
    return 'On the plan from here the target is not reached.'
  }
  const low = Math.floor(line.earliestMinutes)
  if (line.latestMinutes === null) return `On target in ${Math.max(1, low)} min at the earliest.`
  const high = Math.ceil(line.latestMinutes)
  return high - low <= 1 ? `On target in ${high} min.` : `On target in ${low} to ${high} min.`
}
