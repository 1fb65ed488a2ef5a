import { route } from '@/lib/http/route'
import { getGateway } from '@/lib/probes/get-gateway'
import { operations } from '@/lib/probes/operations'
import { updateGateway } from '@/lib/probes/update-gateway'

export const GET = route(operations.getGateway, (actor, { params }) => getGateway(actor, params))
export const PUT = route(operations.updateGateway, (actor, { params, body }) =>
  updateGateway(actor, { ...body, id: params.id }),
)
