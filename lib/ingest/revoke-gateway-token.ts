import { GatewayTokenEntity } from '@/entities/gateway-token'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { now } from '@/lib/runtime'

/** Revokes a device token: the gateway's next message with it is refused. Doing it again changes nothing. */
export async function revokeGatewayToken(
  actor: Actor,
  input: { gatewayId: string; tokenId: string },
): Promise<void> {
  requirePermission(actor, 'room:write')
  await inTransaction(async (em) => {
    const row = await em.findOne(GatewayTokenEntity, { id: input.tokenId, gatewayId: input.gatewayId })
    if (row === null) throw new AppError('not found', 'This gateway has no such token.')
    if (row.revokedAt !== null && row.revokedAt !== undefined) return
    em.assign(row, { revokedAt: now() })
    await writeAuditEntry(
      em,
      actor,
      'gateway.token revoked',
      { type: 'gateway', id: row.gatewayId },
      { tokenId: row.id },
    )
  })
}
