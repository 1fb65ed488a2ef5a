import type { RecipeDto, RecipeListItem, RecipeVersionDto } from '@/lib/recipes/schema'

/** One row of `recipeSelect`. */
export type RecipeRow = {
  id: string
  name: string
  customer_id: string | null
  customer_name: string | null
  created_at: string
  created_by_name: string
  version_count: number
  approved_id: string | null
  approved_number: number | null
}

/** Columns of a recipe with its names; `?` first takes the states that are counted. */
export const recipeColumns = `
  r.id, r.name, r.customer_id, c.name as customer_name, r.created_at, maker.name as created_by_name,
  (select count(*)::integer from recipe_versions n where n.recipe_id = r.id and n.state in (?)) as version_count,
  approved.id as approved_id, approved.number as approved_number`

export const recipeJoins = `
  join accounts maker on maker.id = r.created_by
  left join customers c on c.id = r.customer_id
  left join recipe_versions approved on approved.recipe_id = r.id and approved.state = 'approved'`

export function toRecipeListItem(row: RecipeRow, latestVersion: RecipeVersionDto): RecipeListItem {
  return {
    id: row.id,
    name: row.name,
    customerId: row.customer_id,
    customerName: row.customer_name,
    createdAt: new Date(row.created_at).toISOString(),
    createdBy: row.created_by_name,
    versionCount: row.version_count,
    approvedVersion:
      row.approved_id === null || row.approved_number === null
        ? null
        : { id: row.approved_id, number: row.approved_number },
    latestVersion,
  }
}

/** `versions` the newest first, at least one. */
export function toRecipe(
  row: RecipeRow,
  latestVersion: RecipeVersionDto,
  versions: readonly RecipeVersionDto[],
): RecipeDto {
  return { ...toRecipeListItem(row, latestVersion), versions: [...versions] }
}
