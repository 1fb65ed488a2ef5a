import { requirePositive, requireWithin } from './domain'
import type { DoseModel } from './heat-dose'
import type { LimitedMove, Stage } from './plan'
import {
  findPlateau,
  isSameDose,
  log10Excess,
  moveStage,
  planCurve,
  planDose,
  requireMove,
  requireStages,
} from './plan'
import type { Found } from './solve-within'
import { solveWithin } from './solve-within'
import type { DepthRangeMm, StaveOptions, StaveState } from './stave'
import { doseAtDepth, staveHistory, toastDepthMm } from './stave'

/**
 * What a plan is to reach by its end: its dose at the lead probe's depth; or, by the stave model, the dose at another
 * depth, or the toast depth. Doses in minutes at the reference temperature, depths in mm from the face.
 */
export type WantedOfPlan =
  | { what: 'dose'; doseMin: number }
  | { what: 'dose at depth'; depthMm: number; doseMin: number }
  | { what: 'toast depth'; depthMm: number }

/** The wood that a plan is solved in; its start temperature and dose constants are the plan's own. */
export type PlannedStave = Omit<StaveOptions, 'startTempC' | 'dose'>

export type SolveStagesRequest = {
  startTempC: number
  stages: readonly Stage[]
  /** One or two moves, each with its limits: minutes, or °C. */
  moves: readonly LimitedMove[]
  wanted: WantedOfPlan
  model: DoseModel
  /** Needed for 'dose at depth' and 'toast depth'. */
  stave?: PlannedStave
}

/**
 * `values` are the moved minutes or °C, in the order of the moves; `share` is how far each stands in its range, 0 to 1;
 * `reached` is what the plan then has, min or mm. When not feasible: the lowest and highest that the limits allow, and
 * `unattainable` when the wanted one lies in a jump between them.
 */
export type SolveStagesResult =
  | { feasible: true; share: number; values: number[]; stages: Stage[]; reached: number }
  | {
      feasible: false
      attainableMin: number
      attainableMax: number
      unattainable: { from: number; to: number } | null
    }

/** Grid and step of the stave while it is solved: within 0.05 mm of the drawn picture's at a tenth of its cost. */
const SOLVING_CELL_MM = 0.4
const SOLVING_STEP_S = 10
/** How closely the stave model is met: its own step is no finer. log10 of dose, and mm. */
const SAME_DOSE_LOG10 = 5e-4
const SAME_DEPTH_MM = 0.01
/** The model's value may fall back a little as a stage grows longer, so the range is looked through in parts. */
const STAVE_PARTS = 16
const STAVE_TOLERANCE_SHARE = 1e-6

/**
 * Solves one or two stages of a plan for a wanted dose, dose at a depth, or toast depth, within limits.
 *
 * *Two stages move together*: both stand at the same share of their own ranges, value = min + share·(max − min), so that
 * "10 to 20 minutes" and "180 to 200 °C" at a share of 0.3 are 13 minutes and 186 °C. One share is sought; it answers
 * one plan, not a choice of many.
 *
 * The dose at the probe is exact and only rises with the share: a straight line of it when both moves are minutes,
 * Brent otherwise. The other two run the stave model (face to the probe is an estimate there, see stave.ts): the range is
 * looked through in 16 parts and the first root taken, met to 0.0005 log10 or 0.01 mm.
 *
 * @throws RangeError for an invalid plan or model; no move, more than two, or two of the same thing; a stage that is not
 *   there, limits that are not in order, negative minutes; a wanted value not above 0, a depth outside the stave, or a
 *   model question without a stave
 */
export function solveStages(request: SolveStagesRequest): SolveStagesResult {
  requireRequest(request)
  const { stages, moves } = request
  const valuesAt = (share: number) => moves.map(({ min, max }) => min + share * (max - min))
  const stagesAt = (share: number) =>
    moves.reduce<Stage[]>(
      (moved, move) => moveStage(moved, move, move.min + share * (move.max - move.min)),
      [...stages],
    )
  const found = search(request, stagesAt)
  if (found.isFound) {
    return {
      feasible: true,
      share: found.x,
      values: valuesAt(found.x),
      stages: stagesAt(found.x),
      reached: found.value,
    }
  }
  return { feasible: false, attainableMin: found.low, attainableMax: found.high, unattainable: found.jump }
}

