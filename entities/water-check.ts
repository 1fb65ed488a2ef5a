import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const WaterCheckEntity = defineEntity({
  name: 'WaterCheck',
  tableName: 'water_checks',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    source: p.text(),
    tcaNgPerL: p.double(),
    freeChlorineMgPerL: p.double(),
    checkedAt: p.datetime(),
    dueAt: p.datetime(),
    accountId: p.uuid(),
  },
})

export type WaterCheck = InferEntity<typeof WaterCheckEntity>
