import { abandonFiring } from '@/lib/firings/abandon-firing'
import { operations } from '@/lib/firings/operations'
import { route } from '@/lib/http/route'

export const POST = route(operations.abandonFiring, (actor, { params, body }) =>
  abandonFiring(actor, { ...body, id: params.id }),
)
