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
    retiredAt: p.datetime().nullable(),
    /** What the gateway's program last said of itself, at `statusAt`. */
    spooledReadings: p.bigint('number').nullable(),
    spooledBytes: p.bigint('number').nullable(),
    oldestUnsentAt: p.datetime().nullable(),
    programVersion: p.text().nullable(),
    uptimeS: p.bigint('number').nullable(),
    statusAt: p.datetime().nullable(),
  },
})

export type Gateway = InferEntity<typeof GatewayEntity>
