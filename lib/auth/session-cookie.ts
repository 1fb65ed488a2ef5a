import { sealData, unsealData } from 'iron-session'
import * as z from 'zod'
import { env } from '@/lib/env'

export const sessionCookieName = 'emberstave_session'
/** A session ends after this long without use, and after `sessionMaximumS` in any case. */
export const sessionIdleS = 12 * 3600
export const sessionMaximumS = 14 * 24 * 3600
/** One that a PIN opened ends with the shift, … */
export const pinSessionMaximumS = 12 * 3600
/** … and when its device has not been heard for its idle minutes and this long: a firing may pass without a network. */
export const pinGraceS = 2 * 3600

const sealedSchema = z.object({ sessionId: z.uuid() })

/** The Set-Cookie value that carries a session row's id, sealed. */
export async function sealSessionCookie(sessionId: string): Promise<string> {
  const sealed = await sealData({ sessionId }, { password: env().SESSION_SECRET, ttl: sessionMaximumS })
  return cookieHeader(sealed, sessionMaximumS)
}

export function clearedSessionCookie(): string {
  return cookieHeader('', 0)
}

function cookieHeader(value: string, maxAgeS: number): string {
  const secure = env().APP_ORIGIN.startsWith('https:') ? '; Secure' : ''
  return `${sessionCookieName}=${value}; Path=/; HttpOnly; SameSite=Lax; Max-Age=${maxAgeS}${secure}`
}

/** The session id in a Cookie header, or null when there is none or its seal does not hold. */
export async function unsealSessionId(cookieHeaderValue: string | null | undefined): Promise<string | null> {
  const prefix = `${sessionCookieName}=`
  const pair = (cookieHeaderValue ?? '').split(/;\s*/).find((part) => part.startsWith(prefix))
  if (pair === undefined || pair.length === prefix.length) return null
  const sealed = decodeCookie(pair.slice(prefix.length))
  if (sealed === null) return null
  const data: unknown = await unsealData(sealed, {
    password: env().SESSION_SECRET,
    ttl: sessionMaximumS,
  })
  const parsed = sealedSchema.safeParse(data)
  return parsed.success ? parsed.data.sessionId : null
}

/** A cookie with a broken % sequence is no cookie of ours. */
function decodeCookie(value: string): string | null {
  try {
    return decodeURIComponent(value)
  } catch {
    return null
  }
}
