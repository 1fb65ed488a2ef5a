import { getAlarmRates } from '@/lib/alarms/get-alarm-rates'
import { operations } from '@/lib/alarms/operations'
import { route } from '@/lib/http/route'

export const GET = route(operations.getAlarmRates, (actor, { query }) => getAlarmRates(actor, query))
