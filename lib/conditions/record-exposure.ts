import { ExposureReadingEntity } from '@/entities/exposure-reading'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { readingInstant } from '@/lib/conditions/reading-instant'
import type { ExposureReadingDto, RecordExposure } from '@/lib/conditions/schema'
import type { ExposureRow } from '@/lib/conditions/to-exposure-reading'
import { exposureSelect, toExposureReading } from '@/lib/conditions/to-exposure-reading'
import { violatedConstraint } from '@/lib/db/database-errors'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { AppError, invalidField } from '@/lib/errors'
import { now } from '@/lib/runtime'
import { wbgtIndoorC } from '@/lib/science/exposure'

/** Keeps a reading of carbon monoxide or heat, taken by hand. The same id again is a success that changes nothing. */
export async function recordExposure(actor: Actor, input: RecordExposure): Promise<ExposureReadingDto> {
  requirePermission(actor, 'conditions:write')
  const person = requirePerson(actor)
  return inTransaction(async (em) => {
    const known = await em.findOne(ExposureReadingEntity, { id: input.id })
    if (known !== null && (known.kind !== input.kind || known.uploadId !== null))
      throw new AppError('conflict', 'Another reading has this id. Make a new one.')
    if (known === null) {
      const at = readingInstant(input.at)
      const value = valueOf(input)
      const { id, kind, subject, wetBulbC, globeC } = input
      em.create(ExposureReadingEntity, {
        id,
        kind,
        subject,
        at,
        value,
        peak: value,
        wetBulbC,
        globeC,
        accountId: person.accountId,
        recordedAt: now(),
      })
      await em.flush()
      await writeAuditEntry(
        em,
        actor,
        'exposure.recorded',
        { type: 'exposure reading', id },
        { kind, subject, at: at.toISOString(), value },
      )
    }
    const [row] = await queryRows<ExposureRow>(em, `${exposureSelect} where e.id = ?`, [input.id])
    if (row === undefined) throw new Error('The reading vanished')
    return toExposureReading(row)
  }).catch((error: unknown) => {
    if (violatedConstraint(error) === 'exposure_readings_once')
      throw invalidField('at', `There is a reading of ${input.subject} at this very time already.`)
    throw error
  })
}

/** ppm, or °C WBGT: as the meter gave it, or made of its two temperatures as indoors (ISO 7243). */
function valueOf({ kind, ppm, wbgtC, wetBulbC, globeC }: RecordExposure): number {
  if (kind === 'carbon monoxide' && ppm !== null) return ppm
  if (kind === 'heat' && wbgtC !== null) return wbgtC
  if (kind === 'heat' && wetBulbC !== null && globeC !== null) return wbgtIndoorC(wetBulbC, globeC)
  throw invalidField('ppm', 'This reading has no value.')
}
