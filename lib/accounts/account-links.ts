import { createHash, randomBytes } from 'node:crypto'
import type { EntityManager } from '@mikro-orm/postgresql'
import { queryRows } from '@/lib/db/orm'
import { env } from '@/lib/env'
import { AppError } from '@/lib/errors'
import { now } from '@/lib/runtime'

/**
 * One-time links. The token stands in the address's fragment, which browsers send to nobody; the database keeps its
 * SHA-256 only. A new link of one purpose ends the older ones.
 */
export type LinkPurpose = 'invitation' | 'password reset' | 'first administrator'

const kinds: Record<LinkPurpose, { path: string; validS: number }> = {
  invitation: { path: '/invitation', validS: 3 * 24 * 3600 },
  'password reset': { path: '/reset-password', validS: 3600 },
  'first administrator': { path: '/invitation', validS: 3 * 24 * 3600 },
}

export type IssuedLink = { url: string; expiresAt: Date }

function sha256(token: string): string {
  return createHash('sha256').update(token).digest('hex')
}

export async function issueLink(
  em: EntityManager,
  purpose: LinkPurpose,
  accountId: string | null,
): Promise<IssuedLink> {
  const at = now()
  const token = randomBytes(32).toString('base64url')
  const expiresAt = new Date(at.getTime() + kinds[purpose].validS * 1000)
  await queryRows(
    em,
    `update account_links set used_at = ?
      where purpose = ? and account_id is not distinct from ?::uuid and used_at is null`,
    [at, purpose, accountId],
  )
  await queryRows(
    em,
    `insert into account_links (account_id, purpose, token_sha256, created_at, expires_at)
     values (?, ?, ?, ?, ?)`,
    [accountId, purpose, sha256(token), at, expiresAt],
  )
  return { url: `${new URL(env().APP_ORIGIN).origin}${kinds[purpose].path}#token=${token}`, expiresAt }
}

export type FoundLink = {
  purpose: LinkPurpose
  accountId: string | null
  email: string | null
  name: string | null
  expiresAt: Date
}

type LinkRow = {
  id: string
  purpose: LinkPurpose
  account_id: string | null
  email: string | null
  name: string | null
  expires_at: Date | string
}

/** @throws AppError 'not found' alike for a link that never was, is spent, has run out or whose account is closed. */
export async function findLink(em: EntityManager, token: string): Promise<FoundLink> {
  const [row] = await queryRows<LinkRow>(
    em,
    `select l.id, l.purpose, l.account_id, a.email, a.name, l.expires_at
       from account_links l left join accounts a on a.id = l.account_id
      where l.token_sha256 = ? and l.used_at is null and l.expires_at > ?
        and (l.account_id is null or a.state <> 'closed')`,
    [sha256(token), now()],
  )
  if (row === undefined) throw spent()
  return {
    purpose: row.purpose,
    accountId: row.account_id,
    email: row.email,
    name: row.name,
    expiresAt: new Date(row.expires_at),
  }
}

/** Spends a link: of two who come at once, one gets it. @throws AppError 'not found' as {@link findLink}. */
export async function spendLink(em: EntityManager, token: string, purpose: LinkPurpose): Promise<FoundLink> {
  const link = await findLink(em, token)
  if (link.purpose !== purpose) throw spent()
  const taken = await queryRows<{ id: string }>(
    em,
    'update account_links set used_at = ? where token_sha256 = ? and used_at is null returning id',
    [now(), sha256(token)],
  )
  if (taken.length === 0) throw spent()
  return link
}

function spent(): AppError {
  return new AppError(
    'not found',
    'This link has been used, has run out, or is cut short. Ask for a new one; your administrator can send it.',
  )
}
