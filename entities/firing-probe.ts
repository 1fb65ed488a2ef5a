import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const FiringProbeEntity = defineEntity({
  name: 'FiringProbe',
  tableName: 'firing_probes',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    firingId: p.uuid(),
    probeId: p.uuid(),
    role: p.enum(['lead', 'opposite', 'coals']),
    height: p.text(),
    side: p.text(),
    depthMm: p.double(),
    mounting: p.text(),
    fromAt: p.datetime(),
    untilAt: p.datetime().nullable(),
  },
})

export type FiringProbe = InferEntity<typeof FiringProbeEntity>
