import { operations } from '@/lib/accounts/operations'
import { resetPassword } from '@/lib/accounts/reset-password'
import { openRoute } from '@/lib/http/route'

export const POST = openRoute(operations.resetPassword, ({ body }) => resetPassword(body))
