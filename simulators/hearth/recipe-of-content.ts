import type { RecipeContent } from '@/lib/recipes/schema'
import type { HearthRecipe } from './recipe'

/** What the engine needs of a recipe version. */
export function hearthRecipeOf(content: RecipeContent): HearthRecipe {
  return {
    planStartTempC: content.planStartTempC,
    stages: content.stages.map((stage) => ({
      name: stage.name,
      kind: stage.kind,
      targetTempC: stage.targetTempC,
      durationS: stage.minutes * 60,
      bandC: stage.bandC,
      lid: stage.lid,
      cues: stage.cues,
    })),
    bend: { minimumMinutes: content.bend.minimumMinutes, woodLimitC: content.bend.woodLimitC },
    preheat: { minutes: content.preheat.minutes, waterTempC: content.preheat.waterTempC },
    restMinutes: content.restMinutes,
    thicknessMm: content.thicknessMm,
    probeDepthMm: content.leadPlace.depthMm,
  }
}
