import { route } from '@/lib/http/route'
import { listRefusedReadings } from '@/lib/probes/list-refused-readings'
import { operations } from '@/lib/probes/operations'

export const GET = route(operations.listRefusedReadings, (actor, { params, query }) =>
  listRefusedReadings(actor, { ...query, gatewayId: params.id }),
)
