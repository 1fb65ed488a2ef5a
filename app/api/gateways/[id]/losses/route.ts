import { route } from '@/lib/http/route'
import { listDeclaredLosses } from '@/lib/probes/list-declared-losses'
import { operations } from '@/lib/probes/operations'

export const GET = route(operations.listDeclaredLosses, (actor, { params, query }) =>
  listDeclaredLosses(actor, { ...query, gatewayId: params.id }),
)
