import type * as z from 'zod'
import type { Actor } from '@/lib/auth/actor'
import { isAllowed, requirePermission } from '@/lib/auth/permissions'
import { listGatewayTokens } from '@/lib/ingest/list-gateway-tokens'
import type { TokenList } from '@/lib/ingest/schema'
import { listGateways } from '@/lib/probes/list-gateways'
import { listHearths } from '@/lib/probes/list-hearths'
import { listProbes } from '@/lib/probes/list-probes'
import { listWaterChecks } from '@/lib/probes/list-water-checks'
import type { GatewayDto, HearthDto, listProbesQuery, ProbeDto, WaterCheckDto } from '@/lib/probes/schema'
import { currentSite } from '@/lib/site/current-site'

export type RoomPicture = {
  probes: ProbeDto[]
  nextProbeCursor: string | null
  hearths: HearthDto[]
  gateways: GatewayDto[]
  /** By gateway; empty for who may not write. */
  tokens: Readonly<Record<string, TokenList['items']>>
  /** The newest ten. */
  waterChecks: WaterCheckDto[]
  timeZone: string
  mayWrite: boolean
  mayCheck: boolean
}

/** Everything that the page of the room's equipment shows; device tokens are listed for administrators only. */
export async function getRoomPicture(
  actor: Actor,
  query: z.infer<typeof listProbesQuery>,
): Promise<RoomPicture> {
  requirePermission(actor, 'room:read')
  const mayWrite = isAllowed(actor, 'room:write')
  const [probes, hearths, gateways, water, site] = await Promise.all([
    listProbes(actor, query),
    listHearths(actor),
    listGateways(actor),
    listWaterChecks(actor, { limit: 10 }),
    currentSite(),
  ])
  const lists = mayWrite
    ? await Promise.all(gateways.items.map(({ id }) => listGatewayTokens(actor, { gatewayId: id })))
    : []
  return {
    probes: probes.items,
    nextProbeCursor: probes.nextCursor,
    hearths: hearths.items,
    gateways: gateways.items,
    tokens: Object.fromEntries(gateways.items.map(({ id }, i) => [id, lists[i]?.items ?? []])),
    waterChecks: water.items,
    timeZone: site.timeZone,
    mayWrite,
    mayCheck: isAllowed(actor, 'checks:write'),
  }
}
