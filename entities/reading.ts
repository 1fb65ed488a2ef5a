import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const ReadingEntity = defineEntity({
  name: 'Reading',
  tableName: 'readings',
  properties: {
    bootNo: p.integer().primary(),
    seq: p.bigint('number').primary(),
    atMs: p.bigint('number').primary(),
    probeNo: p.integer(),
    emfTenthUv: p.integer().nullable(),
    coldCentiC: p.integer().nullable(),
    tempCentiC: p.integer().nullable(),
    flag: p.smallint().default(0),
  },
})

export type Reading = InferEntity<typeof ReadingEntity>
