import { addMark } from '@/lib/firings/add-mark'
import { operations } from '@/lib/firings/operations'
import { route } from '@/lib/http/route'

export const POST = route(operations.addMark, (actor, { params, body }) =>
  addMark(actor, { ...body, firingId: params.id }),
)
