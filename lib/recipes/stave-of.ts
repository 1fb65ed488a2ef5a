import type { RecipeContent } from '@/lib/recipes/schema'
import type { CurvePoint } from '@/lib/science/heat-dose'
import type { SiteRules } from '@/lib/science/site-rules'
import type { StaveHistoryOptions } from '@/lib/science/stave'

/** What the stave model needs of a recipe. */
export type StavedContent = Pick<RecipeContent, 'thicknessMm'> & {
  leadPlace: Pick<RecipeContent['leadPlace'], 'depthMm'>
  preheat: Pick<RecipeContent['preheat'], 'moistureMinPercent' | 'moistureMaxPercent'>
}

/** A plan is drawn for staves in the middle of the recipe's moisture band, % of dry mass. */
export function planMoisturePercent({ preheat }: Pick<StavedContent, 'preheat'>): number {
  return (preheat.moistureMinPercent + preheat.moistureMaxPercent) / 2
}

/** What the site's rules say of every stave: wood, room, dose and the errors that make the ranges. */
export function siteStaveOptions(rules: SiteRules) {
  return {
    specificGravity: rules.stave.specificGravity,
    roomTempC: rules.stave.roomTempC,
    coldFaceHWPerM2K: rules.stave.coldFaceHWPerM2K,
    dose: rules.dose,
    toastDepthDoseMin: rules.stave.toastDepthDoseMin,
    probeDepthErrorMm: rules.stave.probeDepthErrorMm,
    diffusivityErrorShare: rules.stave.diffusivityErrorShare,
  }
}

/**
 * The stave model's input for a plan: the plan's curve at the lead probe's depth, the middle of the recipe's moisture
 * band, and the site's wood and room. A plan has no probe error, so the range of its toast depth is that of the
 * probe's depth and the wood.
 */
export function staveOptionsOf(
  content: StavedContent,
  points: readonly CurvePoint[],
  rules: SiteRules,
  columns: number,
): StaveHistoryOptions {
  return {
    points,
    columns,
    thicknessMm: content.thicknessMm,
    probeDepthMm: content.leadPlace.depthMm,
    moisturePercent: planMoisturePercent(content),
    ...siteStaveOptions(rules),
  }
}
