import { listAlarms } from '@/lib/alarms/list-alarms'
import { operations } from '@/lib/alarms/operations'
import { route } from '@/lib/http/route'

export const GET = route(operations.listAlarms, (actor, { query }) => listAlarms(actor, query))
