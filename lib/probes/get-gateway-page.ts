import * as z from 'zod'
import type { Actor } from '@/lib/auth/actor'
import { isAllowed, requirePermission } from '@/lib/auth/permissions'
import type { Page } from '@/lib/http/cursor'
import { listGatewayTokens } from '@/lib/ingest/list-gateway-tokens'
import type { TokenList } from '@/lib/ingest/schema'
import { getGateway } from '@/lib/probes/get-gateway'
import { listDeclaredLosses } from '@/lib/probes/list-declared-losses'
import { listRefusedReadings } from '@/lib/probes/list-refused-readings'
import type { DeclaredLossDto, GatewayDetailDto, RefusedReadingDto } from '@/lib/probes/schema'
import { nowMs } from '@/lib/runtime'
import { currentSite } from '@/lib/site/current-site'

/** Two lists on one page, each with its own cursor. */
export const gatewayPageQuery = z.strictObject({
  refused: z.string().max(400).optional(),
  lost: z.string().max(400).optional(),
  reason: z.string().max(200).optional(),
})

export type GatewayPage = {
  gateway: GatewayDetailDto
  /** Null for who may not write. */
  tokens: TokenList['items'] | null
  refused: Page<RefusedReadingDto>
  losses: Page<DeclaredLossDto>
  timeZone: string
  nowMs: number
}

const rows = 20

/** Everything that the page of one gateway shows; device tokens for administrators only. */
export async function getGatewayPage(
  actor: Actor,
  input: z.infer<typeof gatewayPageQuery> & { id: string },
): Promise<GatewayPage> {
  requirePermission(actor, 'room:read')
  const { id } = input
  const gateway = await getGateway(actor, { id })
  const [tokens, refused, losses, site] = await Promise.all([
    isAllowed(actor, 'room:write') ? listGatewayTokens(actor, { gatewayId: id }) : null,
    listRefusedReadings(actor, { gatewayId: id, reason: input.reason, cursor: input.refused, limit: rows }),
    listDeclaredLosses(actor, { gatewayId: id, cursor: input.lost, limit: rows }),
    currentSite(),
  ])
  return {
    gateway,
    tokens: tokens?.items ?? null,
    refused,
    losses,
    timeZone: site.timeZone,
    nowMs: nowMs(),
  }
}
