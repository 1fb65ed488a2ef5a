import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const RepeatabilityStudyEntity = defineEntity({
  name: 'RepeatabilityStudy',
  tableName: 'repeatability_studies',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    no: p.integer().autoincrement(),
    probeId: p.uuid(),
    referenceProbeId: p.uuid(),
    height: p.text(),
    side: p.text(),
    depthMm: p.double(),
    mounting: p.text(),
    heatWords: p.text().default(''),
    state: p.enum(['open', 'finished', 'abandoned']).default('open'),
    startedAt: p.datetime(),
    startedBy: p.uuid(),
    endedAt: p.datetime().nullable(),
    endReason: p.text().nullable(),
    signatureId: p.uuid().nullable(),
    result: p.json<unknown>().nullable(),
    adoptedAt: p.datetime().nullable(),
    adoptedBy: p.uuid().nullable(),
    adoptedVersion: p.integer().nullable(),
  },
})

export type RepeatabilityStudy = InferEntity<typeof RepeatabilityStudyEntity>
