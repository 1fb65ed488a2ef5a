import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const StageEntity = defineEntity({
  name: 'Stage',
  tableName: 'stages',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    versionId: p.uuid(),
    position: p.integer(),
    name: p.text(),
    kind: p.enum(['ramp', 'hold']),
    targetTempC: p.double(),
    coalsTargetTempC: p.double().nullable(),
    minutes: p.double(),
    bandC: p.double(),
    lid: p.enum(['on', 'off']),
  },
})

export type Stage = InferEntity<typeof StageEntity>
