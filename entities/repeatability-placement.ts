import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const RepeatabilityPlacementEntity = defineEntity({
  name: 'RepeatabilityPlacement',
  tableName: 'repeatability_placements',
  properties: {
    id: p.uuid().primary(),
    studyId: p.uuid(),
    position: p.integer(),
    placedTempC: p.double(),
    referenceTempC: p.double(),
    way: p.enum(['by hand', 'live']),
    placedAt: p.datetime(),
    accountId: p.uuid(),
    struckAt: p.datetime().nullable(),
    struckBy: p.uuid().nullable(),
    strikeReason: p.text().nullable(),
  },
})

export type RepeatabilityPlacement = InferEntity<typeof RepeatabilityPlacementEntity>
