import Link from 'next/link'
import { EmptyState } from '@/components/ui/empty-state'
import { LinkButton } from '@/components/ui/link-button'
import { StateText } from '@/components/ui/state-text'
import type { Column } from '@/components/ui/table'
import { Table } from '@/components/ui/table'
import { Time } from '@/components/ui/time'
import type { Sort } from '@/components/ui/url-query'
import { formatDoseFigure, formatNumber } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import type { RecipeListItem, VersionState } from '@/lib/recipes/schema'
import type { SiteRules } from '@/lib/science/site-rules'
import { PlanThumb } from './plan-thumb'

export type RecipeTableProps = {
  recipes: readonly RecipeListItem[]
  rules: SiteRules
  unit: TemperatureUnit
  zone: string
  sort: Sort
  sortHref: (sort: Sort) => string
  isFiltered: boolean
  canWrite: boolean
}

/** Withdrawn is wrong, superseded past, in review waits for somebody; the rest is normal and has no colour. */
export function versionTone(state: VersionState): 'normal' | 'past' | 'attention' | 'wrong' {
  if (state === 'withdrawn') return 'wrong'
  if (state === 'superseded') return 'past'
  return state === 'in review' ? 'attention' : 'normal'
}

/** Recipes with the small pair of their latest version. */
export function RecipeTable(props: RecipeTableProps) {
  return (
    <Table
      caption="Recipes"
      columns={columnsOf(props)}
      rows={props.recipes}
      rowKey={(recipe) => recipe.id}
      sort={props.sort}
      sortHref={props.sortHref}
      empty={<NoRecipes {...props} />}
    />
  )
}

function columnsOf({ rules, unit, zone }: RecipeTableProps): readonly Column<RecipeListItem>[] {
  return [
    {
      key: 'pair',
      head: <span className="sr-only">Plan</span>,
      className: 'w-[170px]',
      cell: ({ name, latestVersion }) => (
        <PlanThumb
          title={`${name}, version ${latestVersion.number}`}
          content={latestVersion.content}
          rules={rules}
          unit={unit}
        />
      ),
    },
    {
      key: 'name',
      head: 'Recipe',
      sortKey: 'name',
      isRowHead: true,
      cell: (recipe) => (
        <>
          <Link href={`/recipes/${recipe.id}`} className="font-[640] hover:underline underline-offset-3">
            {recipe.name}
          </Link>
          {recipe.customerName === null ? null : (
            <span className="text-soft"> for {recipe.customerName}</span>
          )}
          <span className="line-clamp-2 block max-w-[44ch] text-small text-soft">
            {recipe.latestVersion.content.flavourIntent}
          </span>
        </>
      ),
    },
    {
      key: 'latest',
      head: 'Latest',
      cell: ({ latestVersion: version }) => (
        <Link href={`/recipe-versions/${version.id}`} className="link whitespace-nowrap">
          {version.number} <StateText state={version.state} tone={versionTone(version.state)} />
        </Link>
      ),
    },
    {
      key: 'approved',
      head: 'May be fired',
      cell: ({ approvedVersion }) =>
        approvedVersion === null ? (
          <span className="text-mute">none</span>
        ) : (
          <Link href={`/recipe-versions/${approvedVersion.id}`} className="link">
            version {approvedVersion.number}
          </Link>
        ),
    },
    {
      key: 'piece',
      head: 'Piece',
      cell: ({ latestVersion: { content } }) => (
        <>
          {content.pieceKind}
          <span className="block text-small text-soft">{content.sizeAndShape}</span>
        </>
      ),
    },
    {
      key: 'dose',
      head: 'Target dose',
      unit: 'min',
      isNumeric: true,
      cell: ({ latestVersion }) => formatDoseFigure(latestVersion.targetDoseMinutes),
    },
    {
      key: 'fire',
      head: 'Fire',
      unit: 'min',
      isNumeric: true,
      cell: ({ latestVersion }) => formatNumber(latestVersion.totalMinutes, 0),
    },
    {
      key: 'updated',
      head: 'Changed',
      sortKey: 'updated',
      isNumeric: true,
      cell: ({ latestVersion }) => <Time at={latestVersion.updatedAt} zone={zone} style="date" />,
    },
  ]
}

function NoRecipes({ isFiltered, canWrite }: RecipeTableProps) {
  if (isFiltered) {
    return (
      <EmptyState title="No recipe fits." action={<LinkButton href="/recipes">Show all</LinkButton>}>
        Look for less of the name, or leave a filter out.
      </EmptyState>
    )
  }
  return (
    <EmptyState
      title="There is no recipe yet."
      action={
        canWrite ? (
          <LinkButton kind="due" href="/recipes/new">
            Write the first recipe
          </LinkButton>
        ) : undefined
      }
    >
      {canWrite
        ? 'A recipe says how wet, how hot and how long. It begins from a usual toast and is changed on the bench.'
        : 'A recipe is shown here once a master cooper has approved it.'}
    </EmptyState>
  )
}
