import type { Metadata } from 'next'
import { RecipeList } from '@/components/recipes/recipe-list'
import { requirePageActor } from '@/lib/auth/page-actor'
import type { SearchParams } from '@/lib/http/page-query'
import { readPageQuery } from '@/lib/http/page-query'
import { filterSelects } from '@/lib/recipes/filter-selects'
import { recipeListQuerySchema } from '@/lib/recipes/list-query'
import { listRecipes } from '@/lib/recipes/list-recipes'
import { recipeChoices } from '@/lib/recipes/recipe-choices'
import { currentSite } from '@/lib/site/current-site'

export const metadata: Metadata = { title: 'Recipes' }

export default async function RecipesPage({ searchParams }: { searchParams: SearchParams }) {
  const actor = await requirePageActor()
  const { query, raw, faults } = await readPageQuery(recipeListQuerySchema, searchParams)
  const page = await listRecipes(actor, query)
  const { customers, canWrite } = await recipeChoices(actor)
  const { rules, timeZone } = await currentSite()
  return (
    <RecipeList
      recipes={page.items}
      nextCursor={page.nextCursor}
      query={raw}
      sort={query.sort}
      faults={faults}
      selects={filterSelects(customers, actor.role)}
      rules={rules}
      unit={actor.temperatureUnit}
      zone={timeZone}
      canWrite={canWrite}
    />
  )
}
