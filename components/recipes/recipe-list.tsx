import { LinkButton } from '@/components/ui/link-button'
import { Notice } from '@/components/ui/notice'
import { PageHead } from '@/components/ui/page-head'
import { Pager } from '@/components/ui/pager'
import { SearchForm } from '@/components/ui/search-form'
import type { SelectOption } from '@/components/ui/select-field'
import { changeQuery, readSort, writeSort } from '@/components/ui/url-query'
import type { TemperatureUnit } from '@/lib/format'
import type { RecipeListItem } from '@/lib/recipes/schema'
import type { SiteRules } from '@/lib/science/site-rules'
import { RecipeTable } from './recipe-table'

export type RecipeListProps = {
  recipes: readonly RecipeListItem[]
  nextCursor: string | null
  /** The address's own query, and the sort that it comes to. */
  query: Readonly<Record<string, string>>
  sort: string
  /** What of the address did not fit, as sentences. */
  faults: readonly string[]
  selects: readonly { name: string; label: string; fallback: string; options: readonly SelectOption[] }[]
  rules: SiteRules
  unit: TemperatureUnit
  zone: string
  canWrite: boolean
}

/** The list of recipes with its search, filters, sort and paging, all kept in the address. */
export function RecipeList(props: RecipeListProps) {
  const { recipes, nextCursor, query, sort, faults, selects, rules, unit, zone, canWrite } = props
  const href = (changes: Record<string, string | null>) => changeQuery('/recipes', query, changes)
  const newRecipe = (
    <LinkButton kind="main" href="/recipes/new">
      New recipe
    </LinkButton>
  )
  return (
    <>
      <PageHead title="Recipes" actions={canWrite ? newRecipe : undefined} />
      <SearchForm action="/recipes" values={query} hint="Name, customer, intent" selects={selects} />
      {faults.length === 0 ? null : <Notice className="mb-3">{faults.join(' ')}</Notice>}
      <RecipeTable
        recipes={recipes}
        rules={rules}
        unit={unit}
        zone={zone}
        sort={readSort(sort, { key: 'name', direction: 'asc' })}
        sortHref={(next) => href({ sort: writeSort(next) })}
        isFiltered={Object.keys(query).some((key) => key !== 'sort')}
        canWrite={canWrite}
      />
      <Pager
        firstHref={query['cursor'] === undefined ? undefined : href({ cursor: null })}
        nextHref={nextCursor === null ? undefined : href({ cursor: nextCursor })}
      />
    </>
  )
}
