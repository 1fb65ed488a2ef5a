import type * as z from 'zod'
import { GatewayEntity } from '@/entities/gateway'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { AppError, invalidField } from '@/lib/errors'
import type { saveGatewaySchema } from '@/lib/probes/schema'

/** Renames a gateway, or says whether it may replay past instants. */
export async function updateGateway(
  actor: Actor,
  input: z.infer<typeof saveGatewaySchema> & { id: string },
): Promise<{ id: string }> {
  requirePermission(actor, 'room:write')
  return inTransaction(async (em) => {
    const gateway = await em.findOne(GatewayEntity, { id: input.id })
    if (gateway === null) throw new AppError('not found', 'There is no such gateway.')
    const twin = await em.findOne(GatewayEntity, { name: input.name })
    if (twin !== null && twin.id !== gateway.id)
      throw invalidField('name', 'A gateway has this name already.')
    em.assign(gateway, { name: input.name, mayReplay: input.mayReplay })
    await em.flush()
    await writeAuditEntry(em, actor, 'gateway.changed', { type: 'gateway', id: gateway.id }, { ...input })
    return { id: gateway.id }
  })
}
