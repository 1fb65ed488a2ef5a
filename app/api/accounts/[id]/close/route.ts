import { closeAccount } from '@/lib/accounts/close-account'
import { operations } from '@/lib/accounts/operations'
import { route } from '@/lib/http/route'

export const POST = route(operations.closeAccount, (actor, call) =>
  closeAccount(actor, call.params.id, call.body),
)
