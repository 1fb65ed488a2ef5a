'use client'

import { useMemo } from 'react'
import { Pair } from '@/components/chart/pair'
import type { TemperatureUnit } from '@/lib/format'
import { planOf } from '@/lib/recipes/plan-of'
import type { RecipeContent } from '@/lib/recipes/schema'
import { staveOptionsOf } from '@/lib/recipes/stave-of'
import type { SiteRules } from '@/lib/science/site-rules'
import { useWood } from './use-wood'

/** Enough for a picture of this size. */
const COLUMNS = 40
const COARSE_CELL_MM = 1.5

/** The small pair of a version's plan; its wood follows from the worker, so that a long list is there at once. */
export function PlanThumb({
  title,
  content,
  rules,
  unit,
}: {
  title: string
  content: RecipeContent
  rules: SiteRules
  unit: TemperatureUnit
}) {
  const plan = useMemo(() => planOf(content, rules.dose), [content, rules])
  const options = useMemo(
    () => ({ ...staveOptionsOf(content, plan.points, rules, COLUMNS), cellMm: COARSE_CELL_MM }),
    [content, plan, rules],
  )
  const wood = useWood(options)
  return (
    <Pair
      size="small"
      title={title}
      planBand={plan.band}
      stages={[]}
      lead={{
        name: 'plan',
        timeS: plan.points.map((point) => point.timeS),
        tempC: plan.points.map((point) => point.tempC),
      }}
      wood={wood ?? emptyWood}
      unit={unit}
      widthPx={150}
      heightPx={62}
      woodShare={0.38}
      className="h-[62px] w-[150px]"
    />
  )
}

/** Keeps the wood's place until it is there, so that nothing moves. */
const emptyWood = {
  timesS: [],
  depthsMm: [0, 15],
  log10Dose: [],
  isotherm100Mm: [],
  isotherm150Mm: [],
  toastDepthMm: [],
}
