import type * as z from 'zod'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { readVersion } from '@/lib/recipes/read-version'
import type { RecipeVersionDto, takeBackVersionSchema } from '@/lib/recipes/schema'
import { lockVersion, requireRevision } from '@/lib/recipes/version-access'
import { moveVersion } from '@/lib/recipes/version-states'
import { now } from '@/lib/runtime'

/** The author takes a version back from review, to go on with it as a draft. */
export async function takeBackVersion(
  actor: Actor,
  input: z.output<typeof takeBackVersionSchema> & { id: string },
): Promise<RecipeVersionDto> {
  requirePermission(actor, 'recipes:write')
  const person = requirePerson(actor)
  return inTransaction(async (em) => {
    const version = await lockVersion(em, input.id)
    const state = moveVersion('take back', version)
    if (version.authorId !== person.accountId) {
      throw new AppError(
        'not allowed',
        'Only its author takes a version back. A master cooper can return it with a reason.',
      )
    }
    await requireRevision(em, version, input.revision)
    em.assign(version, { state, updatedAt: now() })
    await writeAuditEntry(
      em,
      actor,
      'recipe version taken back',
      { type: 'recipe version', id: version.id },
      { number: version.number },
    )
    return readVersion(em, version.id)
  })
}
