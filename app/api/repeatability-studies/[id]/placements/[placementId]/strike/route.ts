import { route } from '@/lib/http/route'
import { strikePlacement } from '@/lib/probes/strike-placement'
import { operations } from '@/lib/probes/study-operations'

export const POST = route(operations.strikePlacement, (actor, { params, body }) =>
  strikePlacement(actor, { ...body, studyId: params.id, placementId: params.placementId }),
)
