import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm } from '@/lib/db/orm'
import { readStudy } from '@/lib/probes/read-study'
import type { StudyDto } from '@/lib/probes/study-schema'

/** One study of repeat placements. @throws AppError 'not found' */
export async function getStudy(actor: Actor, input: { id: string }): Promise<StudyDto> {
  requirePermission(actor, 'checks:read')
  return readStudy(await forkEm(), input.id)
}
