import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const ConditionReadingEntity = defineEntity({
  name: 'ConditionReading',
  tableName: 'condition_readings',
  properties: {
    id: p.uuid().primary(),
    place: p.enum(['room', 'yard']),
    at: p.datetime(),
    tempC: p.double(),
    humidityPercent: p.double(),
    accountId: p.uuid(),
    recordedAt: p.datetime(),
    removedAt: p.datetime().nullable(),
    removedBy: p.uuid().nullable(),
    removedReason: p.text().nullable(),
  },
})

export type ConditionReading = InferEntity<typeof ConditionReadingEntity>
