import { listSessions } from '@/lib/accounts/list-sessions'
import { operations } from '@/lib/accounts/operations'
import { route } from '@/lib/http/route'

export const GET = route(operations.listSessions, (actor) => listSessions(actor))
