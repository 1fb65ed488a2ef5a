import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import type { SiteSettingsBody, SiteSettingsDto } from '@/lib/site/schema'
import { writeSettingsVersion } from '@/lib/site/write-settings-version'

/**
 * Puts a new version of the settings in force. Scores and recipe copies made before keep the rules they were made
 * with. Settings that do not differ make no version.
 * @throws AppError 'stale' with the settings in force when another version was edited.
 */
export async function updateSiteSettings(actor: Actor, input: SiteSettingsBody): Promise<SiteSettingsDto> {
  requirePermission(actor, 'site:write')
  const person = requirePerson(actor)
  return inTransaction((em) => writeSettingsVersion(em, person, input))
}
