import { createHmac } from 'node:crypto'
import { hashPassword, verifyPassword } from '@/lib/auth/password'
import { env } from '@/lib/env'

/**
 * A PIN has too few figures for any hash to hide: who has the database could try them all. So it is mixed with the
 * server's own secret first, which the database does not hold. Another SESSION_SECRET therefore ends all PINs.
 */
function mixed(accountId: string, pin: string): string {
  return createHmac('sha256', env().SESSION_SECRET).update(`pin ${accountId} ${pin}`).digest('base64url')
}

export async function hashPin(accountId: string, pin: string): Promise<string> {
  return hashPassword(mixed(accountId, pin))
}

/** Takes the same time whether or not there is a PIN. */
export async function verifyPin(storedHash: string | null, accountId: string, pin: string): Promise<boolean> {
  return verifyPassword(storedHash, mixed(accountId, pin))
}
