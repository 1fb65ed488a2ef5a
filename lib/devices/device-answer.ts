import { deviceCookie, readDeviceToken } from '@/lib/auth/device-cookie'

/** An empty answer that sets the session's cookie and renews the device's. */
export function signedInAnswer(setCookie: string, cookieHeader: string | null): Response {
  const headers = new Headers({ 'cache-control': 'no-store' })
  headers.append('set-cookie', setCookie)
  const token = readDeviceToken(cookieHeader)
  if (token !== null) headers.append('set-cookie', deviceCookie(token))
  return new Response(null, { status: 204, headers })
}

/** A JSON answer that sets one cookie. */
export function answerWithCookie(body: object, setCookie: string): Response {
  return new Response(JSON.stringify(body), {
    headers: { 'content-type': 'application/json', 'cache-control': 'no-store', 'set-cookie': setCookie },
  })
}
