import type * as z from 'zod'
import type { EntityManager } from '@mikro-orm/postgresql'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { mailReviewers } from '@/lib/recipes/mail-reviewers'
import { requireReviewable } from '@/lib/recipes/require-reviewable'
import { readVersion } from '@/lib/recipes/read-version'
import type { RecipeVersionDto, sendForReviewSchema } from '@/lib/recipes/schema'
import { lockVersion, requireRevision } from '@/lib/recipes/version-access'
import { moveVersion } from '@/lib/recipes/version-states'
import { now } from '@/lib/runtime'
import { currentSite } from '@/lib/site/current-site'

type SendForReviewInput = z.output<typeof sendForReviewSchema> & { id: string }

/**
 * Sends a draft to the master coopers, who are told by e-mail.
 *
 * @throws AppError 'invalid' naming the fields that keep it from being approved; 'conflict' when it is no draft
 */
export async function sendForReview(actor: Actor, input: SendForReviewInput): Promise<RecipeVersionDto> {
  requirePermission(actor, 'recipes:write')
  const version = await inTransaction((em) => move(em, actor, input))
  await mailReviewers(version, actor)
  return version
}

async function move(em: EntityManager, actor: Actor, input: SendForReviewInput): Promise<RecipeVersionDto> {
  const version = await lockVersion(em, input.id)
  const state = moveVersion('send for review', version)
  await requireRevision(em, version, input.revision)
  requireReviewable(await readVersion(em, version.id), (await currentSite(em)).rules)
  em.assign(version, { state, sentAt: now(), updatedAt: now() })
  await writeAuditEntry(
    em,
    actor,
    'recipe version sent for review',
    { type: 'recipe version', id: version.id },
    { number: version.number, revision: version.revision },
  )
  return readVersion(em, version.id)
}
