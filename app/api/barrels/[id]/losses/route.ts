import { addLoss } from '@/lib/barrels/add-loss'
import { listLosses } from '@/lib/barrels/list-losses'
import { operations } from '@/lib/barrels/operations'
import { route } from '@/lib/http/route'

export const GET = route(operations.listLosses, (actor, { params }) => listLosses(actor, params))
export const POST = route(operations.addLoss, (actor, { params, body }) =>
  addLoss(actor, { ...body, pieceId: params.id }),
)
