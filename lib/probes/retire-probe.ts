import type * as z from 'zod'
import { ProbeEntity } from '@/entities/probe'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import type { retireSchema } from '@/lib/probes/schema'
import { now } from '@/lib/runtime'

/** Retires a probe: it stays in every firing that it read, its channel is free, and its readings are refused. */
export async function retireProbe(
  actor: Actor,
  input: z.infer<typeof retireSchema> & { id: string },
): Promise<{ id: string }> {
  requirePermission(actor, 'room:write')
  return inTransaction(async (em) => {
    const probe = await em.findOne(ProbeEntity, { id: input.id })
    if (probe === null) throw new AppError('not found', 'There is no such probe.')
    if (probe.retiredAt) throw new AppError('conflict', `${probe.name} is retired already.`)
    const live = await queryRows(em, 'select 1 from firing_probes where probe_id = ? and until_at is null', [
      probe.id,
    ])
    if (live.length > 0) {
      throw new AppError('conflict', 'This probe reads a live firing. Swap it there, or finish that first.')
    }
    const studies = await queryRows(
      em,
      `select 1 from repeatability_studies where state = 'open' and ? in (probe_id, reference_probe_id)`,
      [probe.id],
    )
    if (studies.length > 0) {
      throw new AppError(
        'conflict',
        'Repeat placements are under way with this probe. Finish or abandon them.',
      )
    }
    const at = now()
    em.assign(probe, {
      retiredAt: at,
      changedAt: at,
      changedBy: actor.kind === 'person' ? actor.accountId : null,
    })
    await em.flush()
    await writeAuditEntry(
      em,
      actor,
      'probe.retired',
      { type: 'probe', id: probe.id },
      { name: probe.name, reason: input.reason },
    )
    return { id: probe.id }
  })
}
