import { randomUUID } from 'node:crypto'
import type { InferEntity } from '@mikro-orm/core'
import { defineEntity, p } from '@mikro-orm/core'

export const AccountLinkEntity = defineEntity({
  name: 'AccountLink',
  tableName: 'account_links',
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    accountId: p.uuid().nullable(),
    purpose: p.enum(['invitation', 'password reset', 'first administrator']),
    tokenSha256: p.text(),
    createdAt: p.datetime(),
    expiresAt: p.datetime(),
    usedAt: p.datetime().nullable(),
  },
})

export type AccountLink = InferEntity<typeof AccountLinkEntity>
