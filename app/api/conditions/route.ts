import { getDay } from '@/lib/conditions/get-day'
import { operations } from '@/lib/conditions/operations'
import { route } from '@/lib/http/route'

export const GET = route(operations.getDay, (actor, { query }) => getDay(actor, query))
