import type { EntityManager } from '@mikro-orm/postgresql'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import { currentSite } from '@/lib/site/current-site'
import type { SiteSettingsDto } from '@/lib/site/schema'

/** The settings in force, and who wrote them when. */
export async function getSiteSettings(actor: Actor): Promise<SiteSettingsDto> {
  requirePermission(actor, 'site:read')
  return readSiteSettings(await forkEm())
}

export async function readSiteSettings(em: EntityManager): Promise<SiteSettingsDto> {
  const { version, name, serialPrefix, timeZone, rules, room, isDemo } = await currentSite(em)
  const [row] = await queryRows<{ created_at: Date | string; changed_by: string | null }>(
    em,
    `select s.created_at, a.name as changed_by
       from site_settings s left join accounts a on a.id = s.created_by where s.version = ?`,
    [version],
  )
  if (row === undefined) throw new Error('The settings in force vanished')
  return {
    version,
    name,
    serialPrefix,
    timeZone,
    rules,
    room,
    isDemo,
    changedAt: new Date(row.created_at).toISOString(),
    changedBy: row.changed_by,
  }
}
