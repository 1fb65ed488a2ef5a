import type { Actor } from '@/lib/auth/actor'
import { isAllowed, requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import type { RecipeDto } from '@/lib/recipes/schema'
import type { RecipeRow } from '@/lib/recipes/to-recipe'
import { recipeColumns, recipeJoins, toRecipe } from '@/lib/recipes/to-recipe'
import { toVersion } from '@/lib/recipes/to-version'
import { readableStates, recipeNotFound } from '@/lib/recipes/version-access'
import { versionRowsOfRecipe } from '@/lib/recipes/version-rows'
import { currentSite } from '@/lib/site/current-site'

/** A recipe with every version that the actor may see, the newest first; not found when there is none. */
export async function getRecipe(actor: Actor, input: { id: string }): Promise<RecipeDto> {
  requirePermission(actor, 'recipes:read')
  const em = await forkEm()
  const states = readableStates(actor)
  const [row] = await queryRows<RecipeRow>(
    em,
    `select ${recipeColumns} from recipes r ${recipeJoins} where r.id = ?`,
    [states, input.id],
  )
  if (row === undefined) throw recipeNotFound()
  if (row.approved_id === null && !isAllowed(actor, 'recipes:read unapproved')) throw recipeNotFound()
  const model = (await currentSite(em)).rules.dose
  const versions = (await versionRowsOfRecipe(em, input.id))
    .filter((version) => states.includes(version.state))
    .map((version) => toVersion(version, model))
  const latest = versions[0]
  if (latest === undefined) throw recipeNotFound()
  return toRecipe(row, latest, versions)
}
