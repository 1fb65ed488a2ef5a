/** What the simulated toaster needs of a recipe version; the server's recipe copy is mapped to it. */

import type { CurvePoint } from '@/lib/science/heat-dose'
import { planCurve, planTempCAt } from '@/lib/science/plan'

export type CueAction = 'feed' | 'stir' | 'mist' | 'lid on' | 'lid off' | 'turn' | 'turn over'

/** `minute` counts from the start of its stage. An action that is not one of ours is only words, and is skipped. */
export type HearthCue = { action: string; minute: number; words: string }

export type HearthStage = {
  name: string
  kind: 'ramp' | 'hold'
  /** Wood temperature at the stage's end, °C. */
  targetTempC: number
  durationS: number
  /** Half-width of the band, °C. */
  bandC: number
  lid: 'on' | 'off'
  cues: readonly HearthCue[]
}

export type HearthRecipe = {
  planStartTempC: number
  stages: readonly HearthStage[]
  bend: { minimumMinutes: number; woodLimitC: number }
  preheat: { minutes: number; waterTempC: number }
  restMinutes: number
  thicknessMm?: number
  probeDepthMm?: number
}

/** Length of the plan, s from toast start. */
export function planDurationS(recipe: HearthRecipe): number {
  return recipe.stages.reduce((sum, stage) => sum + stage.durationS, 0)
}

const plannedCurves = new WeakMap<HearthRecipe, CurvePoint[]>()

function plannedCurve(recipe: HearthRecipe): CurvePoint[] {
  const known = plannedCurves.get(recipe)
  if (known !== undefined) return known
  const curve = planCurve(recipe.planStartTempC, recipe.stages)
  plannedCurves.set(recipe, curve)
  return curve
}

/** Planned wood temperature, °C; before the plan its start, after it its end. */
export function planTempC(recipe: HearthRecipe, timeS: number): number {
  const insideS = Math.min(Math.max(timeS, 0), planDurationS(recipe))
  return planTempCAt(plannedCurve(recipe), insideS) ?? recipe.planStartTempC
}

/** Where a stage begins in the plan, s from toast start. */
export function stageStartS(recipe: HearthRecipe, stageIndex: number): number {
  return recipe.stages.slice(0, stageIndex).reduce((sum, stage) => sum + stage.durationS, 0)
}
