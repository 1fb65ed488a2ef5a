import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const ProbeCheckEntity = defineEntity({
  name: 'ProbeCheck',
  tableName: 'probe_checks',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    probeId: p.uuid(),
    kind: p.enum(['ice', 'boiling', 'block']),
    referenceTempC: p.double(),
    measuredTempC: p.double(),
    uncertaintyC: p.double(),
    stationPressureHpa: p.double().nullable(),
    checkedAt: p.datetime(),
    dueAt: p.datetime(),
    accountId: p.uuid(),
  },
})

export type ProbeCheck = InferEntity<typeof ProbeCheckEntity>
