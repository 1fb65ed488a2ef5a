import { route } from '@/lib/http/route'
import { operations } from '@/lib/recipes/operations'
import { withdrawVersion } from '@/lib/recipes/withdraw-version'

export const POST = route(operations.withdrawVersion, (actor, { params, body }) =>
  withdrawVersion(actor, { ...body, id: params.id }),
)
