import { requireFinite, requireNotNegative, requirePositive } from './domain'
import type { CurvePoint, DoseModel } from './heat-dose'
import { equivalentMinutes } from './heat-dose'
import { solveWithin } from './solve-within'
import { straightBetween } from './straight-line'

/**
 * One leg of the fire. A `ramp` is a straight line from the temperature before it to `targetTempC` over `durationS`;
 * a `hold` keeps the temperature reached before it, so its `targetTempC` equals that. A ramp of 0 s is a step.
 */
export type Stage = { kind: 'ramp' | 'hold'; targetTempC: number; durationS: number }

/** Where a stage lies on the plan's time axis, s from the toast start. */
export type StageSpan = { stageIndex: number; startS: number; endS: number }

/** Refuses what `planCurve` refuses. */
export function requireStages(startTempC: number, stages: readonly Stage[]): void {
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
  return straightBetween(before.timeS, before.tempC, after.timeS, after.tempC, timeS)
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

/** What of a plan may move. `minutes`: a stage's length. `temperature`: its target, with the plateau that it makes. */
export type StageMove = {
  /** 0-based. */
  stageIndex: number
  vary: 'minutes' | 'temperature'
}

/**
 * A plan with one stage's minutes or target set, min or °C. A target is moved together with the plateau that it makes:
 * the ramp that reaches it and every hold that keeps it. The stages given are left as they were.
 *
 * @throws RangeError for the temperature of a hold that no ramp reaches: it is the start's
 */
export function moveStage(stages: readonly Stage[], move: StageMove, value: number): Stage[] {
  if (move.vary === 'minutes') {
    return stages.map((stage, i) =>
      i === move.stageIndex ? { ...stage, durationS: value * 60 } : { ...stage },
    )
  }
  const { first, last } = findPlateau(stages, move.stageIndex)
  return stages.map((stage, i) => (i >= first && i <= last ? { ...stage, targetTempC: value } : { ...stage }))
}

/**
 * First and last stage of the plateau that `stageIndex` belongs to: a ramp and the holds after it.
 *
 * @throws RangeError for a hold that no ramp reaches
 */
export function findPlateau(stages: readonly Stage[], stageIndex: number): { first: number; last: number } {
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

/** A move with how far it may go: minutes, or °C. */
export type LimitedMove = StageMove & { min: number; max: number }

/** Refuses a move of a stage that is not there, or limits that are not in order; `prefix` goes before the names. */
export function requireMove(stages: readonly Stage[], move: LimitedMove, prefix = ''): void {
  if (stages[move.stageIndex] === undefined) {
    throw new RangeError(
      `${prefix}stageIndex must name one of ${stages.length} stages, not ${move.stageIndex}`,
    )
  }
  if (move.vary === 'minutes') requireNotNegative(`${prefix}min`, move.min)
  else requireFinite(`${prefix}min`, move.min)
  requireFinite(`${prefix}max`, move.max)
  if (move.max < move.min) {
    throw new RangeError(`${prefix}max must not be below ${prefix}min: ${move.max} under ${move.min}`)
  }
}

/** What `solveStage` is asked: which stage, what of it may move and how far, and the dose that is wanted. */
export type SolveStageRequest = LimitedMove & {
  startTempC: number
  stages: readonly Stage[]
  /** Wanted dose of the whole plan, minutes at the model's reference temperature, above 0. */
  wantedDoseMin: number
  model: DoseModel
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
  requireMove(request.stages, request)
  requirePositive('wantedDoseMin', request.wantedDoseMin)
  const { startTempC, stages, wantedDoseMin, model, min, max } = request
  const isStraight = request.vary === 'minutes'
  const found = solveWithin({
    valueAt: (value) => planDose(model, startTempC, moveStage(stages, request, value)),
    min,
    max,
    excess: isStraight
      ? (doseMin) => doseMin - wantedDoseMin
      : (doseMin) => log10Excess(doseMin, wantedDoseMin),
    isSame: (doseMin) => isSameDose(doseMin, wantedDoseMin),
    isStraight,
  })
  if (found.isFound) {
    return { feasible: true, value: found.x, stages: moveStage(stages, request, found.x) }
  }
  const range = { attainableMin: found.low, attainableMax: found.high }
  return { feasible: false, ...range, ...(found.jump === null ? {} : { unattainableMin: found.jump }) }
}

/** log10 of a dose over another; a dose of 0 has no logarithm, 1e-300 min stands for it and keeps the sign. */
export function log10Excess(doseMin: number, wantedDoseMin: number): number {
  return Math.log10(Math.max(doseMin, 1e-300) / wantedDoseMin)
}

/** Whether two doses are one but for the solver's own rounding. */
export function isSameDose(doseMin: number, wantedDoseMin: number): boolean {
  return Math.abs(doseMin - wantedDoseMin) <= DOSE_TOLERANCE * wantedDoseMin
}
