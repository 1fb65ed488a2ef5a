import type { Metadata } from 'next'
import { RecipeTable } from '@/components/recipes/recipe-table'
import { LinkButton } from '@/components/ui/link-button'
import { Notice } from '@/components/ui/notice'
import { PageHead } from '@/components/ui/page-head'
import { Pager } from '@/components/ui/pager'
import { SearchForm } from '@/components/ui/search-form'
import { changeQuery, readSort, writeSort } from '@/components/ui/url-query'
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
  const [page, choices, site] = await Promise.all([
    listRecipes(actor, query),
    recipeChoices(actor),
    currentSite(),
  ])
  const href = (changes: Record<string, string | null>) => changeQuery('/recipes', raw, changes)
  const newRecipe = (
    <LinkButton kind="main" href="/recipes/new">
      New recipe
    </LinkButton>
  )
  return (
    <>
      <PageHead title="Recipes" actions={choices.canWrite ? newRecipe : undefined} />
      <SearchForm
        action="/recipes"
        values={raw}
        hint="Name, customer, intent"
        selects={filterSelects(choices.customers, actor.role)}
      />
      {faults.length === 0 ? null : <Notice className="mb-3">{faults.join(' ')}</Notice>}
      <RecipeTable
        recipes={page.items}
        rules={site.rules}
        unit={actor.temperatureUnit}
        zone={site.timeZone}
        sort={readSort(query.sort, { key: 'name', direction: 'asc' })}
        sortHref={(sort) => href({ sort: writeSort(sort) })}
        isFiltered={Object.keys(raw).some((key) => key !== 'sort')}
        canWrite={choices.canWrite}
      />
      <Pager
        firstHref={query.cursor === undefined ? undefined : href({ cursor: null })}
        nextHref={page.nextCursor === null ? undefined : href({ cursor: page.nextCursor })}
      />
    </>
  )
}
