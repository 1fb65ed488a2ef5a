'use client'

import { useMemo, useState } from 'react'
import type { PairWood } from '@/components/chart/pair-types'
import type { Plan, PlannedContent } from '@/lib/recipes/plan-of'
import { planOf } from '@/lib/recipes/plan-of'
import type { StavedContent } from '@/lib/recipes/stave-of'
import { staveOptionsOf } from '@/lib/recipes/stave-of'
import type { SiteRules } from '@/lib/science/site-rules'
import { useWood } from './use-wood'

/** Columns of the large picture's wood. */
const COLUMNS = 180

type Drawable = PlannedContent & StavedContent

/**
 * Plan and wood of what is being typed. While a number is missing (`whole` is null) the last whole plan stays;
 * `isBehind` says so. Null only when there never was a whole one.
 */
export function usePlan(
  whole: Drawable | null,
  rules: SiteRules,
): { plan: Plan; drawn: Drawable; wood: PairWood | null; isBehind: boolean } | null {
  const [kept, setKept] = useState(whole)
  const isSame = JSON.stringify(kept) === JSON.stringify(whole)
  if (whole !== null && !isSame) setKept(whole)
  const plan = useMemo(() => (kept === null ? null : planOf(kept, rules.dose)), [kept, rules])
  const options = useMemo(
    () => (kept === null || plan === null ? null : staveOptionsOf(kept, plan.points, rules, COLUMNS)),
    [kept, plan, rules],
  )
  const wood = useWood(options)
  return kept === null || plan === null ? null : { plan, drawn: kept, wood, isBehind: whole === null }
}
