import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const AccountEntity = defineEntity({
  name: 'Account',
  tableName: 'accounts',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    email: p.text(),
    name: p.text(),
    role: p.enum(['administrator', 'master cooper', 'chemist', 'toaster', 'customer']),
    customerId: p.uuid().nullable(),
    passwordHash: p.text().nullable(),
    temperatureUnit: p.enum(['C', 'F']).default('C'),
    state: p.enum(['invited', 'active', 'closed']),
    createdAt: p.datetime(),
    updatedAt: p.datetime(),
    revision: p.integer().default(1),
  },
})

export type Account = InferEntity<typeof AccountEntity>
