import { route } from '@/lib/http/route'
import { operations } from '@/lib/recipes/operations'
import { approveVersion } from '@/lib/recipes/approve-version'

export const POST = route(operations.approveVersion, (actor, { params, body }) =>
  approveVersion(actor, { ...body, id: params.id }),
)
