import { route } from '@/lib/http/route'
import { operations } from '@/lib/probes/operations'
import { saveProbe } from '@/lib/probes/save-probe'

export const PUT = route(operations.updateProbe, (actor, { params, body }) =>
  saveProbe(actor, { ...body, id: params.id }),
)
