import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const DeviceEntity = defineEntity({
  name: 'Device',
  tableName: 'devices',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    name: p.text(),
    kind: p.enum(['hearth', 'room', 'wall screen']),
    hearthId: p.uuid().nullable(),
    temperatureUnit: p.enum(['C', 'F']).default('C'),
    idleMinutes: p.integer().default(10),
    tokenSha256: p.text().nullable(),
    createdAt: p.datetime(),
    createdBy: p.uuid(),
    enrolledAt: p.datetime().nullable(),
    userAgent: p.text().nullable(),
    lastSeenAt: p.datetime().nullable(),
    revokedAt: p.datetime().nullable(),
    revokedBy: p.uuid().nullable(),
    revision: p.integer().default(1),
  },
})

export type Device = InferEntity<typeof DeviceEntity>
