import { createFirstAdministrator } from '@/lib/accounts/create-first-administrator'
import { cookieAnswer, deviceOf } from '@/lib/accounts/device-of'
import { operations } from '@/lib/accounts/operations'
import { openRoute } from '@/lib/http/route'

export const POST = openRoute(operations.createFirstAdministrator, async ({ body, request }) => {
  const started = await createFirstAdministrator(body, deviceOf(request))
  return cookieAnswer(started.setCookie)
})
