import { createHash } from 'node:crypto'
import { AppError } from '@/lib/errors'
import { endReplacedTokens } from '@/lib/ingest/end-replaced-tokens'
import { ingestPool } from '@/lib/ingest/ingest-pool'
import { now } from '@/lib/runtime'

/** The gateway behind a device token. */
export type GatewayIdentity = { gatewayId: string; name: string; mayReplay: boolean }

type TokenRow = {
  id: string
  last_used_at: Date | null
  gateway_id: string
  name: string
  may_replay: boolean
}

/** How often a token's last use is written down. */
const usedEveryMs = 60_000

export function deviceTokenSha256(token: string): string {
  return createHash('sha256').update(token).digest('hex')
}

/** The token in an Authorization header, or null. */
export function bearerOf(header: string | null | undefined): string | null {
  return /^Bearer +([\x21-\x7e]{1,200})$/i.exec(header ?? '')?.[1] ?? null
}

/**
 * The gateway that a device token belongs to. The row is read every time, so that revoking takes effect with the
 * next message. @throws AppError 'not signed in' (401) when the token is missing, unknown, revoked or replaced.
 */
export async function verifyDeviceToken(token: string | null | undefined): Promise<GatewayIdentity> {
  const row = token ? await findToken(deviceTokenSha256(token)) : undefined
  if (row === undefined) {
    throw new AppError(
      'not signed in',
      'This device token is not known here, or was revoked. An administrator can make a new one.',
    )
  }
  const at = now()
  // The first word with a new token is what ends those that it replaces.
  if (row.last_used_at === null) await endReplacedTokens(row.id, at)
  if (row.last_used_at === null || at.getTime() - row.last_used_at.getTime() > usedEveryMs) {
    await ingestPool().query('update gateway_tokens set last_used_at = $1 where id = $2', [at, row.id])
  }
  return { gatewayId: row.gateway_id, name: row.name, mayReplay: row.may_replay }
}

async function findToken(tokenSha256: string): Promise<TokenRow | undefined> {
  const { rows } = await ingestPool().query<TokenRow>({
    name: 'find-device-token',
    text: `select t.id, t.last_used_at, g.id as gateway_id, g.name, g.may_replay
             from gateway_tokens t join gateways g on g.id = t.gateway_id
            where t.token_sha256 = $1 and t.revoked_at is null and g.retired_at is null
              and (t.expires_at is null or t.expires_at > $2)`,
    values: [tokenSha256, now()],
  })
  return rows[0]
}
