import { LockMode } from '@mikro-orm/core'
import type * as z from 'zod'
import { RecipeEntity } from '@/entities/recipe'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { AppError, invalidField } from '@/lib/errors'
import { addDraft } from '@/lib/recipes/add-draft'
import { readVersion } from '@/lib/recipes/read-version'
import type { createVersionSchema, RecipeVersionDto } from '@/lib/recipes/schema'
import type { VersionRow } from '@/lib/recipes/to-version'
import { toContent } from '@/lib/recipes/to-version'
import { recipeNotFound } from '@/lib/recipes/version-access'
import { versionRowsOfRecipe } from '@/lib/recipes/version-rows'
import { describeState } from '@/lib/recipes/version-states'

type CreateVersionInput = z.output<typeof createVersionSchema> & { recipeId: string }

/**
 * A new draft of a recipe, started from the version named, else the approved one, else the latest.
 *
 * @throws AppError 'conflict' while another version is a draft or in review: one open version a recipe
 */
export async function createVersion(actor: Actor, input: CreateVersionInput): Promise<RecipeVersionDto> {
  requirePermission(actor, 'recipes:write')
  const person = requirePerson(actor)
  return inTransaction(async (em) => {
    const recipe = await em.findOne(
      RecipeEntity,
      { id: input.recipeId },
      { lockMode: LockMode.PESSIMISTIC_WRITE },
    )
    if (recipe === null) throw recipeNotFound()
    const versions = await versionRowsOfRecipe(em, recipe.id)
    requireNoneOpen(versions)
    const from = chooseStart(versions, input.fromVersionId ?? null)
    const version = await addDraft(em, {
      recipeId: recipe.id,
      number: (versions[0]?.number ?? 0) + 1,
      authorId: person.accountId,
      basedOnVersionId: from.id,
      content: input.content ?? toContent(from),
    })
    await writeAuditEntry(
      em,
      actor,
      'recipe version drafted',
      { type: 'recipe version', id: version.id },
      { recipe: recipe.name, number: version.number, fromNumber: from.number },
    )
    return readVersion(em, version.id)
  })
}

function requireNoneOpen(versions: readonly VersionRow[]): void {
  const open = versions.find((version) => version.state === 'draft' || version.state === 'in review')
  if (open === undefined) return
  throw new AppError(
    'conflict',
    `Version ${open.number} by ${open.author_name} is still ${describeState(open.state)}. ` +
      'Finish or discard it before you start another.',
    { current: { id: open.id, number: open.number, state: open.state } },
  )
}

function chooseStart(versions: readonly VersionRow[], fromVersionId: string | null): VersionRow {
  const from =
    fromVersionId === null
      ? (versions.find((version) => version.state === 'approved') ?? versions[0])
      : versions.find((version) => version.id === fromVersionId)
  if (from === undefined)
    throw invalidField('fromVersionId', 'Choose a version of this recipe to start from.')
  return from
}
