import { exportAlarms } from '@/lib/alarms/export-alarms'
import { operations } from '@/lib/alarms/operations'
import { csvResponse } from '@/lib/http/csv-response'
import { route } from '@/lib/http/route'

export const GET = route(operations.exportAlarms, async (actor, { query }) =>
  csvResponse(await exportAlarms(actor, query)),
)
