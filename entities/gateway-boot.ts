import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const GatewayBootEntity = defineEntity({
  name: 'GatewayBoot',
  tableName: 'gateway_boots',
  properties: {
    no: p.integer().primary(),
    gatewayId: p.uuid(),
    bootId: p.uuid(),
    received: p.text().columnType('int8multirange').default('{}'),
    ackedSeq: p.bigint('number').default(0),
    clockOffsetMs: p.integer().default(0),
    firstSeenAt: p.datetime(),
    lastSeenAt: p.datetime(),
  },
})

export type GatewayBoot = InferEntity<typeof GatewayBootEntity>
