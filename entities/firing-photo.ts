import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const FiringPhotoEntity = defineEntity({
  name: 'FiringPhoto',
  tableName: 'firing_photos',
  properties: {
    id: p.uuid().primary(),
    firingId: p.uuid(),
    kind: p.enum(['face', 'blister', 'other']),
    caption: p.text().default(''),
    sourceType: p.enum(['image/jpeg', 'image/png', 'image/webp']),
    fileKey: p.text(),
    thumbnailKey: p.text(),
    widthPx: p.integer(),
    heightPx: p.integer(),
    byteCount: p.integer(),
    sha256: p.text(),
    addedAt: p.datetime(),
    accountId: p.uuid(),
    removedAt: p.datetime().nullable(),
    removedBy: p.uuid().nullable(),
    removedReason: p.text().nullable(),
    erasedAt: p.datetime().nullable(),
  },
})

export type FiringPhoto = InferEntity<typeof FiringPhotoEntity>
