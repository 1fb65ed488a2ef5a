import type * as z from 'zod'
import type { Actor } from '@/lib/auth/actor'
import { isAllowed, requirePermission } from '@/lib/auth/permissions'
import type { Page } from '@/lib/http/cursor'
import { getProbe } from '@/lib/probes/get-probe'
import { listGateways } from '@/lib/probes/list-gateways'
import { listHearths } from '@/lib/probes/list-hearths'
import { listProbeFirings } from '@/lib/probes/list-probe-firings'
import type {
  GatewayDto,
  HearthDto,
  listProbeFiringsQuery,
  ProbeDetailDto,
  ProbeFiringDto,
} from '@/lib/probes/schema'
import { nowMs } from '@/lib/runtime'
import { currentSite } from '@/lib/site/current-site'

export type ProbePage = {
  probe: ProbeDetailDto
  firings: Page<ProbeFiringDto>
  /** For the dialog that moves it; gateways in use only. */
  hearths: HearthDto[]
  gateways: GatewayDto[]
  timeZone: string
  nowMs: number
  mayWrite: boolean
  mayCheck: boolean
}

/** Everything that the page of one probe shows. */
export async function getProbePage(
  actor: Actor,
  input: z.infer<typeof listProbeFiringsQuery> & { id: string },
): Promise<ProbePage> {
  requirePermission(actor, 'room:read')
  const probe = await getProbe(actor, { id: input.id })
  const [firings, hearths, gateways, site] = await Promise.all([
    listProbeFirings(actor, { ...input, limit: 20 }),
    listHearths(actor),
    listGateways(actor),
    currentSite(),
  ])
  return {
    probe,
    firings,
    hearths: hearths.items,
    gateways: gateways.items.filter((gateway) => gateway.retiredAt === null),
    timeZone: site.timeZone,
    nowMs: nowMs(),
    mayWrite: isAllowed(actor, 'room:write'),
    mayCheck: isAllowed(actor, 'checks:write'),
  }
}
