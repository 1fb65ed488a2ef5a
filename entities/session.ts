import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const SessionEntity = defineEntity({
  name: 'Session',
  tableName: 'sessions',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    accountId: p.uuid(),
    /** 'device': opened by a PIN, good at that device alone. */
    kind: p.enum(['person', 'device']).default('person'),
    deviceId: p.uuid().nullable(),
    createdAt: p.datetime(),
    lastSeenAt: p.datetime(),
    expiresAt: p.datetime(),
    endedAt: p.datetime().nullable(),
    userAgent: p.text().nullable(),
    address: p.text().nullable(),
  },
})

export type Session = InferEntity<typeof SessionEntity>
