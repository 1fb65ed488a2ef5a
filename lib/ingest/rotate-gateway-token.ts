import { GatewayTokenEntity } from '@/entities/gateway-token'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { requireGatewayInUse } from '@/lib/ingest/require-gateway-in-use'
import { insertToken, letNewReplace } from '@/lib/ingest/replace-tokens'
import type { IssuedToken } from '@/lib/ingest/schema'
import { now } from '@/lib/runtime'

/**
 * A new device token in place of one: the old one serves until the new is first used, or 24 h at most, so that the
 * gateway is never without. @throws AppError 'not found'; 'conflict' for one that has ended or is being replaced
 */
export async function rotateGatewayToken(
  actor: Actor,
  input: { gatewayId: string; tokenId: string },
): Promise<IssuedToken> {
  requirePermission(actor, 'room:write')
  return inTransaction(async (em) => {
    const gateway = await requireGatewayInUse(em, input.gatewayId)
    const old = await em.findOne(GatewayTokenEntity, { id: input.tokenId, gatewayId: gateway.id })
    if (old === null) throw new AppError('not found', 'This gateway has no such token.')
    if (old.revokedAt) throw new AppError('conflict', 'This token was revoked. Make a new one instead.')
    if (old.expiresAt) {
      throw new AppError('conflict', 'This token is being replaced already. Rotate the newer one.')
    }
    const at = now()
    const made = await insertToken(em, gateway.id, actor.kind === 'person' ? actor.accountId : null, at)
    await letNewReplace(em, { gatewayId: gateway.id, oldId: old.id, newId: made.id, at })
    await writeAuditEntry(
      em,
      actor,
      'gateway.token rotated',
      { type: 'gateway', id: gateway.id },
      { tokenId: made.id, replaces: old.id, gateway: gateway.name },
    )
    return made
  })
}
