import * as z from 'zod'
import { pageQuery } from '@/lib/http/cursor'
import { pieceKinds, recipeSorts, versionStates } from '@/lib/recipes/schema'

export const recipeListQuerySchema = z.strictObject({
  ...pageQuery,
  /** Part of the recipe's name, its customer's, or the flavour intent. */
  q: z.string().trim().max(80, 'At most 80 letters.').optional(),
  /** Recipes that have a version in this state. */
  state: z.enum(versionStates, `Choose one of ${versionStates.join(', ')}.`).optional(),
  pieceKind: z.enum(pieceKinds, 'Choose barrel or head.').optional(),
  customerId: z.uuid().optional(),
  sort: z.enum(recipeSorts, `Choose one of ${recipeSorts.join(', ')}.`).default('name'),
})

export type RecipeListQuery = z.output<typeof recipeListQuerySchema>
