import type * as z from 'zod'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { formatCount } from '@/lib/format'
import { requireGatewayInUse } from '@/lib/ingest/require-gateway-in-use'
import type { retireSchema } from '@/lib/probes/schema'
import { now } from '@/lib/runtime'

/** Retires a gateway without probes: its tokens and open code end, what it sent stays. */
export async function retireGateway(
  actor: Actor,
  input: z.infer<typeof retireSchema> & { id: string },
): Promise<{ id: string }> {
  requirePermission(actor, 'room:write')
  return inTransaction(async (em) => {
    const gateway = await requireGatewayInUse(em, input.id)
    const probes = await queryRows(em, 'select 1 from probes where gateway_id = ? and retired_at is null', [
      gateway.id,
    ])
    if (probes.length > 0) {
      throw new AppError(
        'conflict',
        `${gateway.name} still reads ${formatCount(probes.length, 'probe')}. Move or retire them first.`,
      )
    }
    const at = now()
    const revoked = await queryRows<{ id: string }>(
      em,
      'update gateway_tokens set revoked_at = ? where gateway_id = ? and revoked_at is null returning id',
      [at, gateway.id],
    )
    await queryRows(
      em,
      'update gateway_enrolments set cancelled_at = ? where gateway_id = ? and used_at is null and cancelled_at is null',
      [at, gateway.id],
    )
    em.assign(gateway, { retiredAt: at })
    await em.flush()
    await writeAuditEntry(
      em,
      actor,
      'gateway.retired',
      { type: 'gateway', id: gateway.id },
      { name: gateway.name, reason: input.reason, tokensRevoked: revoked.map(({ id }) => id) },
    )
    return { id: gateway.id }
  })
}
