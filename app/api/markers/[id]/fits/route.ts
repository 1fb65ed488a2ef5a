import { route } from '@/lib/http/route'
import { fitMarkerResponse } from '@/lib/markers/fit-marker'
import { operations } from '@/lib/markers/operations'

export const POST = route(operations.fitMarker, (actor, { params, body }) =>
  fitMarkerResponse(actor, { ...body, id: params.id }),
)
