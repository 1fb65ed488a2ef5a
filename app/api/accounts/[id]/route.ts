import { operations } from '@/lib/accounts/operations'
import { updateAccount } from '@/lib/accounts/update-account'
import { route } from '@/lib/http/route'

export const PUT = route(operations.updateAccount, (actor, call) =>
  updateAccount(actor, call.params.id, call.body),
)
