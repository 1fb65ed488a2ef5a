import type { EntityManager } from '@mikro-orm/postgresql'
import type { Actor } from '@/lib/auth/actor'
import { isAllowed, requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import { sqlFilters } from '@/lib/db/sql-filters'
import type { Page } from '@/lib/http/cursor'
import { decodeCursor, toPage } from '@/lib/http/cursor'
import type { RecipeListQuery } from '@/lib/recipes/list-query'
import type { RecipeListItem, RecipeVersionDto } from '@/lib/recipes/schema'
import type { RecipeRow } from '@/lib/recipes/to-recipe'
import { recipeColumns, recipeJoins, toRecipeListItem } from '@/lib/recipes/to-recipe'
import { toVersion } from '@/lib/recipes/to-version'
import { readableStates } from '@/lib/recipes/version-access'
import { versionRowsByIds } from '@/lib/recipes/version-rows'
import { currentSite } from '@/lib/site/current-site'

type ListRow = RecipeRow & { latest_id: string; sort_key: string }

/** What a list is sorted by, as text that compares as the column does; ties by id. */
const sortKeys = {
  name: 'lower(r.name)',
  updated: `to_char(latest.updated_at at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.US')`,
} as const

/** Recipes with the latest version that the actor may see, by search, state, piece and customer. */
export async function listRecipes(actor: Actor, query: RecipeListQuery): Promise<Page<RecipeListItem>> {
  requirePermission(actor, 'recipes:read')
  const em = await forkEm()
  const page = await listRows(em, actor, query)
  const versions = await latestVersions(em, page)
  return toPage(
    page.flatMap((row) => {
      const latest = versions.get(row.latest_id)
      return latest === undefined ? [] : [{ row, latest }]
    }),
    query.limit,
    ({ row, latest }) => toRecipeListItem(row, latest),
    ({ row }) => [row.sort_key, row.id],
  )
}

async function listRows(em: EntityManager, actor: Actor, query: RecipeListQuery): Promise<ListRow[]> {
  const states = readableStates(actor)
  const isDescending = query.sort.startsWith('-')
  const sortKey = query.sort.endsWith('name') ? sortKeys.name : sortKeys.updated
  const filters = sqlFilters()
  if (!isAllowed(actor, 'recipes:read unapproved')) filters.add('approved.id is not null')
  if (query.q !== undefined && query.q !== '') {
    filters.addLike(['r.name', `coalesce(c.name, '')`, 'latest.flavour_intent'], query.q)
  }
  if (query.pieceKind !== undefined) filters.add('latest.piece_kind = ?', query.pieceKind)
  if (query.customerId !== undefined) filters.add('r.customer_id = ?', query.customerId)
  if (query.state !== undefined) {
    filters.add(
      'exists (select 1 from recipe_versions w where w.recipe_id = r.id and w.state = ? and w.state in (?))',
      query.state,
      states,
    )
  }
  if (query.cursor !== undefined) {
    const [key, id] = decodeCursor(query.cursor, 2)
    filters.add(
      `(${sortKey} collate "und-x-icu", r.id::text) ${isDescending ? '<' : '>'} (? collate "und-x-icu", ?)`,
      String(key),
      String(id),
    )
  }
  const direction = isDescending ? 'desc' : 'asc'
  return queryRows<ListRow>(
    em,
    `select ${recipeColumns}, latest.id as latest_id, ${sortKey} as sort_key
       from recipes r ${recipeJoins}
       join lateral (select v.* from recipe_versions v where v.recipe_id = r.id and v.state in (?)
         order by v.number desc limit 1) latest on true
     ${filters.where()}
     order by ${sortKey} collate "und-x-icu" ${direction}, r.id::text ${direction} limit ?`,
    [states, states, ...filters.parameters, query.limit + 1],
  )
}

async function latestVersions(
  em: EntityManager,
  rows: readonly ListRow[],
): Promise<Map<string, RecipeVersionDto>> {
  const model = (await currentSite(em)).rules.dose
  const versions = await versionRowsByIds(
    em,
    rows.map((row) => row.latest_id),
  )
  return new Map(versions.map((version) => [version.id, toVersion(version, model)]))
}
