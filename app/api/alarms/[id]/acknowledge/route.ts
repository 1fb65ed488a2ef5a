import { acknowledgeAlarm } from '@/lib/alarms/acknowledge-alarm'
import { operations } from '@/lib/alarms/operations'
import { route } from '@/lib/http/route'

export const POST = route(operations.acknowledgeAlarm, (actor, { params }) => acknowledgeAlarm(actor, params))
