import type { RecipeContent } from '@/lib/recipes/schema'
import { toleranceBoundsMin } from '@/lib/science/dose-ratio'
import type { CurvePoint, DoseModel } from '@/lib/science/heat-dose'
import { arrheniusEquivalentMinutes, createDoseAccumulator, equivalentMinutes } from '@/lib/science/heat-dose'
import { planCurve, planTempCAt } from '@/lib/science/plan'
import type { Stage } from '@/lib/science/plan'
import { bandHalfWidthC } from '@/lib/science/plan-band'

/** What the plan needs of a recipe: any content, or the part of it that is whole while one types. */
export type PlannedContent = Pick<
  RecipeContent,
  'planStartTempC' | 'doseTargetMinutes' | 'doseToleranceLog10'
> & {
  stages: readonly Pick<
    RecipeContent['stages'][number],
    'name' | 'kind' | 'targetTempC' | 'minutes' | 'bandC'
  >[]
}

/** One stage on the plan's time axis; times in s from the toast start, dose in minutes at the reference temperature. */
export type PlannedStage = {
  index: number
  name: string
  kind: 'ramp' | 'hold'
  startS: number
  endS: number
  startTempC: number
  endTempC: number
  /** Half-width of the stage's band: `bandHalfWidthC`. */
  bandHalfWidthC: number
  doseMin: number
}

/** The plan's band at one instant; two points share an instant where one stage's band ends and the next begins. */
export type BandPoint = { timeS: number; lowC: number; midC: number; highC: number }

export type Plan = {
  points: CurvePoint[]
  stages: PlannedStage[]
  band: BandPoint[]
  totalS: number
  /** Exact dose of the plan. */
  doseMin: number
  /** What a firing is held to: the set target, or the plan's own dose; and its tolerance about it. */
  targetDoseMin: number
  targetLowMin: number
  targetHighMin: number
}

/** A recipe's stages as the plan computation takes them. */
export function scienceStages(stages: PlannedContent['stages']): Stage[] {
  return stages.map((stage) => ({
    kind: stage.kind,
    targetTempC: stage.targetTempC,
    durationS: stage.minutes * 60,
  }))
}

/**
 * The plan of a recipe: curve, stages, band and dose. The one source for bench, fireside and score.
 *
 * @throws RangeError for no stages, a hold that leaves the temperature before it, or a value that is not finite
 */
export function planOf(content: PlannedContent, model: DoseModel): Plan {
  const points = planCurve(content.planStartTempC, scienceStages(content.stages))
  const stages = plannedStages(content, points, model)
  const doseMin = equivalentMinutes(model, points)
  const targetDoseMin = content.doseTargetMinutes ?? doseMin
  const target = toleranceBoundsMin(targetDoseMin, content.doseToleranceLog10)
  return {
    points,
    stages,
    band: stages.flatMap(stageBand),
    totalS: points.at(-1)?.timeS ?? 0,
    doseMin,
    targetDoseMin,
    targetLowMin: target.lowMin,
    targetHighMin: target.highMin,
  }
}

function plannedStages(
  content: PlannedContent,
  points: readonly CurvePoint[],
  model: DoseModel,
): PlannedStage[] {
  return content.stages.flatMap((stage, index) => {
    const from = points[index]
    const to = points[index + 1]
    if (from === undefined || to === undefined) return []
    return {
      index,
      name: stage.name,
      kind: stage.kind,
      startS: from.timeS,
      endS: to.timeS,
      startTempC: from.tempC,
      endTempC: to.tempC,
      bandHalfWidthC: bandHalfWidthC({
        kind: stage.kind,
        startTempC: from.tempC,
        endTempC: to.tempC,
        durationS: to.timeS - from.timeS,
        bandC: stage.bandC,
      }),
      doseMin: equivalentMinutes(model, [from, to]),
    }
  })
}

function stageBand(stage: PlannedStage): BandPoint[] {
  const at = (timeS: number, tempC: number): BandPoint => ({
    timeS,
    lowC: tempC - stage.bandHalfWidthC,
    midC: tempC,
    highC: tempC + stage.bandHalfWidthC,
  })
  return [at(stage.startS, stage.startTempC), at(stage.endS, stage.endTempC)]
}

/** The dose as it grows along the plan. */
export type DosePoint = { timeS: number; doseMin: number }

/**
 * Dose along the plan at every stage's end and at least every `stepS`, for drawing; exact at each point.
 *
 * @throws RangeError as the dose computation does
 */
export function planDoseCurve(points: readonly CurvePoint[], model: DoseModel, stepS = 30): DosePoint[] {
  const dose = createDoseAccumulator(model)
  const curve: DosePoint[] = []
  points.forEach((to, index) => {
    const from = points[index - 1]
    if (from !== undefined) {
      const parts = Math.max(1, Math.ceil((to.timeS - from.timeS) / stepS))
      for (let part = 1; part < parts; part += 1) {
        const share = part / parts
        const timeS = from.timeS + share * (to.timeS - from.timeS)
        curve.push({ timeS, doseMin: dose.add(timeS, from.tempC + share * (to.tempC - from.tempC)) })
      }
    }
    curve.push({ timeS: to.timeS, doseMin: dose.add(to.timeS, to.tempC) })
  })
  return curve
}

/** The plan's dose from the toast start to `timeS`, minutes at the reference temperature; the whole after its end. */
export function planDoseAt(points: readonly CurvePoint[], model: DoseModel, timeS: number): number {
  const tempC = planTempCAt(points, timeS)
  const passed = points.filter((point) => point.timeS <= timeS)
  if (passed.length === 0) return 0
  return equivalentMinutes(model, tempC === null ? passed : [...passed, { timeS, tempC }])
}

/** Slow and fast index of a plan, minutes at the model's reference temperature (SCIENCE §2, illustrative). */
export function planIndices(
  points: readonly CurvePoint[],
  indices: { slowJPerMol: number; fastJPerMol: number },
  refTempC: number,
): { slowMin: number; fastMin: number } {
  return {
    slowMin: arrheniusEquivalentMinutes(indices.slowJPerMol, refTempC, points),
    fastMin: arrheniusEquivalentMinutes(indices.fastJPerMol, refTempC, points),
  }
}
