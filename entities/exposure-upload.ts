import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const ExposureUploadEntity = defineEntity({
  name: 'ExposureUpload',
  tableName: 'exposure_uploads',
  properties: {
    id: p.uuid().primary(),
    kind: p.enum(['carbon monoxide', 'heat']),
    subject: p.text(),
    fileName: p.text(),
    sha256: p.text(),
    lineCount: p.integer(),
    skippedCount: p.integer(),
    accountId: p.uuid(),
    recordedAt: p.datetime(),
    removedAt: p.datetime().nullable(),
    removedBy: p.uuid().nullable(),
    removedReason: p.text().nullable(),
  },
})

export type ExposureUpload = InferEntity<typeof ExposureUploadEntity>
