import { route } from '@/lib/http/route'
import { operations } from '@/lib/recipes/operations'
import { returnVersion } from '@/lib/recipes/return-version'

export const POST = route(operations.returnVersion, (actor, { params, body }) =>
  returnVersion(actor, { ...body, id: params.id }),
)
