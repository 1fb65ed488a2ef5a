import { RecipeEntity } from '@/entities/recipe'
import { RecipeVersionEntity } from '@/entities/recipe-version'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { lockVersion } from '@/lib/recipes/version-access'
import { describeState, isEditable } from '@/lib/recipes/version-states'

/** Deletes a draft; a recipe that had no other version goes with it. The audit trail keeps that it was there. */
export async function discardDraft(actor: Actor, input: { id: string }): Promise<void> {
  requirePermission(actor, 'recipes:write')
  await inTransaction(async (em) => {
    const version = await lockVersion(em, input.id)
    if (!isEditable(version.state)) {
      throw new AppError(
        'conflict',
        `Version ${version.number} is ${describeState(version.state)}. Only a draft can be discarded.`,
      )
    }
    const { id, recipeId, number } = version
    await em.nativeDelete(RecipeVersionEntity, { id })
    const left = await em.count(RecipeVersionEntity, { recipeId })
    const recipe = await em.findOneOrFail(RecipeEntity, { id: recipeId })
    if (left === 0) await em.nativeDelete(RecipeEntity, { id: recipeId })
    await writeAuditEntry(
      em,
      actor,
      'recipe draft discarded',
      { type: 'recipe version', id },
      { recipe: recipe.name, number, recipeRemoved: left === 0 },
    )
  })
}
