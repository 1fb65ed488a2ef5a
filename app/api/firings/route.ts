import { listFirings } from '@/lib/firings/list-firings'
import { operations } from '@/lib/firings/operations'
import { startFiring } from '@/lib/firings/start-firing'
import { route } from '@/lib/http/route'

export const GET = route(operations.listFirings, (actor, { query }) => listFirings(actor, query))
export const POST = route(operations.startFiring, (actor, { body }) => startFiring(actor, body))
