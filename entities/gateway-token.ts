import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const GatewayTokenEntity = defineEntity({
  name: 'GatewayToken',
  tableName: 'gateway_tokens',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    gatewayId: p.uuid(),
    tokenSha256: p.text(),
    createdAt: p.datetime(),
    createdBy: p.uuid().nullable(),
    lastUsedAt: p.datetime().nullable(),
    revokedAt: p.datetime().nullable(),
    /** Set when it is being replaced: it ends then, or when `replacedBy` is first used. */
    expiresAt: p.datetime().nullable(),
    replacedBy: p.uuid().nullable(),
  },
})

export type GatewayToken = InferEntity<typeof GatewayTokenEntity>
