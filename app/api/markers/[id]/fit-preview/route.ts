import { route } from '@/lib/http/route'
import { operations } from '@/lib/markers/operations'
import { previewMarkerFit } from '@/lib/markers/preview-marker-fit'

export const POST = route(operations.previewMarkerFit, (actor, { params, body }) =>
  previewMarkerFit(actor, { ...body, id: params.id }),
)
