import { createHash, randomBytes } from 'node:crypto'
import { env } from '@/lib/env'

export const deviceCookieName = 'emberstave_device'
/** As long as browsers keep a cookie; each sign-in at the device renews it. */
const keptS = 400 * 24 * 3600

/** What makes a browser an enrolled device: 256 random bits, of which the database holds the hash. */
export function makeDeviceToken(): { token: string; sha256: string } {
  const token = randomBytes(32).toString('base64url')
  return { token, sha256: hashDeviceToken(token) }
}

function hashDeviceToken(token: string): string {
  return createHash('sha256').update(token).digest('hex')
}

/** The Set-Cookie value that enrols a browser. */
export function deviceCookie(token: string): string {
  const secure = env().APP_ORIGIN.startsWith('https:') ? '; Secure' : ''
  return `${deviceCookieName}=${token}; Path=/; HttpOnly; SameSite=Lax; Max-Age=${keptS}${secure}`
}

/** The device's token in a Cookie header; null when there is none, or nothing of the kind that we make. */
export function readDeviceToken(cookieHeader: string | null | undefined): string | null {
  const prefix = `${deviceCookieName}=`
  const pair = (cookieHeader ?? '').split(/;\s*/).find((part) => part.startsWith(prefix))
  const token = pair?.slice(prefix.length) ?? ''
  return /^[\w-]{43}$/.test(token) ? token : null
}

/** SHA-256 (hex) of the device's token in a Cookie header, or null. */
export function deviceTokenSha256Of(cookieHeader: string | null | undefined): string | null {
  const token = readDeviceToken(cookieHeader)
  return token === null ? null : hashDeviceToken(token)
}
