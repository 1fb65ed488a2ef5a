import type * as z from 'zod'
import { GatewayEntity } from '@/entities/gateway'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { env } from '@/lib/env'
import { AppError, invalidField } from '@/lib/errors'
import type { saveGatewaySchema } from '@/lib/probes/schema'
import { now } from '@/lib/runtime'

/** Registers a gateway. One that may replay past instants needs a person's decision under `serve`, so it is audited by name. */
export async function createGateway(
  actor: Actor,
  input: z.infer<typeof saveGatewaySchema>,
): Promise<{ id: string }> {
  requirePermission(actor, 'room:write')
  if (input.mayReplay && env().EMBERSTAVE_MODE === 'serve' && actor.kind !== 'person') {
    throw new AppError('not allowed', 'An administrator has to turn replay on.')
  }
  return inTransaction(async (em) => {
    if ((await em.findOne(GatewayEntity, { name: input.name })) !== null) {
      throw invalidField('name', 'A gateway has this name already.')
    }
    const gateway = em.create(GatewayEntity, {
      name: input.name,
      mayReplay: input.mayReplay,
      createdAt: now(),
    })
    await em.persistAndFlush(gateway)
    await writeAuditEntry(em, actor, 'gateway.registered', { type: 'gateway', id: gateway.id }, { ...input })
    return { id: gateway.id }
  })
}
