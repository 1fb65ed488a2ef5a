import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import type { GatewayDto } from '@/lib/probes/schema'
import type { GatewayRow } from '@/lib/probes/to-gateway'
import { gatewaySelect, toGateway } from '@/lib/probes/to-gateway'
import { now } from '@/lib/runtime'

/** All gateways by name, those in use first, with what each has sent, had refused and declared lost. */
export async function listGateways(actor: Actor): Promise<{ items: GatewayDto[]; nextCursor: null }> {
  requirePermission(actor, 'room:read')
  const rows = await queryRows<GatewayRow>(
    await forkEm(),
    `${gatewaySelect} order by g.retired_at is not null, g.name`,
    [now()],
  )
  return { items: rows.map(toGateway), nextCursor: null }
}
