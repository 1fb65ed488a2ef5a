import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const ProbeEntity = defineEntity({
  name: 'Probe',
  tableName: 'probes',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    no: p.integer().autoincrement(),
    gatewayId: p.uuid(),
    channel: p.integer(),
    name: p.text(),
    thermocoupleType: p.enum(['K', 'N', 'J', 'T']),
    iecClass: p.integer(),
    serial: p.text().default(''),
    hearthId: p.uuid().nullable(),
    usualRole: p.enum(['lead', 'opposite', 'coals', 'spare']),
    height: p.enum(['bilge', 'quarter', 'head end', 'head', 'coals']),
    side: p.text(),
    depthMm: p.double(),
    mounting: p.enum(['wedge', 'drilled', 'clamped', 'hung']),
    retiredAt: p.datetime().nullable(),
    createdAt: p.datetime(),
    /** When and by whom place, hearth or channel were last changed; the database keeps the history from it. */
    changedAt: p.datetime().nullable(),
    changedBy: p.uuid().nullable(),
  },
})

export type Probe = InferEntity<typeof ProbeEntity>
