import { getReadings } from '@/lib/firings/get-readings'
import { operations } from '@/lib/firings/operations'
import { route } from '@/lib/http/route'

export const GET = route(operations.getReadings, (actor, { params, query }) =>
  getReadings(actor, { ...query, id: params.id }),
)
