import { LockMode } from '@mikro-orm/core'
import type { EntityManager } from '@mikro-orm/postgresql'
import type { RepeatabilityStudy } from '@/entities/repeatability-study'
import { RepeatabilityStudyEntity } from '@/entities/repeatability-study'
import { AppError } from '@/lib/errors'

/** The row of an open study, locked. @throws AppError 'not found'; 'conflict' for one that has ended */
export async function lockOpenStudy(em: EntityManager, id: string): Promise<RepeatabilityStudy> {
  const study = await lockStudy(em, id)
  if (study.state !== 'open') {
    throw new AppError('conflict', `This study is ${study.state}. Begin a new one to place the probe again.`)
  }
  return study
}

/** The row of a study, locked. @throws AppError 'not found' */
export async function lockStudy(em: EntityManager, id: string): Promise<RepeatabilityStudy> {
  const study = await em.findOne(RepeatabilityStudyEntity, { id }, { lockMode: LockMode.PESSIMISTIC_WRITE })
  if (study === null) throw new AppError('not found', 'There is no such study of repeat placements.')
  return study
}
