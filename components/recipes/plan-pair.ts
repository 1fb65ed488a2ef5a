import type { PairDose, PairProps, PairWood } from '@/components/chart/pair-types'
import { formatTemp } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import type { Plan } from '@/lib/recipes/plan-of'
import { planDoseCurve } from '@/lib/recipes/plan-of'
import type { CurvePoint, DoseModel } from '@/lib/science/heat-dose'

/** Another version's plan, drawn thin behind this one. */
export type ShadowPlan = { name: string; points: readonly CurvePoint[] }

export type PlanPairInput = {
  title: string
  /** At the curve's end: "version 5". */
  name: string
  plan: Plan
  /** For the large picture: dose strip and limit. */
  model: DoseModel
  depthMm: number
  limitC: number | null
  shadow: ShadowPlan | null
  wood: PairWood | null
  unit: TemperatureUnit
  selectedStage?: number
}

function lineOf(name: string, points: readonly CurvePoint[]) {
  return {
    name,
    timeS: points.map((point) => point.timeS),
    tempC: points.map((point) => point.tempC),
  }
}

function doseLine(points: readonly CurvePoint[], model: DoseModel) {
  const curve = planDoseCurve(points, model)
  return { timesS: curve.map((point) => point.timeS), equivalentMin: curve.map((point) => point.doseMin) }
}

function doseOf({ plan, model, depthMm, shadow, unit }: PlanPairInput): PairDose {
  return {
    ...doseLine(plan.points, model),
    title: `Dose at ${depthMm} mm, minutes at ${formatTemp(model.refTempC, unit)}`,
    target: { lowMin: plan.targetLowMin, targetMin: plan.targetDoseMin, highMin: plan.targetHighMin },
    others: shadow === null ? [] : [{ name: shadow.name, ...doseLine(shadow.points, model) }],
  }
}

/** A plan as the pair draws it: the plan is the heavy line, on its own band. */
export function planPairProps(input: PlanPairInput): Omit<PairProps, 'size'> {
  const { plan, name, title, shadow, wood, unit, limitC, selectedStage } = input
  return {
    title,
    planBand: plan.band,
    planName: '',
    stages: plan.stages.map((stage) => ({
      name: stage.name,
      startS: stage.startS,
      endS: stage.endS,
      isSelected: stage.index === selectedStage,
    })),
    lead: lineOf(name, plan.points),
    others: shadow === null ? [] : [lineOf(shadow.name, shadow.points)],
    dose: doseOf(input),
    wood,
    unit,
    limitC,
  }
}
