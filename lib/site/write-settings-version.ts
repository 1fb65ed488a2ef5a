import type { EntityManager } from '@mikro-orm/postgresql'
import { describeChanges } from '@/lib/audit/describe-changes'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { PersonActor } from '@/lib/auth/actor'
import { queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { now } from '@/lib/runtime'
import { readSiteSettings } from '@/lib/site/get-site-settings'
import type { SiteSettingsBody, SiteSettingsDto } from '@/lib/site/schema'

/**
 * Puts a new version of the settings in force, unauthorised: for verbs that have asked already. Settings that do not
 * differ make no version.
 *
 * @param why what led to it, beside the changes in the audit trail
 * @throws AppError 'stale' with the settings in force when another version was edited.
 */
export async function writeSettingsVersion(
  em: EntityManager,
  person: PersonActor,
  input: SiteSettingsBody,
  why: Record<string, unknown> = {},
): Promise<SiteSettingsDto> {
  // One writer at a time: the next version's number is taken from the one in force.
  await queryRows(em, `select pg_advisory_xact_lock(hashtext('emberstave.site'))`)
  const before = await readSiteSettings(em)
  if (before.version !== input.version) throw stale(before)
  const changes = describeChanges(settingsOf(before), settingsOf(input))
  if (Object.keys(changes).length === 0) return before
  const version = before.version + 1
  await insertVersion(em, version, input, before.isDemo, person.accountId)
  await writeAuditEntry(em, person, 'site.changed', { type: 'site', id: '1' }, { version, changes, ...why })
  return readSiteSettings(em)
}

function settingsOf({ name, serialPrefix, timeZone, rules, room }: Omit<SiteSettingsBody, 'version'>) {
  return { name, serialPrefix, timeZone, rules, room }
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
       (version, name, serial_prefix, time_zone, rules, room, is_demo, created_at, created_by)
     values (?, ?, ?, ?, ?::jsonb, ?::jsonb, ?, ?, ?)`,
    [
      version,
      input.name,
      input.serialPrefix,
      input.timeZone,
      JSON.stringify(input.rules),
      JSON.stringify(input.room),
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
