import { route } from '@/lib/http/route'
import { createVersion } from '@/lib/recipes/create-version'
import { operations } from '@/lib/recipes/operations'

export const POST = route(operations.createVersion, (actor, { params, body }) =>
  createVersion(actor, { ...body, recipeId: params.id }),
)
