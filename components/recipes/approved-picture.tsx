'use client'

import type { TemperatureUnit } from '@/lib/format'
import type { RecipeVersionDto } from '@/lib/recipes/schema'
import { planMoisturePercent } from '@/lib/recipes/stave-of'
import type { SiteRules } from '@/lib/science/site-rules'
import { PlanPicture } from './plan-picture'
import { usePlan } from './use-plan'

/** One version's plan, large, to be looked at. */
export function ApprovedPicture({
  version,
  rules,
  unit,
}: {
  version: RecipeVersionDto
  rules: SiteRules
  unit: TemperatureUnit
}) {
  const view = usePlan(version.content, rules)
  if (view === null) return null
  return (
    <PlanPicture
      title={`${version.recipeName}, version ${version.number}`}
      name={`version ${version.number}`}
      plan={view.plan}
      wood={view.wood}
      rules={rules}
      unit={unit}
      depthMm={version.content.leadPlace.depthMm}
      moisturePercent={planMoisturePercent(version.content)}
      limitC={version.content.limits.woodMaximumC}
      shadow={null}
    />
  )
}
