import { randomBytes } from 'node:crypto'
import type { EntityManager } from '@mikro-orm/postgresql'
import { GatewayTokenEntity } from '@/entities/gateway-token'
import { queryRows } from '@/lib/db/orm'
import { deviceTokenSha256 } from '@/lib/ingest/verify-device-token'

/** A token that is being replaced serves until the new one is first used, and this long at most. */
export const replacedForMs = 24 * 3600 * 1000

/** A new device token's row and the token itself, 256 random bits: kept as a hash, answered once. */
export async function insertToken(
  em: EntityManager,
  gatewayId: string,
  createdBy: string | null,
  at: Date,
): Promise<{ id: string; token: string }> {
  const token = `emb_${randomBytes(32).toString('base64url')}`
  const row = em.create(GatewayTokenEntity, {
    gatewayId,
    tokenSha256: deviceTokenSha256(token),
    createdAt: at,
    createdBy,
  })
  await em.persistAndFlush(row)
  return { id: row.id, token }
}

/** Lets tokens (all of a gateway's, or one and what it replaces) end when `newId` is first used, or after a day. */
export async function letNewReplace(
  em: EntityManager,
  { gatewayId, oldId, newId, at }: { gatewayId: string; oldId: string | null; newId: string; at: Date },
): Promise<number> {
  const replaced = await queryRows(
    em,
    `update gateway_tokens
        set replaced_by = ?, expires_at = least(expires_at, ?::timestamptz)
      where gateway_id = ? and revoked_at is null and id <> ?
        and (?::uuid is null or id = ?::uuid or replaced_by = ?::uuid) returning id`,
    [newId, new Date(at.getTime() + replacedForMs), gatewayId, newId, oldId, oldId, oldId],
  )
  return replaced.length
}
