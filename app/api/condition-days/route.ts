import { listDays } from '@/lib/conditions/list-days'
import { operations } from '@/lib/conditions/operations'
import { route } from '@/lib/http/route'

export const GET = route(operations.listDays, (actor, { query }) => listDays(actor, query))
