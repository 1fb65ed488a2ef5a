import type * as z from 'zod'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { mailAuthor } from '@/lib/recipes/mail-reviewers'
import { readVersion } from '@/lib/recipes/read-version'
import type { RecipeVersionDto, returnVersionSchema } from '@/lib/recipes/schema'
import { lockVersion, requireRevision } from '@/lib/recipes/version-access'
import { moveVersion } from '@/lib/recipes/version-states'
import { now } from '@/lib/runtime'

type ReturnVersionInput = z.output<typeof returnVersionSchema> & { id: string }

/** A master cooper sends a version back to be a draft, with a reason that the author is told by e-mail. */
export async function returnVersion(actor: Actor, input: ReturnVersionInput): Promise<RecipeVersionDto> {
  requirePermission(actor, 'recipes:approve')
  const person = requirePerson(actor)
  const returned = await inTransaction(async (em) => {
    const version = await lockVersion(em, input.id)
    const state = moveVersion('return', version)
    await requireRevision(em, version, input.revision)
    em.assign(version, {
      state,
      returnedAt: now(),
      returnedBy: person.accountId,
      returnReason: input.reason,
      updatedAt: now(),
    })
    await writeAuditEntry(
      em,
      actor,
      'recipe version returned',
      { type: 'recipe version', id: version.id },
      { number: version.number, reason: input.reason },
    )
    return readVersion(em, version.id)
  })
  await mailAuthor(returned, person, 'returned', input.reason)
  return returned
}
