import { changePassword } from '@/lib/accounts/change-password'
import { operations } from '@/lib/accounts/operations'
import { route } from '@/lib/http/route'

export const PUT = route(operations.changePassword, (actor, call) => changePassword(actor, call.body))
