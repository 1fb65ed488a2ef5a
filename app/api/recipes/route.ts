import { route } from '@/lib/http/route'
import { createRecipe } from '@/lib/recipes/create-recipe'
import { listRecipes } from '@/lib/recipes/list-recipes'
import { operations } from '@/lib/recipes/operations'

export const GET = route(operations.listRecipes, (actor, { query }) => listRecipes(actor, query))
export const POST = route(operations.createRecipe, (actor, { body }) => createRecipe(actor, body))
