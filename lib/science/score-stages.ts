import { requireFinite, requireNotNegative, requirePositive } from './domain'
import { bandHalfWidthC } from './plan-band'
import type { MatchedStage, ScoreStage } from './score-types'

/** One stage as a leg of the plan: from the temperature before it to its own, with the half-width of its band. */
export type PlanLeg = { fromTempC: number; toTempC: number; minutes: number; halfWidthC: number }

/**
 * The plan as legs.
 *
 * @param rampBandMin minutes along time, from the ruleset
 * @throws RangeError for no stages, or a value that is not finite, a negative length or a band not above 0
 */
export function planLegs(
  planStartTempC: number,
  stages: readonly ScoreStage[],
  rampBandMin: number,
): PlanLeg[] {
  requireFinite('planStartTempC', planStartTempC)
  if (stages.length === 0) throw new RangeError('stages must hold at least one stage')
  let fromTempC = planStartTempC
  return stages.map((stage, i) => {
    requireFinite(`stages[${i}].targetTempC`, stage.targetTempC)
    requireNotNegative(`stages[${i}].minutes`, stage.minutes)
    requirePositive(`stages[${i}].bandC`, stage.bandC)
    const leg = {
      fromTempC,
      toTempC: stage.targetTempC,
      minutes: stage.minutes,
      halfWidthC: bandHalfWidthC(
        {
          kind: stage.kind,
          startTempC: fromTempC,
          endTempC: stage.targetTempC,
          durationS: stage.minutes * 60,
          bandC: stage.bandC,
        },
        rampBandMin,
      ),
    }
    fromTempC = stage.targetTempC
    return leg
  })
}

/**
 * Where each stage began and ended in the firing. A marked stage begins at its mark (the last one made for it);
 * without a mark it begins where the stage before it has had the plan's minutes, or at the next mark if that comes
 * first. The last stage ends at rest start. A mark before the one of an earlier stage, or outside the toast, is moved
 * to what is possible.
 */
export function matchStages(
  stages: readonly ScoreStage[],
  marks: readonly { stageIndex: number; timeS: number }[],
  restStartS: number,
): MatchedStage[] {
  const markedS = markedStarts(stages.length, marks, restStartS)
  const startsS: number[] = [0]
  for (let i = 1; i < stages.length; i += 1) {
    const beforeS = startsS[i - 1] ?? 0
    const nextMarkS = markedS.slice(i).find((timeS) => timeS !== null) ?? restStartS
    const planS = beforeS + (stages[i - 1]?.minutes ?? 0) * 60
    startsS.push(markedS[i] ?? Math.min(planS, nextMarkS))
  }
  return stages.map((stage, i) => {
    const startS = startsS[i] ?? 0
    const endS = startsS[i + 1] ?? restStartS
    return {
      name: stage.name,
      planMinutes: stage.minutes,
      actualMinutes: (endS - startS) / 60,
      startS,
      endS,
      isMarked: markedS[i] !== null,
    }
  })
}

/** Marked start per stage, in order and inside the toast; null where there is no mark. */
function markedStarts(
  count: number,
  marks: readonly { stageIndex: number; timeS: number }[],
  restStartS: number,
): (number | null)[] {
  const starts: (number | null)[] = Array.from({ length: count }, () => null)
  for (const { stageIndex, timeS } of marks) {
    if (Number.isInteger(stageIndex) && stageIndex > 0 && stageIndex < count && Number.isFinite(timeS)) {
      starts[stageIndex] = timeS
    }
  }
  let earliestS = 0
  return starts.map((timeS) => {
    if (timeS === null) return null
    earliestS = Math.min(Math.max(timeS, earliestS), restStartS)
    return earliestS
  })
}

/** The plan at moments of the firing, after stage alignment: each stage of the plan is stretched to its real length. */
export type AlignedPlan = { planTempC: Float64Array; halfWidthC: Float64Array }

/** The aligned plan at one moment; before the toast its start, after it its end. */
export function alignedPlanAt(
  legs: readonly PlanLeg[],
  matched: readonly MatchedStage[],
  timeS: number,
): { planTempC: number; halfWidthC: number } {
  let index = 0
  while (index < matched.length - 1 && timeS >= (matched[index]?.endS ?? Infinity)) index += 1
  return inLeg(legs[index], matched[index], timeS)
}

function inLeg(
  leg: PlanLeg | undefined,
  stage: MatchedStage | undefined,
  timeS: number,
): { planTempC: number; halfWidthC: number } {
  if (leg === undefined || stage === undefined) throw new RangeError('legs and stages must be of one plan')
  const spanS = stage.endS - stage.startS
  const share = spanS > 0 ? Math.min(1, Math.max(0, (timeS - stage.startS) / spanS)) : 1
  return { planTempC: leg.fromTempC + share * (leg.toTempC - leg.fromTempC), halfWidthC: leg.halfWidthC }
}

/** The aligned plan at each of many moments, which never fall. */
export function alignPlan(
  legs: readonly PlanLeg[],
  matched: readonly MatchedStage[],
  timeS: ArrayLike<number>,
): AlignedPlan {
  const planTempC = new Float64Array(timeS.length)
  const halfWidthC = new Float64Array(timeS.length)
  let index = 0
  for (let i = 0; i < timeS.length; i += 1) {
    const time = timeS[i] ?? NaN
    while (index < matched.length - 1 && time >= (matched[index]?.endS ?? Infinity)) index += 1
    const point = inLeg(legs[index], matched[index], time)
    planTempC[i] = point.planTempC
    halfWidthC[i] = point.halfWidthC
  }
  return { planTempC, halfWidthC }
}
