import type * as z from 'zod'
import { RecipeEntity } from '@/entities/recipe'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { violatedConstraint } from '@/lib/db/database-errors'
import { inTransaction } from '@/lib/db/orm'
import { AppError, invalidField } from '@/lib/errors'
import { addDraft } from '@/lib/recipes/add-draft'
import { getRecipe } from '@/lib/recipes/get-recipe'
import type { createRecipeSchema, RecipeDto } from '@/lib/recipes/schema'
import { now } from '@/lib/runtime'

/** A new recipe with its first version, a draft of the actor's. @throws AppError 'conflict' when the name is taken. */
export async function createRecipe(
  actor: Actor,
  input: z.output<typeof createRecipeSchema>,
): Promise<RecipeDto> {
  requirePermission(actor, 'recipes:write')
  const person = requirePerson(actor)
  try {
    const id = await inTransaction(async (em) => {
      const recipe = em.create(RecipeEntity, {
        name: input.name,
        customerId: input.customerId,
        createdAt: now(),
        createdBy: person.accountId,
      })
      await em.persistAndFlush(recipe)
      const version = await addDraft(em, {
        recipeId: recipe.id,
        number: 1,
        authorId: person.accountId,
        basedOnVersionId: null,
        content: input.content,
      })
      await writeAuditEntry(
        em,
        actor,
        'recipe created',
        { type: 'recipe', id: recipe.id },
        { name: input.name, versionId: version.id },
      )
      return recipe.id
    })
    return await getRecipe(actor, { id })
  } catch (error) {
    throw explain(error, input.name)
  }
}

/** The database's refusals that a person can mend. */
function explain(error: unknown, name: string): unknown {
  const constraint = violatedConstraint(error)
  if (constraint === 'recipes_name_key') {
    const sentence = `There is a recipe named ${name} already. Choose another name, or write a new version of that one.`
    return new AppError('conflict', sentence, { fields: { name: sentence } })
  }
  if (constraint === 'recipes_customer_id_fkey') {
    return invalidField('customerId', 'Choose a customer from the list.')
  }
  return error
}
