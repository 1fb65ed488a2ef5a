import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const PieceEntity = defineEntity({
  name: 'Piece',
  tableName: 'pieces',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    kind: p.enum(['barrel', 'head']),
    serial: p.text(),
    batchId: p.uuid(),
    position: p.integer(),
    queuePosition: p.double(),
    createdAt: p.datetime(),
  },
})

export type Piece = InferEntity<typeof PieceEntity>
