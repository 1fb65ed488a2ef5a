import type { EntityManager } from '@mikro-orm/postgresql'
import { AppError } from '@/lib/errors'
import type { RecipeVersionDto } from '@/lib/recipes/schema'
import { toVersion } from '@/lib/recipes/to-version'
import { versionRow } from '@/lib/recipes/version-rows'
import { currentSite } from '@/lib/site/current-site'

export function versionNotFound(): AppError {
  return new AppError('not found', 'There is no such recipe version, or you may not see it.')
}

/** The version as it leaves the server, for verbs that have authorised already. @throws AppError 'not found' */
export async function readVersion(em: EntityManager, id: string): Promise<RecipeVersionDto> {
  const row = await versionRow(em, id)
  if (row === null) throw versionNotFound()
  return toVersion(row, (await currentSite(em)).rules.dose)
}
