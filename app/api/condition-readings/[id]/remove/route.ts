import { operations } from '@/lib/conditions/operations'
import { removeAir } from '@/lib/conditions/remove-air'
import { route } from '@/lib/http/route'

export const POST = route(operations.removeAir, (actor, { params, body }) =>
  removeAir(actor, { ...body, ...params }),
)
