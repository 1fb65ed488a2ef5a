import { route } from '@/lib/http/route'
import { operations } from '@/lib/markers/operations'
import { saveMarkerFormula } from '@/lib/markers/save-marker-formula'

export const POST = route(operations.saveMarkerFormula, (actor, { params, body }) =>
  saveMarkerFormula(actor, { ...body, id: params.id }),
)
