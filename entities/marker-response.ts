import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const MarkerResponseEntity = defineEntity({
  name: 'MarkerResponse',
  tableName: 'marker_responses',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    markerId: p.uuid(),
    number: p.integer(),
    kind: p.enum(['formula', 'fit']),
    unit: p.text(),
    formula: p.text().nullable(),
    family: p.text().nullable(),
    fit: p.json<unknown>().nullable(),
    results: p.json<unknown>().nullable(),
    matrix: p.text().nullable(),
    extraction: p.text().nullable(),
    samplePosition: p.text().nullable(),
    sampleFromMm: p.double().nullable(),
    sampleToMm: p.double().nullable(),
    leadHeight: p.enum(['bilge', 'quarter', 'head end', 'head']).nullable(),
    leadSide: p.text().nullable(),
    leadDepthMm: p.double().nullable(),
    leadMounting: p.enum(['wedge', 'drilled', 'clamped']).nullable(),
    siteSettingsVersion: p.integer(),
    note: p.text().default(''),
    authorId: p.uuid(),
    createdAt: p.datetime(),
  },
})

export type MarkerResponse = InferEntity<typeof MarkerResponseEntity>
