import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const RefusedReadingEntity = defineEntity({
  name: 'RefusedReading',
  tableName: 'refused_readings',
  properties: {
    bootNo: p.integer().primary(),
    seq: p.bigint('number').primary(),
    reason: p.text(),
    reading: p.json<unknown>(),
    receivedAt: p.datetime(),
  },
})

export type RefusedReading = InferEntity<typeof RefusedReadingEntity>
