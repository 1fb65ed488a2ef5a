import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const BatchEntity = defineEntity({
  name: 'Batch',
  tableName: 'batches',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    number: p.integer().autoincrement(),
    customerId: p.uuid(),
    recipeVersionId: p.uuid(),
    pieceKind: p.enum(['barrel', 'head']),
    sizeAndShape: p.text(),
    pieceCount: p.integer(),
    woodLot: p.text(),
    dueWeek: p.text().nullable(),
    notes: p.text().default(''),
    createdAt: p.datetime(),
    createdBy: p.uuid(),
  },
})

export type Batch = InferEntity<typeof BatchEntity>
