import type { Device } from '@/lib/accounts/sessions'
import { clientAddress } from '@/lib/http/client-address'

/** The device of a request, for its session and the brakes on guessing. */
export function deviceOf(request: Request): Device {
  return { address: clientAddress(request), userAgent: request.headers.get('user-agent') }
}

/** An empty answer that sets or clears the session cookie. */
export function cookieAnswer(setCookie: string): Response {
  return new Response(null, {
    status: 204,
    headers: { 'set-cookie': setCookie, 'cache-control': 'no-store' },
  })
}
