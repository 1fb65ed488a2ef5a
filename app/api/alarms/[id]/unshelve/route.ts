import { operations } from '@/lib/alarms/operations'
import { unshelveAlarm } from '@/lib/alarms/unshelve-alarm'
import { route } from '@/lib/http/route'

export const POST = route(operations.unshelveAlarm, (actor, { params }) => unshelveAlarm(actor, params))
