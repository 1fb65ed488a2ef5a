import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import { sqlFilters } from '@/lib/db/sql-filters'
import type { DeviceDto, DeviceListQuery } from '@/lib/devices/schema'
import type { DeviceRow } from '@/lib/devices/to-device'
import { deviceSelect, toDevice } from '@/lib/devices/to-device'
import type { Page } from '@/lib/http/cursor'
import { decodeCursor, toPage } from '@/lib/http/cursor'
import { now } from '@/lib/runtime'

const conditionOf: Record<Exclude<DeviceListQuery['state'], 'all'>, string> = {
  'in use': 'd.revoked_at is null',
  waiting: 'd.revoked_at is null and d.enrolled_at is null',
  revoked: 'd.revoked_at is not null',
}

/** Tablets and wall screens by name. */
export async function listDevices(actor: Actor, query: DeviceListQuery): Promise<Page<DeviceDto>> {
  requirePermission(actor, 'devices:read')
  const filters = sqlFilters()
  if (query.state !== 'all') filters.add(conditionOf[query.state])
  if (query.q !== undefined && query.q !== '') filters.addLike(['d.name', 'd.kind'], query.q)
  if (query.cursor !== undefined) {
    filters.add('(lower(d.name), d.id) > (?, ?)', ...decodeCursor(query.cursor, 2))
  }
  const at = now()
  const rows = await queryRows<DeviceRow>(
    await forkEm(),
    `${deviceSelect} ${filters.where()} order by lower(d.name), d.id limit ?`,
    [at, at, ...filters.parameters, query.limit + 1],
  )
  return toPage(rows, query.limit, toDevice, (row) => [row.sort_name, row.id])
}
