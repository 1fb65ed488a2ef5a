import { operations } from '@/lib/alarms/operations'
import { shelveAlarm } from '@/lib/alarms/shelve-alarm'
import { route } from '@/lib/http/route'

export const POST = route(operations.shelveAlarm, (actor, { params, body }) =>
  shelveAlarm(actor, { ...params, ...body }),
)
