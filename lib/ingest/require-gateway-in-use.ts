import { LockMode } from '@mikro-orm/core'
import type { EntityManager } from '@mikro-orm/postgresql'
import type { Gateway } from '@/entities/gateway'
import { GatewayEntity } from '@/entities/gateway'
import { AppError } from '@/lib/errors'

/** The gateway's row, locked. @throws AppError 'not found'; 'conflict' for one that is retired */
export async function requireGatewayInUse(em: EntityManager, id: string): Promise<Gateway> {
  const gateway = await em.findOne(GatewayEntity, { id }, { lockMode: LockMode.PESSIMISTIC_WRITE })
  if (gateway === null) throw new AppError('not found', 'There is no such gateway.')
  if (gateway.retiredAt) {
    throw new AppError(
      'conflict',
      `${gateway.name} is retired. Register the new box as a gateway of its own.`,
    )
  }
  return gateway
}
