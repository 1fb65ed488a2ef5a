import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const GatewayEnrolmentEntity = defineEntity({
  name: 'GatewayEnrolment',
  tableName: 'gateway_enrolments',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    gatewayId: p.uuid(),
    codeSha256: p.text(),
    createdAt: p.datetime(),
    createdBy: p.uuid(),
    expiresAt: p.datetime(),
    cancelledAt: p.datetime().nullable(),
    usedAt: p.datetime().nullable(),
    /** What the machine called itself. */
    usedBy: p.text().nullable(),
    tokenId: p.uuid().nullable(),
  },
})

export type GatewayEnrolment = InferEntity<typeof GatewayEnrolmentEntity>
