import { route } from '@/lib/http/route'
import { getRecipe } from '@/lib/recipes/get-recipe'
import { operations } from '@/lib/recipes/operations'

export const GET = route(operations.getRecipe, (actor, { params }) => getRecipe(actor, params))
