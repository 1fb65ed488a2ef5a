import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { insertToken } from '@/lib/ingest/replace-tokens'
import { requireGatewayInUse } from '@/lib/ingest/require-gateway-in-use'
import type { IssuedToken } from '@/lib/ingest/schema'
import { now } from '@/lib/runtime'

/**
 * Makes a device token for a gateway: 256 random bits, answered this once and kept as a hash. Tokens made before
 * stay good until they are revoked; `rotateGatewayToken` replaces one.
 */
export async function issueGatewayToken(actor: Actor, input: { gatewayId: string }): Promise<IssuedToken> {
  requirePermission(actor, 'room:write')
  return inTransaction(async (em) => {
    const gateway = await requireGatewayInUse(em, input.gatewayId)
    const made = await insertToken(em, gateway.id, actor.kind === 'person' ? actor.accountId : null, now())
    await writeAuditEntry(
      em,
      actor,
      'gateway.token issued',
      { type: 'gateway', id: gateway.id },
      { tokenId: made.id, gateway: gateway.name },
    )
    return made
  })
}
