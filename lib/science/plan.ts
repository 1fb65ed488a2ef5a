import { requireFinite, requireNotNegative, requirePositive } from './domain'
import type { CurvePoint, DoseModel } from './heat-dose'
import { equivalentMinutes } from './heat-dose'
import { findRoot } from './root'

/**
 * One leg of the fire. A `ramp` is a straight line from the temperature before it to `targetTempC` over `durationS`;
 * a `hold` keeps the temperature reached before it, so its `targetTempC` equals that. A ramp of 0 s is a step.
 */
export type Stage = { kind: 'ramp' | 'hold'; targetTempC: number; durationS: number }

/** Where a stage lies on the plan's time axis, s from the toast start. */
export type StageSpan = { stageIndex: number; startS: number; endS: number }

function requireStages(startTempC: number, stages: readonly Stage[]): void {
  requireFinite('startTempC', startTempC)
  if (stages.length === 0) throw new RangeError('stages must hold at least one stage')
  let reachedTempC = startTempC
  stages.forEach((stage, i) => {
    requireFinite(`stages[${i}].targetTempC`, stage.targetTempC)
    requireNotNegative(`stages[${i}].durationS`, stage.durationS)
    if (stage.kind === 'hold' && stage.targetTempC !== reachedTempC) {
      throw new RangeError(
        `stages[${i}].targetTempC of a hold must equal the temperature before it: ${stage.targetTempC} against ${reachedTempC}`,
      )
    }
    reachedTempC = stage.targetTempC
  })
}

/**
 * The planned curve: one point at 0 s and one at each stage's end; straight between them.
 *
 * @throws RangeError for no stages, a value that is not finite, a negative duration, or a hold whose target differs
 *   from the temperature reached before it
 */
export function planCurve(startTempC: number, stages: readonly Stage[]): CurvePoint[] {
  requireStages(startTempC, stages)
  let timeS = 0
  const points: CurvePoint[] = [{ timeS, tempC: startTempC }]
  for (const stage of stages) {
    timeS += stage.durationS
    points.push({ timeS, tempC: stage.targetTempC })
  }
  return points
}

/**
 * Exact heat dose of a plan, minutes at the model's reference temperature.
 *
 * @throws RangeError as `planCurve` and `equivalentMinutes` do
 */
export function planDose(model: DoseModel, startTempC: number, stages: readonly Stage[]): number {
  return equivalentMinutes(model, planCurve(startTempC, stages))
}

/**
 * Planned temperature at `timeS`, °C, straight between points; at a step the value after it. Null before the first
 * and after the last point: the plan says nothing there.
 *
 * @param points a curve from `planCurve`: at least one point, times that never fall
 * @throws RangeError for no points or a `timeS` that is not finite
 */
export function planTempCAt(points: readonly CurvePoint[], timeS: number): number | null {
  requireFinite('timeS', timeS)
  const first = points[0]
  const last = points.at(-1)
  if (first === undefined || last === undefined) throw new RangeError('points must hold at least one point')
  if (timeS < first.timeS || timeS > last.timeS) return null
  let low = 0
  let high = points.length
  // The last point at or before timeS, so that a step gives its later value.
  while (high - low > 1) {
    const middle = (low + high) >> 1
    if ((points[middle] ?? last).timeS <= timeS) low = middle
    else high = middle
  }
  const before = points[low] ?? last
  const after = points[low + 1]
  if (after === undefined || before.timeS === timeS) return before.tempC
  const share = (timeS - before.timeS) / (after.timeS - before.timeS)
  return before.tempC + share * (after.tempC - before.tempC)
}

/**
 * The stage that the plan is in at `timeS`, with its start and end; at a boundary the later one, at the plan's end
 * the last. Null outside the plan.
 *
 * @throws RangeError for no stages, a negative duration, or a value that is not finite
 */
export function planStageAt(stages: readonly Stage[], timeS: number): StageSpan | null {
  requireFinite('timeS', timeS)
  if (stages.length === 0) throw new RangeError('stages must hold at least one stage')
  let startS = 0
  let found: StageSpan | null = null
  stages.forEach((stage, stageIndex) => {
    const endS = startS + requireNotNegative(`stages[${stageIndex}].durationS`, stage.durationS)
    const isLast = stageIndex === stages.length - 1
    if (found === null && timeS >= startS && (timeS < endS || (isLast && timeS === endS))) {
      found = { stageIndex, startS, endS }
    }
    startS = endS
  })
  return found
}

/** What `solveStage` is asked: which stage, what of it may move and how far, and the dose that is wanted. */
export type SolveStageRequest = {
  startTempC: number
  stages: readonly Stage[]
  /** 0-based. */
  stageIndex: number
  /** `minutes`: the stage's length. `temperature`: its target, with the holds that keep it. */
  vary: 'minutes' | 'temperature'
  /** Wanted dose of the whole plan, minutes at the model's reference temperature, above 0. */
  wantedDoseMin: number
  model: DoseModel
  /** Smallest allowed value: minutes, or °C. */
  min: number
  /** Largest allowed value: minutes, or °C. */
  max: number
}

/**
 * `value` is in minutes or °C, and `stages` is the plan with it. When not feasible: the doses at the two limits, and
 * `unattainableMin` when the wanted dose lies in a jump between them (a hold that crosses the model's base
 * temperature begins to count all at once).
 */