function requireRequest({ startTempC, stages, moves, wanted, stave }: SolveStagesRequest): void {
  requireStages(startTempC, stages)
  if (moves.length < 1 || moves.length > 2) {
    throw new RangeError(`moves must hold one or two moves, not ${moves.length}`)
  }
  moves.forEach((move, i) => requireMove(stages, move, `moves[${i}].`))
  const things = moves.map(({ vary, stageIndex }) =>
    vary === 'minutes' ? `minutes ${stageIndex}` : `temperature ${findPlateau(stages, stageIndex).first}`,
  )
  if (things[0] === things[1]) throw new RangeError('moves must be of two things: both name the same')
  if (wanted.what !== 'toast depth') requirePositive('wanted.doseMin', wanted.doseMin)
  if (wanted.what === 'dose') return
  if (stave === undefined) throw new RangeError(`stave must be given to solve for ${wanted.what}`)
  requireWithin('wanted.depthMm', wanted.depthMm, 0, stave.thicknessMm)
  if (wanted.what === 'toast depth') requirePositive('wanted.depthMm', wanted.depthMm)
}

function search(request: SolveStagesRequest, stagesAt: (share: number) => Stage[]): Found {
  const { startTempC, moves, wanted, model, stave } = request
  const range = { min: 0, max: 1 }
  if (wanted.what === 'dose') {
    const isStraight = moves.every((move) => move.vary === 'minutes')
    return solveWithin({
      ...range,
      valueAt: (share) => planDose(model, startTempC, stagesAt(share)),
      excess: (doseMin) => (isStraight ? doseMin - wanted.doseMin : log10Excess(doseMin, wanted.doseMin)),
      isSame: (doseMin) => isSameDose(doseMin, wanted.doseMin),
      isStraight,
    })
  }
  if (stave === undefined) throw new RangeError(`stave must be given to solve for ${wanted.what}`)
  const inStave = { ...range, parts: STAVE_PARTS, toleranceX: STAVE_TOLERANCE_SHARE }
  if (wanted.what === 'dose at depth') {
    return solveWithin({
      ...inStave,
      valueAt: (share) => planDoseAtDepth(stave, model, startTempC, stagesAt(share), wanted.depthMm),
      excess: (doseMin) => log10Excess(doseMin, wanted.doseMin),
      isSame: (doseMin) => Math.abs(log10Excess(doseMin, wanted.doseMin)) <= SAME_DOSE_LOG10,
    })
  }
  return solveWithin({
    ...inStave,
    valueAt: (share) => planToastDepthMm(stave, model, startTempC, stagesAt(share)).value,
    excess: (depthMm) => depthMm - wanted.depthMm,
    isSame: (depthMm) => Math.abs(depthMm - wanted.depthMm) <= SAME_DEPTH_MM,
  })
}

/** The stave at a plan's end; null for a plan without time, under which nothing has happened. */
function staveAtEnd(
  stave: PlannedStave,
  model: DoseModel,
  startTempC: number,
  stages: readonly Stage[],
): StaveState | null {
  const points = planCurve(startTempC, stages)
  if (!((points.at(-1)?.timeS ?? 0) > 0)) return null
  return staveHistory({
    cellMm: SOLVING_CELL_MM,
    longestStepS: SOLVING_STEP_S,
    ...stave,
    dose: model,
    points,
    columns: 2,
  }).final
}

/**
 * Dose of a plan at a depth, by the stave model, minutes at the reference temperature. At the lead probe's depth it is
 * the plan's own, to the model's step.
 *
 * @throws RangeError as `planCurve` and `createStave`, and for a depth outside the stave
 */
export function planDoseAtDepth(
  stave: PlannedStave,
  model: DoseModel,
  startTempC: number,
  stages: readonly Stage[],
  depthMm: number,
): number {
  requireWithin('depthMm', depthMm, 0, stave.thicknessMm)
  const state = staveAtEnd(stave, model, startTempC, stages)
  return state === null ? 0 : doseAtDepth(state, depthMm)
}

/**
 * Toast depth of a plan with its range, mm, by the stave model.
 *
 * @throws RangeError as `planCurve` and `createStave`
 */
export function planToastDepthMm(
  stave: PlannedStave,
  model: DoseModel,
  startTempC: number,
  stages: readonly Stage[],
): DepthRangeMm {
  const state = staveAtEnd(stave, model, startTempC, stages)
  return state === null ? { low: 0, value: 0, high: 0 } : toastDepthMm(state)
}
