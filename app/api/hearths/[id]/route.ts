import { route } from '@/lib/http/route'
import { operations } from '@/lib/probes/operations'
import { saveHearth } from '@/lib/probes/save-hearth'

export const PUT = route(operations.updateHearth, (actor, { params, body }) =>
  saveHearth(actor, { ...body, id: params.id }),
)
