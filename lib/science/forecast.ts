import { requireFinite, requireNotNegative, requirePositive } from './domain'
import type { CurvePoint, DoseModel } from './heat-dose'
import { createDoseAccumulator } from './heat-dose'
import type { SiteRules } from './site-rules'

/** What a forecast starts from. Times in minutes from now. */
export type ForecastInput = {
  /** Running dose since toast start, minutes at the reference temperature. */
  doseMin: number
  /** The fresh reading, °C. A stale one gives no forecast: the caller asks for none. */
  tempC: number
  /** Climb now, °C/min. */
  climbCPerMin: number
  /** The plan from this moment of it: `timeS` 0 is now, the last point is its end. One point: the plan is over. */
  planRemaining: readonly CurvePoint[]
  targetDoseMin: number
  /** The recipe's tolerance, log10 of dose. */
  toleranceLog10: number
  /** Wood maximum of the recipe, °C; null when it sets none. */
  woodMaxTempC: number | null
  climbMaxCPerMin: number | null
  /** Half-width of the same-mount interval of the dose, log10. */
  intervalLog10: number
  model: DoseModel
  rules: SiteRules['forecast']
}

/** One assumption followed to the target. Null minutes: the target is not reached within the horizon. */
export type ForecastLine = {
  /** Until the target dose, from now, min; 0 when it is reached. */
  minutesToTarget: number | null
  /** The same if the dose is really at the high and at the low end of its interval: earliest and latest. */
  earliestMinutes: number | null
  latestMinutes: number | null
  /** Dose at the plan's end, minutes at the reference temperature. */
  doseAtPlannedEndMin: number
}

export type AdviceKind = 'rest now' | 'rest early' | 'no extra time' | 'hold longer' | 'out of reach'

/** Advice, never control. `minutes`: how much longer, or how much sooner than planned; whole minutes. */
export type Advice = { kind: AdviceKind; minutes: number; sentence: string }

export type Forecast = {
  /** (a) the temperature held, (b) the present climb kept to the wood maximum, (c) the plan resumed. */
  held: ForecastLine
  climb: ForecastLine
  plan: ForecastLine
  minutesToPlannedEnd: number
  advice: Advice
}

/**
 * Time to the target dose under the three assumptions of SCIENCE §6, and one piece of advice made from the third
 * alone, so that it cannot contradict the line it stands beside.
 *
 * (c) takes the firing back onto the plan in a straight line over the rule's minutes, or slower when the recipe's
 * climb maximum asks it, then along the plan, then holding the plan's last temperature. The interval turns into
 * minutes by asking when the dose would reach the target if it were really at either end of it.
 *
 * @throws RangeError for a value that is not finite, a target or tolerance not above 0, or no point of the plan
 */
export function forecastDose(input: ForecastInput): Forecast {
  requireInput(input)
  const { tempC, planRemaining } = input
  const endS = planRemaining.at(-1)?.timeS ?? 0
  const horizonS = Math.max(endS, input.rules.horizonMin * 60)
  const held = [
    { timeS: 0, tempC },
    { timeS: horizonS, tempC },
  ]
  const planLine = followCurve(input, resumedPlan(input, horizonS), endS)
  return {
    held: followCurve(input, held, endS),
    climb: followCurve(input, climbingCurve(input, horizonS), endS),
    plan: planLine,
    minutesToPlannedEnd: endS / 60,
    advice: adviseFrom(input, planLine, endS / 60),
  }
}

function requireInput(input: ForecastInput): void {
  requireNotNegative('doseMin', input.doseMin)
  requireFinite('tempC', input.tempC)
  requireFinite('climbCPerMin', input.climbCPerMin)
  requirePositive('targetDoseMin', input.targetDoseMin)
  requirePositive('toleranceLog10', input.toleranceLog10)
  requireNotNegative('intervalLog10', input.intervalLog10)
  if (input.planRemaining.length === 0) throw new RangeError('planRemaining must hold at least one point')
  if (input.planRemaining[0]?.timeS !== 0) throw new RangeError('planRemaining must begin now, at timeS 0')
  input.planRemaining.forEach((point, i) => {
    requireFinite(`planRemaining[${i}].tempC`, point.tempC)
    requireNotNegative(`planRemaining[${i}].timeS`, point.timeS)
    const before = input.planRemaining[i - 1]
    if (before !== undefined && point.timeS < before.timeS) {
      throw new RangeError(`planRemaining[${i}].timeS must not fall: ${point.timeS} after ${before.timeS}`)
    }
  })
}

