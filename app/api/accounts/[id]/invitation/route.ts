import { inviteAgain } from '@/lib/accounts/invite-again'
import { operations } from '@/lib/accounts/operations'
import { route } from '@/lib/http/route'

export const POST = route(operations.inviteAgain, (actor, call) => inviteAgain(actor, call.params.id))
