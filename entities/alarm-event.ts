import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const AlarmEventEntity = defineEntity({
  name: 'AlarmEvent',
  tableName: 'alarm_events',
  properties: {
    id: p.bigint().primary(),
    firingId: p.uuid(),
    hearthId: p.uuid().nullable(),
    kind: p.text(),
    subject: p.text(),
    occurrenceId: p.uuid(),
    fromState: p.text(),
    toState: p.text(),
    at: p.datetime(),
    accountId: p.uuid().nullable(),
    words: p.text(),
    value: p.double().nullable(),
    limitValue: p.double().nullable(),
    reason: p.text().nullable(),
    shelvedUntil: p.datetime().nullable(),
  },
})

export type AlarmEvent = InferEntity<typeof AlarmEventEntity>
