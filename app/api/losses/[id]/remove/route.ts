import { operations } from '@/lib/barrels/operations'
import { removeLoss } from '@/lib/barrels/remove-loss'
import { route } from '@/lib/http/route'

export const POST = route(operations.removeLoss, (actor, { params, body }) =>
  removeLoss(actor, { ...body, lossId: params.id }),
)
