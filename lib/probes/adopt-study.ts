import type * as z from 'zod'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { signAs } from '@/lib/auth/sign'
import { inTransaction } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { lockStudy } from '@/lib/probes/lock-study'
import { readStudy } from '@/lib/probes/read-study'
import type { signStudySchema, StudyDto } from '@/lib/probes/study-schema'
import { sha256OfJson } from '@/lib/recipes/content-sha256'
import { now } from '@/lib/runtime'
import { writeSettingsVersion } from '@/lib/site/write-settings-version'
import { readSiteSettings } from '@/lib/site/get-site-settings'

/**
 * Makes a finished study the site's own same-mount repeatability, by signature, as a new version of the settings:
 * scores and the bench's smallest tolerance judge by it from then on. Scores that are made keep theirs.
 */
export async function adoptStudy(
  actor: Actor,
  input: z.infer<typeof signStudySchema> & { id: string },
): Promise<StudyDto> {
  requirePermission(actor, 'repeatability:adopt')
  const person = requirePerson(actor)
  return inTransaction(async (em) => {
    const study = await lockStudy(em, input.id)
    const { number, result, state } = await readStudy(em, study.id)
    if (state !== 'finished' || result === null) {
      throw new AppError('conflict', `Study ${number} is ${state}: only a finished one has a figure.`)
    }
    if (study.adoptedAt) {
      throw new AppError('conflict', `Study ${number} was adopted with version ${study.adoptedVersion}.`)
    }
    const before = await readSiteSettings(em)
    const sameMountLog10 = roundUp(result.halfWidthLog10)
    await signAs(em, person, {
      password: input.password,
      meaning: input.meaning,
      subject: { type: 'repeatability study', id: study.id, sha256: sha256OfJson(result) },
    })
    const { version } = await writeSettingsVersion(
      em,
      person,
      {
        version: before.version,
        name: before.name,
        serialPrefix: before.serialPrefix,
        timeZone: before.timeZone,
        rules: {
          ...before.rules,
          errors: { ...before.rules.errors, sameMountLog10, isSameMountAssumed: false },
        },
        room: before.room,
      },
      { repeatabilityStudy: number },
    )
    em.assign(study, { adoptedAt: now(), adoptedBy: person.accountId, adoptedVersion: version })
    await em.flush()
    await writeAuditEntry(
      em,
      actor,
      'repeatability.adopted',
      { type: 'repeatability study', id: study.id },
      { sameMountLog10, settingsVersion: version },
    )
    return readStudy(em, study.id)
  })
}

/** To the next 0.0001: never finer than it was measured. */
function roundUp(log10: number): number {
  return Math.ceil(log10 * 10_000 - 1e-9) / 10_000
}
