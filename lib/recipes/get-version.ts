import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm } from '@/lib/db/orm'
import { readVersion, versionNotFound } from '@/lib/recipes/read-version'
import type { RecipeVersionDto } from '@/lib/recipes/schema'
import { readableStates } from '@/lib/recipes/version-access'

/** One version with everything it says. Those who see approved recipes only find no other. */
export async function getVersion(actor: Actor, input: { id: string }): Promise<RecipeVersionDto> {
  requirePermission(actor, 'recipes:read')
  const version = await readVersion(await forkEm(), input.id)
  if (!readableStates(actor).includes(version.state)) throw versionNotFound()
  return version
}