/** Present climb kept until the wood maximum, then held there; wood above it already is held. */
function climbingCurve(input: ForecastInput, horizonS: number): CurvePoint[] {
  const { tempC, climbCPerMin, woodMaxTempC } = input
  const start = { timeS: 0, tempC }
  if (climbCPerMin <= 0 || woodMaxTempC === null) {
    // Falling wood stops counting at the base; a rise without a maximum stops where the rate has any meaning left.
    const limitC = climbCPerMin > 0 ? Math.max(tempC, 400) : Math.min(tempC, 0)
    return towards(start, limitC, climbCPerMin, horizonS)
  }
  return towards(start, Math.max(tempC, woodMaxTempC), climbCPerMin, horizonS)
}

function towards(start: CurvePoint, limitC: number, climbCPerMin: number, horizonS: number): CurvePoint[] {
  const reachS = climbCPerMin === 0 ? horizonS : ((limitC - start.tempC) / climbCPerMin) * 60
  if (reachS >= horizonS) {
    return [start, { timeS: horizonS, tempC: start.tempC + (climbCPerMin * horizonS) / 60 }]
  }
  return [start, { timeS: reachS, tempC: limitC }, { timeS: horizonS, tempC: limitC }]
}

/** The plan resumed: the present difference from it fades in a straight line, then the plan, then its last held. */
function resumedPlan(input: ForecastInput, horizonS: number): CurvePoint[] {
  const { planRemaining, tempC, climbMaxCPerMin, rules } = input
  const first = planRemaining[0] ?? { timeS: 0, tempC }
  const last = planRemaining.at(-1) ?? first
  const offsetC = tempC - first.tempC
  const climbS =
    climbMaxCPerMin !== null && climbMaxCPerMin > 0 ? (Math.abs(offsetC) / climbMaxCPerMin) * 60 : 0
  const rejoinS = Math.max(rules.rejoinMin * 60, climbS)
  const curve = [...planRemaining]
  if (last.timeS < horizonS) curve.push({ timeS: horizonS, tempC: last.tempC })
  const rejoining: CurvePoint[] = []
  curve.forEach((point, i) => {
    const before = curve[i - 1]
    if (before !== undefined && before.timeS < rejoinS && point.timeS > rejoinS) {
      const share = (rejoinS - before.timeS) / (point.timeS - before.timeS)
      rejoining.push({ timeS: rejoinS, tempC: before.tempC + share * (point.tempC - before.tempC) })
    }
    const left = Math.max(0, 1 - point.timeS / rejoinS)
    rejoining.push({ timeS: point.timeS, tempC: point.tempC + offsetC * left })
  })
  return rejoining
}

/** Follows a curve that starts now with the running dose on it. */
function followCurve(input: ForecastInput, curve: readonly CurvePoint[], endS: number): ForecastLine {
  const { doseMin, targetDoseMin, intervalLog10 } = input
  const factor = 10 ** intervalLog10
  return {
    minutesToTarget: minutesUntil(input, curve, targetDoseMin),
    // Dose read off by a fixed factor stays off by it: the true dose reaches the target when the read one reaches this.
    earliestMinutes: minutesUntil(input, curve, targetDoseMin / factor),
    latestMinutes: minutesUntil(input, curve, targetDoseMin * factor),
    doseAtPlannedEndMin: doseMin + doseUpTo(input.model, curve, endS),
  }
}

function doseUpTo(model: DoseModel, curve: readonly CurvePoint[], endS: number): number {
  const dose = createDoseAccumulator(model)
  for (const point of cutAt(curve, endS)) dose.add(point.timeS, point.tempC)
  return dose.minutes
}

/** A curve up to a moment, which becomes its last point. */
function cutAt(curve: readonly CurvePoint[], endS: number): CurvePoint[] {
  const points: CurvePoint[] = []
  for (const point of curve) {
    const before = points.at(-1)
    if (before !== undefined && point.timeS > endS) {
      const share = (endS - before.timeS) / (point.timeS - before.timeS)
      points.push({ timeS: endS, tempC: before.tempC + share * (point.tempC - before.tempC) })
      return points
    }
    points.push(point)
  }
  return points
}

