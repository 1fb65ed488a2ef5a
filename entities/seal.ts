import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const SealEntity = defineEntity({
  name: 'Seal',
  tableName: 'seals',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    firingId: p.uuid(),
    revision: p.integer(),
    probeId: p.uuid(),
    fromMs: p.bigint('number'),
    toMs: p.bigint('number'),
    readingCount: p.integer(),
    encoding: p.smallint(),
    data: p.blob(),
    sha256: p.text(),
    sealedAt: p.datetime(),
  },
})

export type Seal = InferEntity<typeof SealEntity>
