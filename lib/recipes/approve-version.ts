import type { EntityManager } from '@mikro-orm/postgresql'
import type * as z from 'zod'
import type { RecipeVersion } from '@/entities/recipe-version'
import { RecipeVersionEntity } from '@/entities/recipe-version'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor, PersonActor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { signAs } from '@/lib/auth/sign'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { AppError, invalidField } from '@/lib/errors'
import { cautionAboveC } from '@/lib/recipes/cautions'
import { mailAuthor } from '@/lib/recipes/mail-reviewers'
import { requireReviewable } from '@/lib/recipes/require-reviewable'
import { readVersion } from '@/lib/recipes/read-version'
import type { approveVersionSchema, RecipeVersionDto } from '@/lib/recipes/schema'
import { editedAction } from '@/lib/recipes/update-version'
import { lockVersion, requireRevision } from '@/lib/recipes/version-access'
import { moveVersion } from '@/lib/recipes/version-states'
import { now } from '@/lib/runtime'
import { currentSite } from '@/lib/site/current-site'

type ApproveVersionInput = z.output<typeof approveVersionSchema> & { id: string }

/**
 * Approves a version by signature, and supersedes the approved one in the same act. Frozen from then on.
 *
 * @throws AppError 'not allowed' for the author and for everyone who edited it: four eyes; 'conflict' when it is not in
 *   review; 'stale' when it is not the revision that was read; 'invalid' for a wrong password, a missing reason or a
 *   fault that a change of the site's rules has made
 */
export async function approveVersion(actor: Actor, input: ApproveVersionInput): Promise<RecipeVersionDto> {
  requirePermission(actor, 'recipes:approve')
  const person = requirePerson(actor)
  const version = await inTransaction((em) => approve(em, person, input))
  await mailAuthor(version, person, 'approved', null)
  return version
}

async function approve(
  em: EntityManager,
  person: PersonActor,
  input: ApproveVersionInput,
): Promise<RecipeVersionDto> {
  const version = await lockVersion(em, input.id)
  const state = moveVersion('approve', version)
  await requireOtherEyes(em, version, person)
  await requireRevision(em, version, input.revision)
  const read = await readVersion(em, version.id)
  requireReviewable(read, (await currentSite(em)).rules)
  requireHotReason(read, input.reason)
  await signAs(em, person, {
    password: input.password,
    meaning: input.meaning,
    reason: input.reason === '' ? undefined : input.reason,
    subject: { type: 'recipe version', id: version.id, sha256: read.contentSha256 },
  })
  const superseded = await supersedeApproved(em, version)
  em.assign(version, { state, approvedAt: now(), approvedBy: person.accountId, updatedAt: now() })
  await writeAuditEntry(
    em,
    person,
    'recipe version approved',
    { type: 'recipe version', id: version.id },
    {
      number: version.number,
      sha256: read.contentSha256,
      supersededNumber: superseded,
      reason: input.reason ?? null,
    },
  )
  return readVersion(em, version.id)
}

/** Nobody approves what they wrote, wholly or in part. */
async function requireOtherEyes(
  em: EntityManager,
  version: RecipeVersion,
  person: PersonActor,
): Promise<void> {
  if (version.authorId === person.accountId) {
    throw new AppError('not allowed', 'You wrote this version. Another master cooper has to approve it.')
  }
  const edits = await queryRows(
    em,
    `select 1 from audit_entries
      where subject_type = 'recipe version' and subject_id = ? and action = ? and actor_id = ? limit 1`,
    [version.id, editedAction, person.accountId],
  )
  if (edits.length > 0) {
    throw new AppError(
      'not allowed',
      'You have edited this version, so it is partly yours. Another master cooper has to approve it.',
    )
  }
}

function requireHotReason(version: RecipeVersionDto, reason: string | undefined): void {
  if (version.content.limits.woodMaximumC <= cautionAboveC || (reason !== undefined && reason !== '')) return
  throw invalidField(
    'reason',
    `This version lets the wood go to ${version.content.limits.woodMaximumC} °C, above ${cautionAboveC} °C. Write why.`,
  )
}

/** The approved version steps down first: the database holds one approved version a recipe at every moment. */
async function supersedeApproved(em: EntityManager, next: RecipeVersion): Promise<number | null> {
  const approved = await em.findOne(RecipeVersionEntity, { recipeId: next.recipeId, state: 'approved' })
  if (approved === null) return null
  em.assign(approved, { state: moveVersion('supersede', approved), supersededAt: now(), updatedAt: now() })
  await em.flush()
  return approved.number
}
