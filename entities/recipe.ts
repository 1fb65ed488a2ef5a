import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const RecipeEntity = defineEntity({
  name: 'Recipe',
  tableName: 'recipes',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    name: p.text(),
    customerId: p.uuid().nullable(),
    createdAt: p.datetime(),
    createdBy: p.uuid(),
  },
})

export type Recipe = InferEntity<typeof RecipeEntity>
