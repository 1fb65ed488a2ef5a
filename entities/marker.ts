import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const MarkerEntity = defineEntity({
  name: 'Marker',
  tableName: 'markers',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    key: p.text(),
    name: p.text(),
    unit: p.text(),
    position: p.integer(),
  },
})

export type Marker = InferEntity<typeof MarkerEntity>
