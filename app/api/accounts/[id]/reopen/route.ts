import { reopenAccount } from '@/lib/accounts/reopen-account'
import { operations } from '@/lib/accounts/operations'
import { route } from '@/lib/http/route'

export const POST = route(operations.reopenAccount, (actor, call) =>
  reopenAccount(actor, call.params.id, call.body),
)
