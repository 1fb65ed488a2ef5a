import type { EntityManager } from '@mikro-orm/postgresql'
import { queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import type { StudyRow } from '@/lib/probes/to-study'
import { studySelect, toStudy } from '@/lib/probes/to-study'
import type { StudyDto } from '@/lib/probes/study-schema'
import { currentSite } from '@/lib/site/current-site'

/** One study with its placements, unauthorised: for verbs that have asked already. @throws AppError 'not found' */
export async function readStudy(em: EntityManager, id: string): Promise<StudyDto> {
  const [row] = await queryRows<StudyRow>(em, `${studySelect} where s.id = ?`, [id])
  if (row === undefined) throw new AppError('not found', 'There is no such study of repeat placements.')
  return toStudy(row, (await currentSite(em)).rules.dose)
}
