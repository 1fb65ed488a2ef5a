'use client'

import type { TemperatureUnit } from '@/lib/format'
import type { RecipeVersionDto } from '@/lib/recipes/schema'
import { planMoisturePercent } from '@/lib/recipes/stave-of'
import type { SiteRules } from '@/lib/science/site-rules'
import { ContentFacts } from './content-facts'
import type { ShadowPlan } from './plan-pair'
import { PlanPicture } from './plan-picture'
import { usePlan } from './use-plan'
import { VersionHistory } from './version-history'

/** The bench of a version that is not to be edited: the same two columns, in words. */
export function ReadBench({
  version,
  shadow,
  rules,
  unit,
  zone,
}: {
  version: RecipeVersionDto
  shadow: ShadowPlan | null
  rules: SiteRules
  unit: TemperatureUnit
  zone: string
}) {
  const { content } = version
  const view = usePlan(content, rules)
  if (view === null) return null
  return (
    <div className="grid gap-x-9 gap-y-6 xl:grid-cols-[minmax(31rem,2fr)_minmax(0,3fr)]">
      <div className="min-w-0 space-y-5">
        <ContentFacts
          content={content}
          targetDoseMinutes={version.targetDoseMinutes}
          doses={view.plan.stages.map((stage) => stage.doseMin)}
          refTempC={rules.dose.refTempC}
          unit={unit}
        />
        <VersionHistory version={version} zone={zone} />
      </div>
      <PlanPicture
        title={`${version.recipeName}, version ${version.number}`}
        name={`version ${version.number}`}
        plan={view.plan}
        wood={view.wood}
        rules={rules}
        unit={unit}
        depthMm={content.leadPlace.depthMm}
        moisturePercent={planMoisturePercent(content)}
        limitC={content.limits.woodMaximumC}
        shadow={shadow}
      />
    </div>
  )
}
