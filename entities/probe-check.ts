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
    way: p.enum(['by hand', 'live']).default('by hand'),
    /** k = 2. */
    referenceUncertaintyC: p.double().nullable(),
    settledSdC: p.double().nullable(),
    settledSlopeCPerMin: p.double().name('settled_slope_c_per_min').nullable(),
    resolutionC: p.double().nullable(),
    altitudeM: p.double().nullable(),
  },
})

export type ProbeCheck = InferEntity<typeof ProbeCheckEntity>
