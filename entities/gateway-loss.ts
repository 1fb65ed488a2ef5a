import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const GatewayLossEntity = defineEntity({
  name: 'GatewayLoss',
  tableName: 'gateway_losses',
  properties: {
    bootNo: p.integer().primary(),
    fromSeq: p.bigint('number').primary(),
    toSeq: p.bigint('number').primary(),
    reason: p.text(),
    declaredAt: p.datetime(),
  },
})

export type GatewayLoss = InferEntity<typeof GatewayLossEntity>
