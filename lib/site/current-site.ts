import type { EntityManager } from '@mikro-orm/postgresql'
import { forkEm, queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { shared } from '@/lib/runtime'
import type { SiteRules } from '@/lib/science/site-rules'
import { siteRulesSchema } from '@/lib/science/site-rules'
import type { RoomSettings } from '@/lib/site/room-settings'
import { readStoredRoom } from '@/lib/site/room-settings'

export type Site = {
  version: number
  name: string
  serialPrefix: string
  /** IANA name. */
  timeZone: string
  rules: SiteRules
  room: RoomSettings
  isDemo: boolean
}

type SiteRow = {
  version: number
  name: string
  serial_prefix: string
  time_zone: string
  rules: unknown
  room: unknown
  is_demo: boolean
}

type Kept = { stamp: string; site: Site } | null

/**
 * The settings in force. A version never changes, so its parsed form is kept until a newer one is there; whether
 * one is, is asked each time, and another server's change is seen at once.
 * @throws AppError 'unavailable' before set-up has written the first version.
 */
export async function currentSite(em?: EntityManager): Promise<Site> {
  const from = em ?? (await forkEm())
  const kept = shared<{ now: Kept }>('site', () => ({ now: null }))
  const [newest] = await queryRows<{ version: number; created_at: Date | string }>(
    from,
    'select version, created_at from site_settings order by version desc limit 1',
  )
  if (newest === undefined) {
    throw new AppError('unavailable', 'This site is not set up yet. Run the set-up, then try again.')
  }
  const stamp = `${newest.version} ${new Date(newest.created_at).toISOString()}`
  if (kept.now?.stamp === stamp) return kept.now.site
  const site = await siteOfVersion(from, newest.version)
  kept.now = { stamp, site }
  return site
}

/** The settings of one version, as a score or a signature names it. @throws AppError 'not found' */
export async function siteOfVersion(em: EntityManager, version: number): Promise<Site> {
  const [row] = await queryRows<SiteRow>(
    em,
    'select version, name, serial_prefix, time_zone, rules, room, is_demo from site_settings where version = ?',
    [version],
  )
  if (row === undefined) throw new AppError('not found', `There are no site settings of version ${version}.`)
  return {
    version: row.version,
    name: row.name,
    serialPrefix: row.serial_prefix,
    timeZone: row.time_zone,
    rules: siteRulesSchema.parse(row.rules),
    room: readStoredRoom(row.room),
    isDemo: row.is_demo,
  }
}
