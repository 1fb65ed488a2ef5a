import { route } from '@/lib/http/route'
import { getProbe } from '@/lib/probes/get-probe'
import { operations } from '@/lib/probes/operations'
import { saveProbe } from '@/lib/probes/save-probe'

export const GET = route(operations.getProbe, (actor, { params }) => getProbe(actor, params))
export const PUT = route(operations.updateProbe, (actor, { params, body }) =>
  saveProbe(actor, { ...body, id: params.id }),
)
