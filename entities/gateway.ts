import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const GatewayEntity = defineEntity({
  name: 'Gateway',
  tableName: 'gateways',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    name: p.text(),
    mayReplay: p.boolean().default(false),
    clockOffsetMs: p.integer().nullable(),
    lastSeenAt: p.datetime().nullable(),
    createdAt: p.datetime(),
  },
})

export type Gateway = InferEntity<typeof GatewayEntity>
