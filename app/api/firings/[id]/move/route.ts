import { moveFiring } from '@/lib/firings/move-firing'
import { operations } from '@/lib/firings/operations'
import { route } from '@/lib/http/route'

export const POST = route(operations.moveFiring, (actor, { params, body }) =>
  moveFiring(actor, { ...body, id: params.id }),
)
