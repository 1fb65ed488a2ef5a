import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const LossEntity = defineEntity({
  name: 'Loss',
  tableName: 'losses',
  properties: {
    id: p.uuid().primary(),
    pieceId: p.uuid(),
    firingId: p.uuid().nullable(),
    kind: p.enum(['broken at the pull', 'blister', 'leak', 'stave replaced', 'taken back']),
    stavePosition: p.integer().nullable(),
    woodLot: p.text().nullable(),
    blisterPlace: p.enum(['bilge', 'quarter', 'head end']).nullable(),
    blisterSizeMm: p.double().nullable(),
    replacedWhen: p.enum(['before the toast', 'after the toast']).nullable(),
    replacementLot: p.text().nullable(),
    replacementToast: p.text().nullable(),
    words: p.text().default(''),
    at: p.datetime(),
    recordedAt: p.datetime(),
    accountId: p.uuid(),
    replacesId: p.uuid().nullable(),
  },
})

export type Loss = InferEntity<typeof LossEntity>
