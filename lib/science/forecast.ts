import { requireFinite, requireNotNegative, requirePositive } from './domain'
import { ratioFromLog10 } from './dose-ratio'
import type { CurvePoint, DoseModel } from './heat-dose'
import { createDoseAccumulator, createSegmentDose } from './heat-dose'
import { planTempCAt } from './plan'
import { findRoot } from './root'
import type { SiteRules } from './site-rules'
import { straightBetween } from './straight-line'

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
  /** Dose at the plan's end, minutes at the reference temperature, and the ends of its interval. */
  doseAtPlannedEndMin: number
  lowAtPlannedEndMin: number
  highAtPlannedEndMin: number
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
 * (a) holds the reading; (b) keeps its climb up to the wood maximum and holds there, or falls on down, or without a
 * maximum climbs on to 400 °C, where no wood is.
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
      const tempC = straightBetween(before.timeS, before.tempC, point.timeS, point.tempC, rejoinS)
      rejoining.push({ timeS: rejoinS, tempC })
    }
    const left = Math.max(0, 1 - point.timeS / rejoinS)
    rejoining.push({ timeS: point.timeS, tempC: point.tempC + offsetC * left })
  })
  return rejoining
}

/** Follows a curve that starts now with the running dose on it. */
function followCurve(input: ForecastInput, curve: readonly CurvePoint[], endS: number): ForecastLine {
  const { doseMin, targetDoseMin, intervalLog10 } = input
  const factor = ratioFromLog10(intervalLog10)
  const doseAtPlannedEndMin = doseMin + doseUpTo(input.model, curve, endS)
  return {
    minutesToTarget: minutesUntil(input, curve, targetDoseMin),
    // Dose read off by a fixed factor stays off by it: the true dose reaches the target when the read one reaches this.
    earliestMinutes: minutesUntil(input, curve, targetDoseMin / factor),
    latestMinutes: minutesUntil(input, curve, targetDoseMin * factor),
    doseAtPlannedEndMin,
    lowAtPlannedEndMin: doseAtPlannedEndMin / factor,
    highAtPlannedEndMin: doseAtPlannedEndMin * factor,
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
      const tempC = straightBetween(before.timeS, before.tempC, point.timeS, point.tempC, endS)
      points.push({ timeS: endS, tempC })
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

const ROOT_TOLERANCE_S = 1e-9

/** Where in a segment its own dose has come to `neededMin`: the root of the exact dose of the cut segment. */
function secondsIntoSegment(model: DoseModel, from: CurvePoint, to: CurvePoint, neededMin: number): number {
  const spanS = to.timeS - from.timeS
  const segment = createSegmentDose(model)
  const fromRate = segment.rateAt(from.tempC)
  const missingAt = (seconds: number) => {
    const tempC = straightBetween(0, from.tempC, spanS, to.tempC, seconds)
    return segment.minutes(seconds, from.tempC, fromRate, tempC, segment.rateAt(tempC)) - neededMin
  }
  // A last digit may be missing at the end, of what the sum had there; a step has no inside.
  if (!(spanS > 0) || missingAt(spanS) <= 0) return Math.max(0, spanS)
  if (missingAt(0) >= 0) return 0
  const rootS = findRoot(missingAt, 0, spanS, ROOT_TOLERANCE_S)
  // On the far side of the root, so that what is not reached yet never reads as reached now.
  return missingAt(rootS) >= 0 ? rootS : Math.min(spanS, rootS + 2 * ROOT_TOLERANCE_S)
}

/** Less than this from now or from the plan's end is no time to act on, min. */
const NO_TIME_MIN = 0.5

/**
 * One piece of advice from the plan's line alone, so that it can not contradict it:
 *
 * - target reached, or plan at its end with the dose within tolerance: 'rest now';
 * - the plan's end lies within tolerance: 'no extra time', and within means within, whatever minute the target falls on;
 * - the plan would end above: 'rest early' by the whole minutes that the target comes before its end, 'rest now' when
 *   that is less than half a minute from now;
 * - it would end below: 'hold longer' by the whole minutes after its end, 'out of reach' when holding never gets there;
 * - and 'no extra time' again when the target falls within half a minute of the plan's end.
 */
function adviseFrom(input: ForecastInput, line: ForecastLine, minutesToPlannedEnd: number): Advice {
  const { minutesToTarget } = line
  if (minutesToTarget === 0) return advice('rest now', 'The target dose is reached: rest now.')
  const offLog10 = Math.log10(line.doseAtPlannedEndMin / input.targetDoseMin)
  if (Math.abs(offLog10) <= input.toleranceLog10) {
    return minutesToPlannedEnd > 0
      ? advice('no extra time', 'On the plan from here the dose ends within tolerance: no extra time.')
      : advice('rest now', 'The plan is at its end and the dose is within tolerance: rest now.')
  }
  if (minutesToTarget === null) {
    return advice(
      'out of reach',
      'On the plan from here the target dose is not reached: raise the temperature or ask the master cooper.',
    )
  }
  if (offLog10 > 0 && minutesToTarget < NO_TIME_MIN) {
    return advice('rest now', 'The target dose is less than half a minute away: rest now.')
  }
  const more = Math.round(minutesToTarget - minutesToPlannedEnd)
  if (more > 0) return advice('hold longer', `On the plan from here, hold ${more} min longer.`, more)
  if (more < 0)
    return advice('rest early', `On the plan from here, rest ${-more} min sooner than planned.`, -more)
  return minutesToPlannedEnd > 0
    ? advice('no extra time', 'The target comes within half a minute of the plan’s end: no extra time.')
    : advice('no extra time', 'The target dose is less than half a minute away: rest then, no extra time.')
}

function advice(kind: AdviceKind, sentence: string, minutes = 0): Advice {
  return { kind, minutes, sentence }
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
  const rest = plan.filter((point) => point.timeS > planTimeS)
  return [
    { timeS: 0, tempC: planTempCAt(plan, planTimeS) ?? last.tempC },
    ...rest.map(({ timeS, tempC }) => ({ timeS: timeS - planTimeS, tempC })),
  ]
}