/** Minutes until the running dose reaches `goalMin` on a curve; null when it does not within it. */
function minutesUntil(input: ForecastInput, curve: readonly CurvePoint[], goalMin: number): number | null {
  const { doseMin, model } = input
  if (doseMin >= goalMin) return 0
  const dose = createDoseAccumulator(model)
  let reachedMin = 0
  for (let i = 0; i < curve.length; i += 1) {
    const to = curve[i]
    const from = curve[i - 1]
    if (to === undefined) break
    const afterMin = dose.add(to.timeS, to.tempC)
    if (from !== undefined && doseMin + afterMin >= goalMin) {
      return (from.timeS + secondsIntoSegment(model, from, to, goalMin - doseMin - reachedMin)) / 60
    }
    reachedMin = afterMin
  }
  return null
}

/** Bisection on the exact dose of the cut segment: it only grows, and 60 halvings leave nothing of a segment. */
function secondsIntoSegment(model: DoseModel, from: CurvePoint, to: CurvePoint, neededMin: number): number {
  const spanS = to.timeS - from.timeS
  let low = 0
  let high = spanS
  for (let i = 0; i < 60 && high - low > 1e-9 * Math.max(1, high); i += 1) {
    const middle = (low + high) / 2
    const dose = createDoseAccumulator(model)
    dose.add(0, from.tempC)
    dose.add(middle, from.tempC + ((to.tempC - from.tempC) * middle) / spanS)
    if (dose.minutes < neededMin) low = middle
    else high = middle
  }
  return high
}

/**
 * One piece of advice from the plan's line: 'rest now' when the target is reached, or the plan is at its end with the
 * dose within tolerance; 'no extra time' when the plan's own end lies within tolerance of it, or less than half a
 * minute from it; otherwise how much longer or sooner.
 */
function adviseFrom(input: ForecastInput, line: ForecastLine, minutesToPlannedEnd: number): Advice {
  const { targetDoseMin, toleranceLog10 } = input
  if (line.minutesToTarget === 0) {
    return { kind: 'rest now', minutes: 0, sentence: 'The target dose is reached: rest now.' }
  }
  const offLog10 = Math.log10(line.doseAtPlannedEndMin / targetDoseMin)
  const isWithin = Math.abs(offLog10) <= toleranceLog10
  const none: Advice = {
    kind: 'no extra time',
    minutes: 0,
    sentence: 'On the plan from here the dose arrives at its end: no extra time.',
  }
  if (isWithin && minutesToPlannedEnd > 0) return none
  if (isWithin) {
    return {
      kind: 'rest now',
      minutes: 0,
      sentence: 'The plan is at its end and the dose is within tolerance: rest now.',
    }
  }
  if (line.minutesToTarget === null) {
    return {
      kind: 'out of reach',
      minutes: 0,
      sentence:
        'On the plan from here the target dose is not reached: raise the temperature or ask the master cooper.',
    }
  }
  const moreMinutes = Math.round(line.minutesToTarget - minutesToPlannedEnd)
  if (moreMinutes > 0) {
    const sentence = `Holding ${moreMinutes} min longer than planned gets there.`
    return { kind: 'hold longer', minutes: moreMinutes, sentence }
  }
  if (moreMinutes < 0) {
    const sentence = `The dose arrives early: rest ${-moreMinutes} min sooner than planned.`
    return { kind: 'rest early', minutes: -moreMinutes, sentence }
  }
  return none
}

/**
 * The plan from a moment of it on, as a forecast wants it: shifted so that the moment is 0. Past its end it is one
 * point, its last temperature.
 *
 * @throws RangeError for a plan without points or a moment that is not finite
 */
export function planFrom(plan: readonly CurvePoint[], planTimeS: number): CurvePoint[] {
  requireFinite('planTimeS', planTimeS)
  const first = plan[0]
  const last = plan.at(-1)
  if (first === undefined || last === undefined) throw new RangeError('plan must hold at least one point')
  if (planTimeS >= last.timeS) return [{ timeS: 0, tempC: last.tempC }]
  if (planTimeS <= first.timeS) return plan.map(({ timeS, tempC }) => ({ timeS: timeS - first.timeS, tempC }))
  const next = plan.findIndex((point) => point.timeS > planTimeS)
  const from = plan[next - 1] ?? first
  const to = plan[next] ?? last
  const share = (planTimeS - from.timeS) / (to.timeS - from.timeS)
  const nowTempC = from.tempC + share * (to.tempC - from.tempC)
  const rest = plan.slice(next).map(({ timeS, tempC }) => ({ timeS: timeS - planTimeS, tempC }))
  return [{ timeS: 0, tempC: nowTempC }, ...rest]
}
