import { operations } from '@/lib/conditions/operations'
import { removeExposure } from '@/lib/conditions/remove-exposure'
import { route } from '@/lib/http/route'

export const POST = route(operations.removeExposure, (actor, { params, body }) =>
  removeExposure(actor, { ...body, ...params }),
)
