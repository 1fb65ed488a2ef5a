import { randomBytes } from 'node:crypto'
import { GatewayEntity } from '@/entities/gateway'
import { GatewayTokenEntity } from '@/entities/gateway-token'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import type { IssuedToken } from '@/lib/ingest/schema'
import { deviceTokenSha256 } from '@/lib/ingest/verify-device-token'
import { now } from '@/lib/runtime'

/**
 * Makes a device token for a gateway: 256 random bits, answered this once and kept as a hash. Tokens made before
 * stay good until they are revoked, so that a gateway can be given its new one without a break.
 */
export async function issueGatewayToken(actor: Actor, input: { gatewayId: string }): Promise<IssuedToken> {
  requirePermission(actor, 'room:write')
  const token = `emb_${randomBytes(32).toString('base64url')}`
  return inTransaction(async (em) => {
    const gateway = await em.findOne(GatewayEntity, { id: input.gatewayId })
    if (gateway === null) throw new AppError('not found', 'There is no such gateway.')
    const row = em.create(GatewayTokenEntity, {
      gatewayId: gateway.id,
      tokenSha256: deviceTokenSha256(token),
      createdAt: now(),
      createdBy: actor.kind === 'person' ? actor.accountId : null,
    })
    await em.persistAndFlush(row)
    await writeAuditEntry(
      em,
      actor,
      'gateway.token issued',
      { type: 'gateway', id: gateway.id },
      { tokenId: row.id, gateway: gateway.name },
    )
    return { id: row.id, token }
  })
}
