import type { EntityManager } from '@mikro-orm/postgresql'
import type { RecipeVersion } from '@/entities/recipe-version'
import { RecipeVersionEntity } from '@/entities/recipe-version'
import type { RecipeContent } from '@/lib/recipes/schema'
import { contentColumns, replaceStages } from '@/lib/recipes/write-content'
import { now } from '@/lib/runtime'

export type NewDraft = {
  recipeId: string
  number: number
  authorId: string
  basedOnVersionId: string | null
  content: RecipeContent
}

/** Writes a draft with its stages in the caller's transaction. */
export async function addDraft(em: EntityManager, draft: NewDraft): Promise<RecipeVersion> {
  const { content, ...rest } = draft
  const version = em.create(RecipeVersionEntity, {
    ...rest,
    ...contentColumns(content),
    state: 'draft',
    createdAt: now(),
    updatedAt: now(),
  })
  await em.persistAndFlush(version)
  await replaceStages(em, version.id, content.stages)
  return version
}
