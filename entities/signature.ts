import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const SignatureEntity = defineEntity({
  name: 'Signature',
  tableName: 'signatures',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    accountId: p.uuid(),
    accountName: p.text(),
    accountRole: p.text(),
    meaning: p.text(),
    reason: p.text().nullable(),
    subjectType: p.text(),
    subjectId: p.uuid(),
    subjectSha256: p.text(),
    signedAt: p.datetime(),
  },
})

export type Signature = InferEntity<typeof SignatureEntity>
