import { inviteAccount } from '@/lib/accounts/invite-account'
import { listAccounts } from '@/lib/accounts/list-accounts'
import { operations } from '@/lib/accounts/operations'
import { route } from '@/lib/http/route'

export const GET = route(operations.listAccounts, (actor, call) => listAccounts(actor, call.query))
export const POST = route(operations.inviteAccount, (actor, call) => inviteAccount(actor, call.body))
