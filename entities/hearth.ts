import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const HearthEntity = defineEntity({
  name: 'Hearth',
  tableName: 'hearths',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    number: p.integer(),
    name: p.text().default(''),
    isActive: p.boolean().default(true),
    createdAt: p.datetime(),
  },
})

export type Hearth = InferEntity<typeof HearthEntity>