export type SolveStageResult =
  | { feasible: true; value: number; stages: Stage[] }
  | {
      feasible: false
      attainableMin: number
      attainableMax: number
      unattainableMin?: { from: number; to: number }
    }

/** Two doses closer than this, relative, are one: the solver's own rounding. */
const DOSE_TOLERANCE = 1e-9

/**
 * Finds minutes or temperature of one stage so that the whole plan has the wanted dose, within limits.
 *
 * Minutes: closed form, since the dose is a straight line in a stage's length. Temperature: Brent's method (Algorithms
 * for Minimization without Derivatives, 1973) on log10 of the dose, which only rises with a target. A target is
 * moved together with the plateau that it makes: the ramp that reaches it and every hold that keeps it.
 *
 * @throws RangeError for an invalid plan or model, a stage that is not there, limits that are not in order, negative
 *   minutes, a wanted dose not above 0, or the temperature of a hold that no ramp reaches (it is the start's)
 */
export function solveStage(request: SolveStageRequest): SolveStageResult {
  requireStages(request.startTempC, request.stages)
  if (request.stages[request.stageIndex] === undefined) {
    throw new RangeError(
      `stageIndex must name one of ${request.stages.length} stages, not ${request.stageIndex}`,
    )
  }
  requirePositive('wantedDoseMin', request.wantedDoseMin)
  if (request.vary === 'minutes') requireNotNegative('min', request.min)
  else requireFinite('min', request.min)
  requireFinite('max', request.max)
  if (request.max < request.min)
    throw new RangeError(`max must not be below min: ${request.max} under ${request.min}`)
  return request.vary === 'minutes' ? solveMinutes(request) : solveTemperature(request)
}

function isSameDose(doseMin: number, wantedDoseMin: number): boolean {
  return Math.abs(doseMin - wantedDoseMin) <= DOSE_TOLERANCE * wantedDoseMin
}

function solveMinutes(request: SolveStageRequest): SolveStageResult {
  const { startTempC, stages, stageIndex, wantedDoseMin, model, min, max } = request
  const withMinutes = (minutes: number): Stage[] =>
    stages.map((stage, i) => (i === stageIndex ? { ...stage, durationS: minutes * 60 } : { ...stage }))
  const doseOf = (minutes: number) => planDose(model, startTempC, withMinutes(minutes))

  const attainableMin = doseOf(min)
  const attainableMax = doseOf(max)
  if (isSameDose(attainableMin, wantedDoseMin))
    return { feasible: true, value: min, stages: withMinutes(min) }
  if (isSameDose(attainableMax, wantedDoseMin))
    return { feasible: true, value: max, stages: withMinutes(max) }
  if (wantedDoseMin < attainableMin || wantedDoseMin > attainableMax) {
    return { feasible: false, attainableMin, attainableMax }
  }
  const value = min + ((max - min) * (wantedDoseMin - attainableMin)) / (attainableMax - attainableMin)
  return { feasible: true, value, stages: withMinutes(value) }
}

/** First and last stage of the plateau that `stageIndex` belongs to: a ramp and the holds after it. */
function findPlateau(stages: readonly Stage[], stageIndex: number): { first: number; last: number } {
  let first = stageIndex
  while (stages[first]?.kind === 'hold') first -= 1
  if (first < 0) {
    throw new RangeError(
      `stageIndex ${stageIndex} is a hold at the start temperature: no ramp sets its temperature`,
    )
  }
  let last = stageIndex
  while (stages[last + 1]?.kind === 'hold') last += 1
  return { first, last }
}

function solveTemperature(request: SolveStageRequest): SolveStageResult {
  const { startTempC, stages, stageIndex, wantedDoseMin, model, min, max } = request
  const plateau = findPlateau(stages, stageIndex)
  const withTempC = (targetTempC: number): Stage[] =>
    stages.map((stage, i) =>
      i >= plateau.first && i <= plateau.last ? { ...stage, targetTempC } : { ...stage },
    )
  const doseOf = (tempC: number) => planDose(model, startTempC, withTempC(tempC))

  const attainableMin = doseOf(min)
  const attainableMax = doseOf(max)
  if (isSameDose(attainableMin, wantedDoseMin)) return { feasible: true, value: min, stages: withTempC(min) }
  if (isSameDose(attainableMax, wantedDoseMin)) return { feasible: true, value: max, stages: withTempC(max) }
  if (wantedDoseMin < attainableMin || wantedDoseMin > attainableMax) {
    return { feasible: false, attainableMin, attainableMax }
  }
  // A dose of 0 has no logarithm; 1e-300 min stands for it and keeps the sign.
  const excess = (tempC: number) => Math.log10(Math.max(doseOf(tempC), 1e-300) / wantedDoseMin)
  const value = findRoot(excess, min, max)
  if (!isSameDose(doseOf(value), wantedDoseMin)) {
    const step = 1e-9 * Math.max(1, Math.abs(value))
    const from = doseOf(Math.max(min, value - step))
    const to = doseOf(Math.min(max, value + step))
    if (!(isSameDose(from, wantedDoseMin) || isSameDose(to, wantedDoseMin))) {
      return { feasible: false, attainableMin, attainableMax, unattainableMin: { from, to } }
    }
  }
  return { feasible: true, value, stages: withTempC(value) }
}
