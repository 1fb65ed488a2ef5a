import { route } from '@/lib/http/route'
import { addPlacement } from '@/lib/probes/add-placement'
import { operations } from '@/lib/probes/study-operations'

export const POST = route(operations.addPlacement, (actor, { params, body }) =>
  addPlacement(actor, { ...body, studyId: params.id }),
)
