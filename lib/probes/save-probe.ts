import type * as z from 'zod'
import { GatewayEntity } from '@/entities/gateway'
import { HearthEntity } from '@/entities/hearth'
import { ProbeEntity } from '@/entities/probe'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { AppError, invalidField } from '@/lib/errors'
import type { saveProbeSchema } from '@/lib/probes/schema'
import { now } from '@/lib/runtime'

/** Adds a probe, or changes the one with the id; one that reads a live firing cannot be moved. */
export async function saveProbe(
  actor: Actor,
  input: z.infer<typeof saveProbeSchema> & { id?: string },
): Promise<{ id: string }> {
  requirePermission(actor, 'room:write')
  const { id, ...fields } = input
  return inTransaction(async (em) => {
    if ((await em.findOne(GatewayEntity, { id: input.gatewayId })) === null) {
      throw invalidField('gatewayId', 'Choose a gateway from the list.')
    }
    if (input.hearthId !== null && (await em.findOne(HearthEntity, { id: input.hearthId })) === null) {
      throw invalidField('hearthId', 'Choose a hearth from the list.')
    }
    const twin = await em.findOne(ProbeEntity, {
      gatewayId: input.gatewayId,
      channel: input.channel,
      retiredAt: null,
    })
    if (twin !== null && twin.id !== id)
      throw invalidField('channel', `${twin.name} is on this channel already.`)
    const probe = id === undefined ? null : await em.findOne(ProbeEntity, { id })
    if (id !== undefined && probe === null) throw new AppError('not found', 'There is no such probe.')
    if (probe !== null) {
      const live = await queryRows(
        em,
        'select 1 from firing_probes where probe_id = ? and until_at is null',
        [probe.id],
      )
      if (live.length > 0)
        throw new AppError('conflict', 'This probe reads a live firing. Finish that first.')
    }
    const saved = probe ?? em.create(ProbeEntity, { ...fields, createdAt: now() })
    if (probe !== null) em.assign(probe, fields)
    await em.persistAndFlush(saved)
    await writeAuditEntry(
      em,
      actor,
      probe === null ? 'probe.added' : 'probe.changed',
      { type: 'probe', id: saved.id },
      fields,
    )
    return { id: saved.id }
  })
}
