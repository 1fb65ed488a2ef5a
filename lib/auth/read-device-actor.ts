import type { DeviceActor, DeviceKind } from '@/lib/auth/actor'
import { deviceTokenSha256Of } from '@/lib/auth/device-cookie'
import { forkEm, queryRows } from '@/lib/db/orm'
import { now } from '@/lib/runtime'

type DeviceRow = {
  id: string
  name: string
  kind: DeviceKind
  hearth_number: number | null
  temperature_unit: 'C' | 'F'
  idle_minutes: number
  last_seen_at: Date | string | null
}

/** How often a device's last use is written down. */
const seenEveryS = 60

const select = `select d.id, d.name, d.kind, h.number as hearth_number, d.temperature_unit, d.idle_minutes,
                       d.last_seen_at
                  from devices d left join hearths h on h.id = d.hearth_id`

/**
 * The enrolled device behind a Cookie header, or null. The row is read every time, so that revoking one takes effect
 * with its next request.
 */
export async function readDeviceActor(cookieHeader: string | null | undefined): Promise<DeviceActor | null> {
  const sha256 = deviceTokenSha256Of(cookieHeader)
  return sha256 === null ? null : readDevice('d.token_sha256 = ?', sha256)
}

/** The same for a device that is known already (sockets ask again every few seconds). */
export async function readDeviceById(id: string): Promise<DeviceActor | null> {
  return readDevice('d.id = ? and d.token_sha256 is not null', id)
}

async function readDevice(condition: string, value: string): Promise<DeviceActor | null> {
  const em = await forkEm()
  const [row] = await queryRows<DeviceRow>(em, `${select} where ${condition} and d.revoked_at is null`, [
    value,
  ])
  if (row === undefined) return null
  const at = now()
  const seenMs = row.last_seen_at === null ? -Infinity : new Date(row.last_seen_at).getTime()
  if (at.getTime() - seenMs > seenEveryS * 1000) {
    await queryRows(em, 'update devices set last_seen_at = ? where id = ? and revoked_at is null', [
      at,
      row.id,
    ])
  }
  return {
    kind: 'device',
    deviceId: row.id,
    name: row.name,
    place: row.kind,
    hearthNumber: row.hearth_number,
    temperatureUnit: row.temperature_unit,
    idleMinutes: row.idle_minutes,
  }
}
