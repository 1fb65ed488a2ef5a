import type * as z from 'zod'
import { ProbeEntity } from '@/entities/probe'
import { RepeatabilityStudyEntity } from '@/entities/repeatability-study'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { invalidField } from '@/lib/errors'
import { readStudy } from '@/lib/probes/read-study'
import type { startStudySchema, StudyDto } from '@/lib/probes/study-schema'
import { now } from '@/lib/runtime'

/**
 * Begins a study of repeat placements: one probe is put into its place again and again beside another that stays, at
 * steady heat. The place is the one that is recorded for the probe.
 */
export async function startStudy(actor: Actor, input: z.infer<typeof startStudySchema>): Promise<StudyDto> {
  requirePermission(actor, 'checks:write')
  const person = requirePerson(actor)
  return inTransaction(async (em) => {
    const probe = await em.findOne(ProbeEntity, { id: input.probeId, retiredAt: null })
    if (probe === null) throw invalidField('probeId', 'Choose a probe that is in use.')
    const reference = await em.findOne(ProbeEntity, { id: input.referenceProbeId, retiredAt: null })
    if (reference === null) throw invalidField('referenceProbeId', 'Choose a probe that is in use.')
    if (probe.id === reference.id) {
      throw invalidField('referenceProbeId', 'This one is placed again and again. Choose another that stays.')
    }
    if (probe.height === 'coals') {
      throw invalidField('probeId', 'A coals probe makes no dose. Choose one that reads wood.')
    }
    const open = await em.findOne(RepeatabilityStudyEntity, { probeId: probe.id, state: 'open' })
    if (open !== null) {
      throw invalidField('probeId', `${probe.name} is in study ${open.no} already. Go on with that one.`)
    }
    const study = em.create(RepeatabilityStudyEntity, {
      probeId: probe.id,
      referenceProbeId: reference.id,
      height: probe.height,
      side: probe.side,
      depthMm: probe.depthMm,
      mounting: probe.mounting,
      heatWords: input.heatWords,
      startedAt: now(),
      startedBy: person.accountId,
    })
    await em.persistAndFlush(study)
    await writeAuditEntry(
      em,
      actor,
      'repeatability.started',
      { type: 'repeatability study', id: study.id },
      { probe: probe.name, reference: reference.name },
    )
    return readStudy(em, study.id)
  })
}
