import { acceptInvitation } from '@/lib/accounts/accept-invitation'
import { cookieAnswer, deviceOf } from '@/lib/accounts/device-of'
import { operations } from '@/lib/accounts/operations'
import { openRoute } from '@/lib/http/route'

export const POST = openRoute(operations.acceptInvitation, async ({ body, request }) => {
  const started = await acceptInvitation(body, deviceOf(request))
  return cookieAnswer(started.setCookie)
})
