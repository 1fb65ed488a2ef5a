import { exportReadings } from '@/lib/firings/export-readings'
import { operations } from '@/lib/firings/operations'
import { csvResponse } from '@/lib/http/csv-response'
import { route } from '@/lib/http/route'

export const GET = route(operations.exportReadings, async (actor, { params }) =>
  csvResponse(await exportReadings(actor, params)),
)
