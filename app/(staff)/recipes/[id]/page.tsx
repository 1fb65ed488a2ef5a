import type { Metadata } from 'next'
import { RecipeView } from '@/components/recipes/recipe-view'
import { requirePageActor } from '@/lib/auth/page-actor'
import { isAllowed } from '@/lib/auth/permissions'
import { orNotFound } from '@/lib/http/or-not-found'
import { getRecipe } from '@/lib/recipes/get-recipe'
import { currentSite } from '@/lib/site/current-site'

export const metadata: Metadata = { title: 'Recipe' }

export default async function RecipePage({ params }: { params: Promise<{ id: string }> }) {
  const actor = await requirePageActor()
  const { id } = await params
  const recipe = await orNotFound(getRecipe(actor, { id }), id)
  const { rules, timeZone } = await currentSite()
  const canWrite = isAllowed(actor, 'recipes:write')
  return (
    <RecipeView
      recipe={recipe}
      rules={rules}
      unit={actor.temperatureUnit}
      zone={timeZone}
      canWrite={canWrite}
    />
  )
}
