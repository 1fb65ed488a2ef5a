import { route } from '@/lib/http/route'
import { operations } from '@/lib/probes/operations'
import { updateGateway } from '@/lib/probes/update-gateway'

export const PUT = route(operations.updateGateway, (actor, { params, body }) =>
  updateGateway(actor, { ...body, id: params.id }),
)
