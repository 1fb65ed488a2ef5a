import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const CustomerEntity = defineEntity({
  name: 'Customer',
  tableName: 'customers',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    name: p.text(),
    contactEmail: p.text().nullable(),
    createdAt: p.datetime(),
  },
})

export type Customer = InferEntity<typeof CustomerEntity>
