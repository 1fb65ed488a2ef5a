import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const ScoreEntity = defineEntity({
  name: 'Score',
  tableName: 'scores',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    firingId: p.uuid(),
    number: p.integer(),
    ruleset: p.integer(),
    siteSettingsVersion: p.integer(),
    sealRevision: p.integer(),
    verdict: p.enum(['in tolerance', 'cannot tell', 'out of tolerance', 'limit broken', 'incomplete']),
    points: p.double().nullable(),
    doseMinutes: p.double().nullable(),
    doseLowMinutes: p.double().nullable(),
    doseHighMinutes: p.double().nullable(),
    planDoseMinutes: p.double(),
    deltaLog10Dose: p.double().nullable().fieldName('delta_log10_dose'),
    toastDepthMm: p.double().nullable(),
    result: p.json<unknown>(),
    sketch: p.json<unknown>().onCreate(() => ({})),
    computedAt: p.datetime(),
  },
})

export type Score = InferEntity<typeof ScoreEntity>
