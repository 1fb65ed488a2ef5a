import type * as z from 'zod'
import { RepeatabilityPlacementEntity } from '@/entities/repeatability-placement'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { lockOpenStudy } from '@/lib/probes/lock-study'
import { readStudy } from '@/lib/probes/read-study'
import type { strikePlacementSchema, StudyDto } from '@/lib/probes/study-schema'
import { now } from '@/lib/runtime'

/** Strikes out a placement that went wrong: it stays with its reason, and does not count. */
export async function strikePlacement(
  actor: Actor,
  input: z.infer<typeof strikePlacementSchema> & { studyId: string; placementId: string },
): Promise<StudyDto> {
  requirePermission(actor, 'checks:write')
  const person = requirePerson(actor)
  return inTransaction(async (em) => {
    const study = await lockOpenStudy(em, input.studyId)
    const placement = await em.findOne(RepeatabilityPlacementEntity, {
      id: input.placementId,
      studyId: study.id,
    })
    if (placement === null) throw new AppError('not found', 'This study has no such placement.')
    if (placement.struckAt) throw new AppError('conflict', 'This placement is struck out already.')
    em.assign(placement, { struckAt: now(), struckBy: person.accountId, strikeReason: input.reason })
    await em.flush()
    await writeAuditEntry(
      em,
      actor,
      'repeatability.struck out',
      { type: 'repeatability study', id: study.id },
      { placementId: placement.id, position: placement.position, reason: input.reason },
    )
    return readStudy(em, study.id)
  })
}
