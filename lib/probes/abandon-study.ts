import type * as z from 'zod'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { lockOpenStudy } from '@/lib/probes/lock-study'
import { readStudy } from '@/lib/probes/read-study'
import type { strikePlacementSchema, StudyDto } from '@/lib/probes/study-schema'
import { now } from '@/lib/runtime'

/** Ends a study without a result; its placements stay on record. */
export async function abandonStudy(
  actor: Actor,
  input: z.infer<typeof strikePlacementSchema> & { id: string },
): Promise<StudyDto> {
  requirePermission(actor, 'checks:write')
  requirePerson(actor)
  return inTransaction(async (em) => {
    const study = await lockOpenStudy(em, input.id)
    em.assign(study, { state: 'abandoned', endedAt: now(), endReason: input.reason })
    await em.flush()
    await writeAuditEntry(
      em,
      actor,
      'repeatability.abandoned',
      { type: 'repeatability study', id: study.id },
      { reason: input.reason },
    )
    return readStudy(em, study.id)
  })
}
