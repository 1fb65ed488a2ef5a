import type { EntityManager } from '@mikro-orm/postgresql'
import type * as z from 'zod'
import type { RepeatabilityStudy } from '@/entities/repeatability-study'
import { RepeatabilityPlacementEntity } from '@/entities/repeatability-placement'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { AppError, invalidField } from '@/lib/errors'
import { lockOpenStudy } from '@/lib/probes/lock-study'
import { readStudy } from '@/lib/probes/read-study'
import { settledWindow } from '@/lib/probes/settled-window'
import type { addPlacementSchema, StudyDto } from '@/lib/probes/study-schema'
import { now } from '@/lib/runtime'
import type { SiteRules } from '@/lib/science/site-rules'
import { currentSite } from '@/lib/site/current-site'

type Input = z.infer<typeof addPlacementSchema> & { studyId: string }
type Pair = { placedTempC: number; referenceTempC: number }

/** Adds one placement: what both probes read, by eye or from their own settled readings. The same id again changes nothing. */
export async function addPlacement(actor: Actor, input: Input): Promise<StudyDto> {
  requirePermission(actor, 'checks:write')
  const person = requirePerson(actor)
  return inTransaction(async (em) => {
    const study = await lockOpenStudy(em, input.studyId)
    const known = await em.findOne(RepeatabilityPlacementEntity, { id: input.id })
    if (known !== null) {
      if (known.studyId === study.id) return readStudy(em, study.id)
      throw new AppError('conflict', 'A placement of another study has this id. Make a new one.')
    }
    const { rules } = await currentSite(em)
    const pair = await readPair(em, study, input, rules.checks)
    requireHeat(pair, rules.dose.baseTempC)
    const placement = em.create(RepeatabilityPlacementEntity, {
      id: input.id,
      studyId: study.id,
      position: await nextPosition(em, study.id),
      ...pair,
      way: input.takenAt === undefined ? 'by hand' : 'live',
      placedAt: now(),
      accountId: person.accountId,
    })
    await em.persistAndFlush(placement)
    await writeAuditEntry(
      em,
      actor,
      'repeatability.placed',
      { type: 'repeatability study', id: study.id },
      { placementId: placement.id, position: placement.position, ...pair },
    )
    return readStudy(em, study.id)
  })
}

async function readPair(
  em: EntityManager,
  study: RepeatabilityStudy,
  input: Input,
  checks: SiteRules['checks'],
): Promise<Pair> {
  const { takenAt, placedTempC, referenceTempC } = input
  if (takenAt === undefined) {
    if (placedTempC === undefined) throw invalidField('placedTempC', 'Give what the placed probe read.')
    if (referenceTempC === undefined) throw invalidField('referenceTempC', 'Give what the fixed probe read.')
    return { placedTempC, referenceTempC }
  }
  const placed = await settledWindow(em, study.probeId, takenAt, checks, 'placedTempC')
  const fixed = await settledWindow(em, study.referenceProbeId, takenAt, checks, 'referenceTempC')
  return { placedTempC: placed.meanC, referenceTempC: fixed.meanC }
}

/** What misplacing a probe costs grows with the heat; where no dose is made it says nothing. */
function requireHeat({ referenceTempC }: Pair, baseTempC: number): void {
  if (referenceTempC >= baseTempC) return
  throw invalidField(
    'referenceTempC',
    `The fixed probe must stand at ${baseTempC} °C or more: below it no dose is made, and places differ little.`,
  )
}

async function nextPosition(em: EntityManager, studyId: string): Promise<number> {
  const rows = await queryRows<{ next: number }>(
    em,
    'select coalesce(max(position), 0) + 1 as next from repeatability_placements where study_id = ?',
    [studyId],
  )
  const next = rows[0]?.next ?? 1
  if (next > 100) throw new AppError('conflict', 'A study takes 100 placements. Finish this one.')
  return next
}
