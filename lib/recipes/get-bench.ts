import type { Actor } from '@/lib/auth/actor'
import { isAllowed } from '@/lib/auth/permissions'
import { forkEm } from '@/lib/db/orm'
import { getRecipe } from '@/lib/recipes/get-recipe'
import { getVersion } from '@/lib/recipes/get-version'
import { planOf } from '@/lib/recipes/plan-of'
import type { RecipeVersionDto } from '@/lib/recipes/schema'
import type { CurvePoint } from '@/lib/science/heat-dose'
import type { SiteRules } from '@/lib/science/site-rules'
import { currentSite } from '@/lib/site/current-site'

/** Everything that the bench of a version shows. */
export type BenchDto = {
  version: RecipeVersionDto
  /** The version that it started from, if it may be seen. */
  basedOn: RecipeVersionDto | null
  basedOnPoints: CurvePoint[] | null
  /** Another version of the recipe that is a draft or in review. */
  openVersion: { id: string; number: number } | null
  rules: SiteRules
  timeZone: string
  isAuthor: boolean
  canWrite: boolean
  canApprove: boolean
}

/** A version with what its bench needs beside it. @throws AppError 'not found' as `getVersion` does */
export async function getBench(actor: Actor, input: { id: string }): Promise<BenchDto> {
  const version = await getVersion(actor, input)
  const { rules, timeZone } = await currentSite(await forkEm())
  const versions = await otherVersions(actor, version)
  const basedOn = versions.find(({ id }) => id === version.basedOnVersionId) ?? null
  const open = versions.find(({ state }) => state === 'draft' || state === 'in review')
  return {
    version,
    basedOn,
    basedOnPoints: basedOn === null ? null : planOf(basedOn.content, rules.dose).points,
    openVersion: open === undefined ? null : { id: open.id, number: open.number },
    rules,
    timeZone,
    isAuthor: actor.kind === 'person' && actor.accountId === version.author.id,
    canWrite: isAllowed(actor, 'recipes:write'),
    canApprove: isAllowed(actor, 'recipes:approve'),
  }
}

/** The recipe's other versions. Its approved one may be gone, and then a toaster sees this one alone. */
async function otherVersions(actor: Actor, version: RecipeVersionDto): Promise<RecipeVersionDto[]> {
  if (!isAllowed(actor, 'recipes:read unapproved')) return []
  const { versions } = await getRecipe(actor, { id: version.recipeId })
  return versions.filter(({ id }) => id !== version.id)
}
