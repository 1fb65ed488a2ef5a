import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const FiringEntity = defineEntity({
  name: 'Firing',
  tableName: 'firings',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    pieceId: p.uuid(),
    recipeVersionId: p.uuid(),
    recipeCopy: p.json<unknown>().nullable(),
    recipeSha256: p.text().nullable(),
    state: p.enum(['queued', 'preheating', 'bending', 'toasting', 'resting', 'finished', 'abandoned']),
    isTrial: p.boolean().default(false),
    isImported: p.boolean().default(false),
    isFirstOfDay: p.boolean().default(false),
    toasterId: p.uuid().nullable(),
    siteSettingsVersion: p.integer().nullable(),
    waterCheckId: p.uuid().nullable(),
    queuedAt: p.datetime(),
    preheatAt: p.datetime().nullable(),
    bendAt: p.datetime().nullable(),
    toastAt: p.datetime().nullable(),
    restAt: p.datetime().nullable(),
    endedAt: p.datetime().nullable(),
    endReason: p.text().nullable(),
    moisturePercent: p.double().nullable(),
    moistureMethod: p.enum(['oven-dry', 'meter']).nullable(),
    colour: p.text().nullable(),
    smell: p.text().nullable(),
    outsideTempC: p.double().nullable(),
    remarks: p.text().default(''),
    revision: p.integer().default(1),
  },
})

export type Firing = InferEntity<typeof FiringEntity>
