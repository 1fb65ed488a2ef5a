import type * as z from 'zod'
import type { Actor } from '@/lib/auth/actor'
import { isAllowed, requirePermission } from '@/lib/auth/permissions'
import type { Page } from '@/lib/http/cursor'
import { listGateways } from '@/lib/probes/list-gateways'
import { listHearths } from '@/lib/probes/list-hearths'
import { listProbes } from '@/lib/probes/list-probes'
import type { GatewayDto, HearthDto, listProbesQuery, ProbeDto } from '@/lib/probes/schema'
import { currentSite } from '@/lib/site/current-site'

export type ProbesPage = {
  probes: Page<ProbeDto>
  /** For filters and dialogs; gateways in use only. */
  hearths: HearthDto[]
  gateways: GatewayDto[]
  /** Of all probes in use, whatever is filtered. */
  overdueCount: number
  timeZone: string
  mayWrite: boolean
  mayCheck: boolean
}

const countAtMost = 100

/** Everything that the page of the room's probes shows. */
export async function getProbesPage(
  actor: Actor,
  query: z.infer<typeof listProbesQuery>,
): Promise<ProbesPage> {
  requirePermission(actor, 'room:read')
  const [probes, overdue, hearths, gateways, site] = await Promise.all([
    listProbes(actor, query),
    listProbes(actor, { due: 'overdue', limit: countAtMost }),
    listHearths(actor),
    listGateways(actor),
    currentSite(),
  ])
  return {
    probes,
    hearths: hearths.items,
    gateways: gateways.items.filter((gateway) => gateway.retiredAt === null),
    overdueCount: overdue.items.length,
    timeZone: site.timeZone,
    mayWrite: isAllowed(actor, 'room:write'),
    mayCheck: isAllowed(actor, 'checks:write'),
  }
}
