import { route } from '@/lib/http/route'
import { listProbeFirings } from '@/lib/probes/list-probe-firings'
import { operations } from '@/lib/probes/operations'

export const GET = route(operations.listProbeFirings, (actor, { params, query }) =>
  listProbeFirings(actor, { ...query, id: params.id }),
)
