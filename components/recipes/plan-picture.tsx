'use client'

import { Pair } from '@/components/chart/pair'
import type { DraggedPoint, PairWood } from '@/components/chart/pair-types'
import type { TemperatureUnit } from '@/lib/format'
import type { Plan } from '@/lib/recipes/plan-of'
import type { SiteRules } from '@/lib/science/site-rules'
import { PlanFigures } from './plan-figures'
import { planPairProps } from './plan-pair'
import type { ShadowPlan } from './plan-pair'

export type PlanPictureProps = {
  /** What the picture is of, for those who hear it: "Quay medium, version 5". */
  title: string
  /** At the curve's end: "version 5". */
  name: string
  plan: Plan
  wood: PairWood | null
  rules: SiteRules
  unit: TemperatureUnit
  depthMm: number
  /** Of the staves that the plan is drawn for, % of dry mass. */
  moisturePercent: number
  limitC: number | null
  shadow: ShadowPlan | null
  selectedStage?: number
  onDragPoint?: (point: DraggedPoint) => void
  onDragEnd?: () => void
}

/** The figures and the large pair of a plan. It draws what it is given and fetches nothing. */
export function PlanPicture(props: PlanPictureProps) {
  const { plan, wood, rules, unit, depthMm, moisturePercent, onDragPoint, onDragEnd } = props
  return (
    <section aria-label="The plan" className="min-w-0">
      <PlanFigures {...{ plan, wood, rules, unit, depthMm, moisturePercent }} />
      <Pair
        {...planPairProps({ ...props, model: rules.dose })}
        size="large"
        className="mt-2 h-[640px]"
        onDragPoint={onDragPoint}
        onDragEnd={onDragEnd}
      />
    </section>
  )
}
