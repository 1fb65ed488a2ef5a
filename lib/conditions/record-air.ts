import { ConditionReadingEntity } from '@/entities/condition-reading'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { readingInstant } from '@/lib/conditions/reading-instant'
import type { AirReadingDto, RecordAir } from '@/lib/conditions/schema'
import type { AirRow } from '@/lib/conditions/to-air-reading'
import { airSelect, toAirReading } from '@/lib/conditions/to-air-reading'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { now } from '@/lib/runtime'

/** Keeps temperature and humidity of the room or the yard. The same id again is a success that changes nothing. */
export async function recordAir(actor: Actor, input: RecordAir): Promise<AirReadingDto> {
  requirePermission(actor, 'conditions:write')
  const person = requirePerson(actor)
  return inTransaction(async (em) => {
    const known = await em.findOne(ConditionReadingEntity, { id: input.id })
    if (known !== null && known.place !== input.place)
      throw new AppError('conflict', 'Another reading has this id. Make a new one.')
    if (known === null) {
      const at = readingInstant(input.at)
      const { id, place, tempC, humidityPercent } = input
      em.create(ConditionReadingEntity, {
        id,
        place,
        tempC,
        humidityPercent,
        at,
        accountId: person.accountId,
        recordedAt: now(),
      })
      await em.flush()
      await writeAuditEntry(
        em,
        actor,
        'conditions.recorded',
        { type: 'condition reading', id },
        { place, at: at.toISOString(), tempC, humidityPercent },
      )
    }
    const [row] = await queryRows<AirRow>(em, `${airSelect} where c.id = ?`, [input.id])
    if (row === undefined) throw new Error('The reading vanished')
    return toAirReading(row)
  })
}
