import { LockMode } from '@mikro-orm/core'
import type { EntityManager } from '@mikro-orm/postgresql'
import type { Firing } from '@/entities/firing'
import { FiringEntity } from '@/entities/firing'
import { AppError } from '@/lib/errors'

/** The firing's row, locked until the transaction ends. @throws AppError 'not found' */
export async function lockFiring(em: EntityManager, id: string): Promise<Firing> {
  const firing = await em.findOne(FiringEntity, { id }, { lockMode: LockMode.PESSIMISTIC_WRITE })
  if (firing === null) throw new AppError('not found', 'There is no such firing.')
  return firing
}
