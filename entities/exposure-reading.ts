import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const ExposureReadingEntity = defineEntity({
  name: 'ExposureReading',
  tableName: 'exposure_readings',
  properties: {
    id: p.uuid().primary(),
    kind: p.enum(['carbon monoxide', 'heat']),
    subject: p.text(),
    at: p.datetime(),
    value: p.double(),
    peak: p.double(),
    wetBulbC: p.double().nullable(),
    globeC: p.double().nullable(),
    uploadId: p.uuid().nullable(),
    accountId: p.uuid(),
    recordedAt: p.datetime(),
    removedAt: p.datetime().nullable(),
    removedBy: p.uuid().nullable(),
    removedReason: p.text().nullable(),
  },
})

export type ExposureReading = InferEntity<typeof ExposureReadingEntity>
