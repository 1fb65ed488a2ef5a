import { planIndices, planOf } from '@/lib/recipes/plan-of'
import type { RecipeContent } from '@/lib/recipes/schema'
import { staveOptionsOf } from '@/lib/recipes/stave-of'
import type { FormulaFacts } from '@/lib/science/formula'
import type { PredictorKey } from '@/lib/science/marker-families'
import type { SiteRules } from '@/lib/science/site-rules'
import { staveHistory } from '@/lib/science/stave'

/** What a plan's toast is, for formulas and fits: everything exact but the depth, which is the stave model's. */
export type ToastFacts = {
  predictors: Record<PredictorKey, number | null>
  /** For formulas, with lot assays in the base unit. */
  formula: (lotAssays?: ReadonlyMap<string, number>) => FormulaFacts
}

/** Columns of the stave's history: only its end is read. */
const columns = 2

/**
 * The facts of a recipe version's plan by the site's rules. The stave model runs only when the depth is asked for.
 *
 * @throws RangeError as the plan and the stave model do
 */
export function toastFactsOf(content: RecipeContent, rules: SiteRules, needsDepth: boolean): ToastFacts {
  const plan = planOf(content, rules.dose)
  const { slowMin, fastMin } = planIndices(plan.points, rules.indices, rules.dose.refTempC)
  const toastDepthMm = needsDepth
    ? (staveHistory(staveOptionsOf(content, plan.points, rules, columns)).toastDepthMm.at(-1)?.value ?? null)
    : null
  const { moistureMinPercent, moistureMaxPercent } = content.preheat
  const symbols: [string, number | null][] = [
    ['dose', plan.doseMin],
    ['log10_dose', plan.doseMin > 0 ? Math.log10(plan.doseMin) : null],
    ['slow_index', slowMin],
    ['fast_index', fastMin],
    ['toast_depth', toastDepthMm],
    ['preheat_moisture', (moistureMinPercent + moistureMaxPercent) / 2],
    ['fire_minutes', plan.totalS / 60],
    ['stage_count', content.stages.length],
  ]
  return {
    predictors: { doseMin: plan.doseMin, slowIndexMin: slowMin, fastIndexMin: fastMin, toastDepthMm },
    formula: (lotAssays) => ({
      symbols: new Map([...symbols, ...(lotAssays ?? [])]),
      stages: content.stages.map(({ minutes, targetTempC }) => ({ minutes, targetTempC })),
    }),
  }
}
