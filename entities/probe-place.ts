import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const ProbePlaceEntity = defineEntity({
  name: 'ProbePlace',
  tableName: 'probe_places',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    probeId: p.uuid(),
    gatewayId: p.uuid(),
    channel: p.integer(),
    hearthId: p.uuid().nullable(),
    usualRole: p.enum(['lead', 'opposite', 'coals', 'spare']),
    height: p.enum(['bilge', 'quarter', 'head end', 'head', 'coals']),
    side: p.text(),
    depthMm: p.double(),
    mounting: p.enum(['wedge', 'drilled', 'clamped', 'hung']),
    fromAt: p.datetime(),
    untilAt: p.datetime().nullable(),
    changedBy: p.uuid().nullable(),
  },
})

export type ProbePlace = InferEntity<typeof ProbePlaceEntity>
