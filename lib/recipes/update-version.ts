import type * as z from 'zod'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { contentSha256 } from '@/lib/recipes/content-sha256'
import { readVersion } from '@/lib/recipes/read-version'
import type { RecipeVersionDto, updateVersionSchema } from '@/lib/recipes/schema'
import { lockVersion, requireRevision } from '@/lib/recipes/version-access'
import { describeState, isEditable } from '@/lib/recipes/version-states'
import { contentColumns, replaceStages } from '@/lib/recipes/write-content'
import { now } from '@/lib/runtime'

type UpdateVersionInput = z.output<typeof updateVersionSchema> & { id: string }

/** The audit action of an edit; who did one may not approve the version. */
export const editedAction = 'recipe version edited'

/**
 * Saves a draft: everything it says, stages and cues included.
 *
 * @throws AppError 'conflict' when it is no draft; 'stale', with the server's version, when somebody saved meanwhile
 */
export async function updateVersion(actor: Actor, input: UpdateVersionInput): Promise<RecipeVersionDto> {
  requirePermission(actor, 'recipes:write')
  return inTransaction(async (em) => {
    const version = await lockVersion(em, input.id)
    if (!isEditable(version.state)) {
      throw new AppError(
        'conflict',
        `Version ${version.number} is ${describeState(version.state)} and cannot be edited. Start a new version from it.`,
      )
    }
    await requireRevision(em, version, input.revision)
    em.assign(version, {
      ...contentColumns(input.content),
      revision: version.revision + 1,
      updatedAt: now(),
    })
    await em.flush()
    await replaceStages(em, version.id, input.content.stages)
    await writeAuditEntry(
      em,
      actor,
      editedAction,
      { type: 'recipe version', id: version.id },
      { revision: version.revision, sha256: contentSha256(input.content) },
    )
    return readVersion(em, version.id)
  })
}
