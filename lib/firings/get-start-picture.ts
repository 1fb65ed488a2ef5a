import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { listPieces } from '@/lib/batches/list-pieces'
import type { PieceDto } from '@/lib/batches/schema'
import { getCarbonMonoxideLine } from '@/lib/conditions/get-carbon-monoxide-line'
import { listProbes } from '@/lib/probes/list-probes'
import { listWaterSources } from '@/lib/probes/list-water-sources'
import type { ProbeDto, WaterCheckDto } from '@/lib/probes/schema'
import { currentSite } from '@/lib/site/current-site'

/** What a start on a hearth is chosen from, and what its list reminds of. */
export type StartPicture = {
  queue: PieceDto[]
  probes: ProbeDto[]
  waters: WaterCheckDto[]
  carbonMonoxideLine: string
  zone: string
}

/** Everything that the start of a firing shows. */
export async function getStartPicture(actor: Actor, input: { hearthId: string }): Promise<StartPicture> {
  requirePermission(actor, 'firings:run trial')
  const [queue, probes, waters, carbonMonoxideLine, site] = await Promise.all([
    listPieces(actor, { show: 'waiting', limit: 50 }),
    listProbes(actor, { hearthId: input.hearthId, limit: 50 }),
    listWaterSources(actor),
    getCarbonMonoxideLine(actor),
    currentSite(),
  ])
  return {
    queue: queue.items,
    probes: probes.items,
    waters: waters.items,
    carbonMonoxideLine,
    zone: site.timeZone,
  }
}
