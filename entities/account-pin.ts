import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const AccountPinEntity = defineEntity({
  name: 'AccountPin',
  tableName: 'account_pins',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    accountId: p.uuid(),
    pinHash: p.text(),
    setAt: p.datetime(),
    /** Null for the present one. */
    endedAt: p.datetime().nullable(),
    wrongInARow: p.integer().default(0),
  },
})

export type AccountPin = InferEntity<typeof AccountPinEntity>
