import { route } from '@/lib/http/route'
import { operations } from '@/lib/probes/operations'
import { retireGateway } from '@/lib/probes/retire-gateway'

export const POST = route(operations.retireGateway, (actor, { params, body }) =>
  retireGateway(actor, { ...body, id: params.id }),
)
