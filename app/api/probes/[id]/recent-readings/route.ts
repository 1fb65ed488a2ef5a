import { route } from '@/lib/http/route'
import { getRecentReadings } from '@/lib/probes/get-recent-readings'
import { operations } from '@/lib/probes/operations'

export const GET = route(operations.getRecentReadings, (actor, { params, query }) =>
  getRecentReadings(actor, { ...query, id: params.id }),
)
