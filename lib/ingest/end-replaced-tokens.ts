import { writeAuditEntry } from '@/lib/audit/write-entry'
import { systemActor } from '@/lib/auth/actor'
import { inTransaction, queryRows } from '@/lib/db/orm'

/** A new token was used for the first time: those that it replaces end. Doing it again changes nothing. */
export async function endReplacedTokens(tokenId: string, at: Date): Promise<void> {
  await inTransaction(async (em) => {
    const ended = await queryRows<{ id: string; gateway_id: string }>(
      em,
      `update gateway_tokens set revoked_at = ? where replaced_by = ? and revoked_at is null
       returning id, gateway_id`,
      [at, tokenId],
    )
    for (const { id, gateway_id } of ended) {
      await writeAuditEntry(
        em,
        systemActor('rotation of device tokens'),
        'gateway.token revoked',
        { type: 'gateway', id: gateway_id },
        { tokenId: id, replacedBy: tokenId },
      )
    }
  })
}
