import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const AuditEntryEntity = defineEntity({
  name: 'AuditEntry',
  tableName: 'audit_entries',
  properties: {
    seq: p.bigint('number').primary(),
    at: p.datetime(),
    actorId: p.uuid().nullable(),
    actorName: p.text(),
    action: p.text(),
    subjectType: p.text(),
    subjectId: p.text(),
    detail: p.json<unknown>().onCreate(() => ({})),
    previousHash: p.text(),
    hash: p.text(),
  },
})

export type AuditEntry = InferEntity<typeof AuditEntryEntity>
