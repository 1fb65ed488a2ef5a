import { endSession } from '@/lib/accounts/end-session'
import { operations } from '@/lib/accounts/operations'
import { route } from '@/lib/http/route'

export const DELETE = route(operations.endSession, (actor, call) => endSession(actor, call.params.id))
