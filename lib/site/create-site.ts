import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { SystemActor } from '@/lib/auth/actor'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { now } from '@/lib/runtime'
import type { SiteRules } from '@/lib/science/site-rules'
import { defaultSiteRules } from '@/lib/science/site-rules'
import type { RoomSettings } from '@/lib/site/room-settings'
import { defaultRoomSettings } from '@/lib/site/room-settings'

/** A site that nobody has named yet; the administrator gives it its name on the settings page. */
export const unnamedSite = {
  name: 'Our cooperage',
  serialPrefix: 'EMB',
  timeZone: 'UTC',
  isDemo: false,
} as const

/**
 * Writes version 1 of the site's settings, by set-up or a seed. @throws AppError 'conflict' when the site exists.
 */
export async function createSite(
  actor: SystemActor,
  input: {
    name: string
    serialPrefix: string
    timeZone: string
    isDemo: boolean
    rules?: SiteRules
    room?: RoomSettings
  },
): Promise<void> {
  await inTransaction(async (em) => {
    const written = await queryRows<{ version: number }>(
      em,
      `insert into site_settings (version, name, serial_prefix, time_zone, rules, room, is_demo, created_at)
       values (1, ?, ?, ?, ?::jsonb, ?::jsonb, ?, ?) on conflict (version) do nothing returning version`,
      [
        input.name,
        input.serialPrefix,
        input.timeZone,
        JSON.stringify(input.rules ?? defaultSiteRules),
        JSON.stringify(input.room ?? defaultRoomSettings),
        input.isDemo,
        now(),
      ],
    )
    if (written.length === 0) throw new AppError('conflict', 'This site is set up already.')
    await writeAuditEntry(
      em,
      actor,
      'site.created',
      { type: 'site', id: '1' },
      { name: input.name, version: 1 },
    )
  })
}

/** True when a first version of the settings is there. */
export async function isSiteThere(): Promise<boolean> {
  return inTransaction(async (em) => {
    const rows = await queryRows(em, 'select 1 from site_settings limit 1')
    return rows.length > 0
  })
}
