import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import type { WaterCheckDto } from '@/lib/probes/schema'
import type { WaterCheckRow } from '@/lib/probes/to-water-check'
import { toWaterCheck, waterCheckSelect } from '@/lib/probes/to-water-check'
import { currentSite } from '@/lib/site/current-site'

/** The newest check of each source of water, the one checked last first: that source is taken unless another is chosen. */
export async function listWaterSources(actor: Actor): Promise<{ items: WaterCheckDto[]; nextCursor: null }> {
  requirePermission(actor, 'checks:read')
  const em = await forkEm()
  const { checks } = (await currentSite(em)).rules
  const rows = await queryRows<WaterCheckRow>(
    em,
    `select * from (
       select distinct on (lower(w.source)) w.* from (${waterCheckSelect}) w
        order by lower(w.source), w.checked_at desc, w.id desc) newest
      order by checked_at desc, id desc`,
  )
  return { items: rows.map((row) => toWaterCheck(row, checks)), nextCursor: null }
}
