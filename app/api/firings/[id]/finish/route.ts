import { finishFiring } from '@/lib/firings/finish-firing'
import { operations } from '@/lib/firings/operations'
import { route } from '@/lib/http/route'

export const POST = route(operations.finishFiring, (actor, { params, body }) =>
  finishFiring(actor, { ...body, id: params.id }),
)
