import { route } from '@/lib/http/route'
import { checkMarkerFormula } from '@/lib/markers/check-marker-formula'
import { operations } from '@/lib/markers/operations'

export const POST = route(operations.checkMarkerFormula, (actor, { params, body }) =>
  checkMarkerFormula(actor, { ...body, id: params.id }),
)
