import type { EntityManager } from '@mikro-orm/postgresql'
import { LockMode } from '@mikro-orm/core'
import type { RecipeVersion } from '@/entities/recipe-version'
import { RecipeVersionEntity } from '@/entities/recipe-version'
import type { Actor } from '@/lib/auth/actor'
import { isAllowed } from '@/lib/auth/permissions'
import { AppError } from '@/lib/errors'
import { readVersion, versionNotFound } from '@/lib/recipes/read-version'
import type { VersionState } from '@/lib/recipes/schema'

/** What those may read who see approved recipes only (toasters): the approved version and those before it. */
export const releasedStates: readonly VersionState[] = ['approved', 'superseded']

/** The states of version that this actor may read; the permission to read recipes at all is asked before. */
export function readableStates(actor: Actor): readonly VersionState[] {
  return isAllowed(actor, 'recipes:read unapproved')
    ? ['draft', 'in review', 'approved', 'superseded', 'withdrawn']
    : releasedStates
}

export function recipeNotFound(): AppError {
  return new AppError('not found', 'There is no such recipe, or you may not see it.')
}

/** The version's row, locked until the transaction ends, so that two people cannot move it at once. */
export async function lockVersion(em: EntityManager, id: string): Promise<RecipeVersion> {
  const version = await em.findOne(RecipeVersionEntity, { id }, { lockMode: LockMode.PESSIMISTIC_WRITE })
  if (version === null) throw versionNotFound()
  return version
}

/** @throws AppError 'stale', with the server's version, when the revision given is not the present one. */
export async function requireRevision(
  em: EntityManager,
  version: RecipeVersion,
  revision: number | undefined,
): Promise<void> {
  if (revision === undefined || revision === version.revision) return
  throw new AppError(
    'stale',
    `Somebody saved version ${version.number} after you opened it. Keep yours or take theirs.`,
    { current: await readVersion(em, version.id) },
  )
}
