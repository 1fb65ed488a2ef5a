/** What the simulated toaster needs of a recipe version; the server's recipe copy is mapped to it. */

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

/** Planned wood temperature, °C; before the plan its start, after it its end. */
export function planTempC(recipe: HearthRecipe, timeS: number): number {
  let startS = 0
  let startTempC = recipe.planStartTempC
  for (const stage of recipe.stages) {
    if (timeS < startS + stage.durationS) {
      const share = Math.max(0, (timeS - startS) / stage.durationS)
      return stage.kind === 'hold' ? stage.targetTempC : startTempC + share * (stage.targetTempC - startTempC)
    }
    startS += stage.durationS
    startTempC = stage.targetTempC
  }
  return startTempC
}

/** Where a stage begins in the plan, s from toast start. */
export function stageStartS(recipe: HearthRecipe, stageIndex: number): number {
  return recipe.stages.slice(0, stageIndex).reduce((sum, stage) => sum + stage.durationS, 0)
}
