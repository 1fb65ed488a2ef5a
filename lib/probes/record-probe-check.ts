import type * as z from 'zod'
import { ProbeEntity } from '@/entities/probe'
import { ProbeCheckEntity } from '@/entities/probe-check'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { AppError, invalidField } from '@/lib/errors'
import type { recordProbeCheckSchema } from '@/lib/probes/schema'
import { now } from '@/lib/runtime'
import { referencePointC } from '@/lib/science/probe-correction'

type Input = z.infer<typeof recordProbeCheckSchema> & { probeId: string }

/** What the reference stood at: 0 °C for ice, the IF97 boiling point for the day's station pressure, or as given. */
function referenceTempC(input: Input): number {
  if (input.kind === 'ice') return referencePointC({ kind: 'ice' })
  if (input.kind === 'boiling') {
    if (input.stationPressureHpa === undefined) {
      throw invalidField('stationPressureHpa', 'Give the station pressure of the day, not the sea-level one.')
    }
    return referencePointC({ kind: 'boiling', stationPressureHpa: input.stationPressureHpa })
  }
  if (input.referenceTempC === undefined)
    throw invalidField('referenceTempC', 'Give what the reference stood at.')
  return input.referenceTempC
}

/** Records one check of a probe; readings between checked points are corrected by it from then on. */
export async function recordProbeCheck(actor: Actor, input: Input): Promise<{ id: string }> {
  requirePermission(actor, 'checks:write')
  const person = requirePerson(actor)
  const checkedAt = input.checkedAt === undefined ? now() : new Date(input.checkedAt)
  const dueAt = new Date(input.dueAt)
  if (dueAt <= checkedAt) throw invalidField('dueAt', 'The next check must be after this one.')
  if (checkedAt > now()) throw invalidField('checkedAt', 'A check cannot be in the future.')
  return inTransaction(async (em) => {
    if ((await em.findOne(ProbeEntity, { id: input.probeId })) === null) {
      throw new AppError('not found', 'There is no such probe.')
    }
    const check = em.create(ProbeCheckEntity, {
      probeId: input.probeId,
      kind: input.kind,
      referenceTempC: referenceTempC(input),
      measuredTempC: input.measuredTempC,
      uncertaintyC: input.uncertaintyC,
      stationPressureHpa: input.kind === 'boiling' ? (input.stationPressureHpa ?? null) : null,
      checkedAt,
      dueAt,
      accountId: person.accountId,
    })
    await em.persistAndFlush(check)
    await writeAuditEntry(
      em,
      actor,
      'probe.checked',
      { type: 'probe', id: input.probeId },
      { kind: input.kind },
    )
    return { id: check.id }
  })
}
