import type { EntityManager } from '@mikro-orm/postgresql'
import { queryRows } from '@/lib/db/orm'
import type { DeviceDto } from '@/lib/devices/schema'
import type { DeviceRow } from '@/lib/devices/to-device'
import { deviceSelect, toDevice } from '@/lib/devices/to-device'
import { AppError } from '@/lib/errors'
import { now } from '@/lib/runtime'

/** @throws AppError 'not found' */
export async function readDevice(em: EntityManager, id: string): Promise<DeviceDto> {
  const at = now()
  const [row] = await queryRows<DeviceRow>(em, `${deviceSelect} where d.id = ?`, [at, at, id])
  if (row === undefined) throw new AppError('not found', 'There is no such device.')
  return toDevice(row)
}

/**
 * The device, locked until the transaction ends, as it was when the caller edited it.
 * @throws AppError 'not found', 'conflict' for a revoked one, 'stale' with the device as it is now
 */
export async function lockDevice(em: EntityManager, id: string, revision?: number): Promise<DeviceDto> {
  await queryRows(em, 'select 1 from devices where id = ? for update', [id])
  const device = await readDevice(em, id)
  if (device.state === 'revoked') {
    throw new AppError('conflict', 'This device is revoked for good. Enrol it again as a new one.')
  }
  if (revision === undefined || device.revision === revision) return device
  throw new AppError('stale', 'Somebody changed this device meanwhile. Look at it and save again.', {
    current: device,
  })
}
