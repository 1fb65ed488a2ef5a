import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const FiringPlacementEntity = defineEntity({
  name: 'FiringPlacement',
  tableName: 'firing_placements',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    firingId: p.uuid(),
    hearthId: p.uuid(),
    fromAt: p.datetime(),
    untilAt: p.datetime().nullable(),
  },
})

export type FiringPlacement = InferEntity<typeof FiringPlacementEntity>
