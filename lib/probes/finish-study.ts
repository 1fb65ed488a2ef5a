import type * as z from 'zod'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { signAs } from '@/lib/auth/sign'
import { inTransaction } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { formatCount } from '@/lib/format'
import { lockOpenStudy } from '@/lib/probes/lock-study'
import { readStudy } from '@/lib/probes/read-study'
import type { signStudySchema, StudyDto } from '@/lib/probes/study-schema'
import { sha256OfJson } from '@/lib/recipes/content-sha256'
import { now } from '@/lib/runtime'
import { leastPlacements } from '@/lib/science/repeatability'

/** Ends a study with its result, by signature: the placements and the figure are what the signature carries. */
export async function finishStudy(
  actor: Actor,
  input: z.infer<typeof signStudySchema> & { id: string },
): Promise<StudyDto> {
  requirePermission(actor, 'checks:write')
  const person = requirePerson(actor)
  return inTransaction(async (em) => {
    const study = await lockOpenStudy(em, input.id)
    const { placements, result } = await readStudy(em, study.id)
    if (result === null)
      throw new AppError('conflict', whyNot(placements.filter((one) => !one.struck).length))
    const { id: signatureId } = await signAs(em, person, {
      password: input.password,
      meaning: input.meaning,
      subject: {
        type: 'repeatability study',
        id: study.id,
        sha256: sha256OfJson({ placements, result }),
      },
    })
    em.assign(study, { state: 'finished', endedAt: now(), signatureId, result })
    await em.flush()
    await writeAuditEntry(
      em,
      actor,
      'repeatability.finished',
      { type: 'repeatability study', id: study.id },
      { n: result.n, halfWidthC: result.halfWidthC, halfWidthLog10: result.halfWidthLog10 },
    )
    return readStudy(em, study.id)
  })
}

function whyNot(count: number): string {
  if (count < leastPlacements) {
    return `${formatCount(count, 'placement')} so far; it takes ${leastPlacements} to say anything. Place the probe again.`
  }
  return 'All differences are alike, which placing a probe never gives. Read them more finely.'
}
