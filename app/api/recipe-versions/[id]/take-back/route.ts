import { route } from '@/lib/http/route'
import { operations } from '@/lib/recipes/operations'
import { takeBackVersion } from '@/lib/recipes/take-back-version'

export const POST = route(operations.takeBackVersion, (actor, { params, body }) =>
  takeBackVersion(actor, { ...body, id: params.id }),
)
