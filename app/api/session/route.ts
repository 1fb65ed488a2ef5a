import { cookieAnswer, deviceOf } from '@/lib/accounts/device-of'
import { operations } from '@/lib/accounts/operations'
import { signIn } from '@/lib/accounts/sign-in'
import { signOut } from '@/lib/accounts/sign-out'
import { clearedSessionCookie } from '@/lib/auth/session-cookie'
import { openRoute, route } from '@/lib/http/route'

export const POST = openRoute(operations.signIn, async ({ body, request }) => {
  const started = await signIn(body, deviceOf(request), request.headers.get('cookie'))
  return cookieAnswer(started.setCookie)
})

export const DELETE = route(operations.signOut, async (actor, { query }) => {
  await signOut(actor, query)
  return cookieAnswer(clearedSessionCookie())
})
