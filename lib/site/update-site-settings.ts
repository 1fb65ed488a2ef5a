import type { EntityManager } from '@mikro-orm/postgresql'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { now } from '@/lib/runtime'
import { describeChanges } from '@/lib/audit/describe-changes'
import { readSiteSettings } from '@/lib/site/get-site-settings'
import type { SiteSettingsBody, SiteSettingsDto } from '@/lib/site/schema'

/**
 * Puts a new version of the settings in force. Scores and recipe copies made before keep the rules they were made
 * with. Settings that do not differ make no version.
 * @throws AppError 'stale' with the settings in force when another version was edited.
 */
export async function updateSiteSettings(actor: Actor, input: SiteSettingsBody): Promise<SiteSettingsDto> {
  requirePermission(actor, 'site:write')
  const person = requirePerson(actor)
  return inTransaction(async (em) => {
    // One writer at a time: the next version's number is taken from the one in force.
    await queryRows(em, `select pg_advisory_xact_lock(hashtext('emberstave.site'))`)
    const before = await readSiteSettings(em)
    if (before.version !== input.version) throw stale(before)
    const changes = describeChanges(settingsOf(before), settingsOf(input))
    if (Object.keys(changes).length === 0) return before
    const version = before.version + 1
    await insertVersion(em, version, input, before.isDemo, person.accountId)
    await writeAuditEntry(em, actor, 'site.changed', { type: 'site', id: '1' }, { version, changes })
    return readSiteSettings(em)
  })
}

function settingsOf({ name, serialPrefix, timeZone, rules }: Omit<SiteSettingsBody, 'version'>) {
  return { name, serialPrefix, timeZone, rules }
}

async function insertVersion(
  em: EntityManager,
  version: number,
  input: SiteSettingsBody,
  isDemo: boolean,
  accountId: string,
): Promise<void> {
  await queryRows(
    em,
    `insert into site_settings
       (version, name, serial_prefix, time_zone, rules, is_demo, created_at, created_by)
     values (?, ?, ?, ?, ?::jsonb, ?, ?, ?)`,
    [
      version,
      input.name,
      input.serialPrefix,
      input.timeZone,
      JSON.stringify(input.rules),
      isDemo,
      now(),
      accountId,
    ],
  )
}

function stale(current: SiteSettingsDto): AppError {
  const by = current.changedBy ?? 'the set-up'
  return new AppError(
    'stale',
    `${by} changed the settings meanwhile: version ${current.version} is in force. Look at both and save again.`,
    { current },
  )
}
