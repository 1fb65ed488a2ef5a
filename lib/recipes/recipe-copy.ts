import { sha256OfJson } from '@/lib/recipes/content-sha256'
import type { RecipeCopy, RecipeVersionDto } from '@/lib/recipes/schema'
import { recipeCopySchema } from '@/lib/recipes/schema'

/**
 * What a firing keeps of its recipe for ever, and the SHA-256 of its canonical JSON. The copy passes the schema, so
 * that what is stored can always be read again.
 */
export function recipeCopyOf(
  version: Pick<RecipeVersionDto, 'id' | 'recipeId' | 'recipeName' | 'number' | 'content'>,
): { copy: RecipeCopy; sha256: string } {
  const copy = recipeCopySchema.parse({
    recipeId: version.recipeId,
    recipeName: version.recipeName,
    versionId: version.id,
    versionNumber: version.number,
    content: version.content,
  })
  return { copy, sha256: sha256OfJson(copy) }
}
