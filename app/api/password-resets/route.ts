import { deviceOf } from '@/lib/accounts/device-of'
import { operations } from '@/lib/accounts/operations'
import { requestPasswordReset } from '@/lib/accounts/request-password-reset'
import { openRoute } from '@/lib/http/route'

export const POST = openRoute(operations.requestPasswordReset, ({ body, request }) =>
  requestPasswordReset(body, deviceOf(request)),
)
