import { getReadings } from '@/lib/firings/get-readings'
import { operations } from '@/lib/firings/operations'
import { roomRoute } from '@/lib/http/route'

export const GET = roomRoute(operations.getReadings, (actor, { params, query }) =>
  getReadings(actor, { ...query, id: params.id }),
)
