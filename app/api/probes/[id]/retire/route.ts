import { route } from '@/lib/http/route'
import { operations } from '@/lib/probes/operations'
import { retireProbe } from '@/lib/probes/retire-probe'

export const POST = route(operations.retireProbe, (actor, { params, body }) =>
  retireProbe(actor, { ...body, id: params.id }),
)
