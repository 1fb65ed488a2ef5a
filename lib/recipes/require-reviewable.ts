import { AppError } from '@/lib/errors'
import type { FieldErrors } from '@/lib/errors'
import { explainTolerance } from '@/lib/recipes/honest-tolerance'
import type { RecipeVersionDto } from '@/lib/recipes/schema'
import { recipeContentSchema } from '@/lib/recipes/schema'
import type { SiteRules } from '@/lib/science/site-rules'

/** Why a version cannot go to review or be approved, by field of its content; empty when nothing stands against it. */
export function findReviewFaults(
  version: Pick<RecipeVersionDto, 'content' | 'planDoseMinutes'>,
  rules: SiteRules,
): FieldErrors {
  const fields: FieldErrors = {}
  const parsed = recipeContentSchema.safeParse(version.content)
  for (const issue of parsed.error?.issues ?? []) fields[`content.${issue.path.join('.')}`] ??= issue.message
  const tolerance = explainTolerance(version.content.doseToleranceLog10, rules)
  if (tolerance !== null) fields['content.doseToleranceLog10'] ??= tolerance
  if (!(version.planDoseMinutes > 0)) {
    fields['content.stages'] ??=
      `This plan never rises above ${rules.dose.baseTempC} °C, so it has no dose to hold a firing to.`
  }
  return fields
}

/** @throws AppError 'invalid' with a sentence beside each field that stands against review. */
export function requireReviewable(
  version: Pick<RecipeVersionDto, 'content' | 'planDoseMinutes'>,
  rules: SiteRules,
): void {
  const fields = findReviewFaults(version, rules)
  const first = Object.values(fields)[0]
  if (first !== undefined) throw new AppError('invalid', first, { fields })
}
