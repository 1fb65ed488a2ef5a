import type { WaterCheckDto } from '@/lib/probes/schema'
import { waterFault } from '@/lib/probes/water-fault'
import { nowMs } from '@/lib/runtime'
import type { SiteRules } from '@/lib/science/site-rules'

export type WaterCheckRow = {
  id: string
  source: string
  tca_ng_per_l: number
  free_chlorine_mg_per_l: number
  checked_at: Date
  due_at: Date
  checked_by: string
  is_newest: boolean
}

/** One row a check; the newest of each source (letter case aside) is the one that counts. */
export const waterCheckSelect = `
  select w.id, w.source, w.tca_ng_per_l, w.free_chlorine_mg_per_l, w.checked_at, w.due_at, a.name as checked_by,
         not exists (select 1 from water_checks n where lower(n.source) = lower(w.source)
           and (n.checked_at, n.id) > (w.checked_at, w.id)) as is_newest
    from water_checks w join accounts a on a.id = w.account_id`

export function toWaterCheck(row: WaterCheckRow, checks: SiteRules['checks']): WaterCheckDto {
  const leftMs = new Date(row.due_at).getTime() - nowMs()
  return {
    id: row.id,
    source: row.source,
    tcaNgPerL: row.tca_ng_per_l,
    freeChlorineMgPerL: row.free_chlorine_mg_per_l,
    checkedAt: new Date(row.checked_at).toISOString(),
    dueAt: new Date(row.due_at).toISOString(),
    checkedBy: row.checked_by,
    isInDate: leftMs > 0,
    isDueSoon: leftMs > 0 && leftMs <= checks.dueSoonDays * 86_400_000,
    overLimit: waterFault(
      { tcaNgPerL: row.tca_ng_per_l, freeChlorineMgPerL: row.free_chlorine_mg_per_l },
      checks,
    ),
    isNewest: row.is_newest,
  }
}
