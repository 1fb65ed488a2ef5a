import type { DeviceKind } from '@/lib/auth/actor'
import type { DeviceDto } from '@/lib/devices/schema'

/** One row a device, with its open code and who is signed in at it. Takes two `?`: now, and now. */
export const deviceSelect = `
  select d.id, d.name, lower(d.name) as sort_name, d.kind, d.hearth_id, h.number as hearth_number, d.temperature_unit,
         d.idle_minutes, d.created_at, a.name as created_by_name, d.enrolled_at, d.last_seen_at, d.user_agent,
         d.revoked_at, d.revision,
         (select max(e.expires_at) from device_enrolments e
           where e.device_id = d.id and e.used_at is null and e.cancelled_at is null and e.expires_at > ?)
           as code_until,
         (select p.name from sessions s join accounts p on p.id = s.account_id
           where s.device_id = d.id and s.ended_at is null and s.expires_at > ?
           order by s.created_at desc limit 1) as person
    from devices d join accounts a on a.id = d.created_by left join hearths h on h.id = d.hearth_id`

export type DeviceRow = {
  id: string
  name: string
  sort_name: string
  kind: DeviceKind
  hearth_id: string | null
  hearth_number: number | null
  temperature_unit: 'C' | 'F'
  idle_minutes: number
  created_at: Date | string
  created_by_name: string
  enrolled_at: Date | string | null
  last_seen_at: Date | string | null
  user_agent: string | null
  revoked_at: Date | string | null
  revision: number
  code_until: Date | string | null
  person: string | null
}

function toInstant(at: Date | string | null): string | null {
  return at === null ? null : new Date(at).toISOString()
}

function stateOf(row: DeviceRow): DeviceDto['state'] {
  if (row.revoked_at !== null) return 'revoked'
  return row.enrolled_at === null ? 'waiting' : 'enrolled'
}

export function toDevice(row: DeviceRow): DeviceDto {
  return {
    id: row.id,
    name: row.name,
    kind: row.kind,
    hearth:
      row.hearth_id === null || row.hearth_number === null
        ? null
        : { id: row.hearth_id, number: row.hearth_number },
    temperatureUnit: row.temperature_unit,
    idleMinutes: row.idle_minutes,
    state: stateOf(row),
    createdAt: new Date(row.created_at).toISOString(),
    createdBy: row.created_by_name,
    enrolledAt: toInstant(row.enrolled_at),
    lastSeenAt: toInstant(row.last_seen_at),
    userAgent: row.user_agent,
    revokedAt: toInstant(row.revoked_at),
    codeUntil: toInstant(row.code_until),
    person: row.person,
    revision: row.revision,
  }
}
