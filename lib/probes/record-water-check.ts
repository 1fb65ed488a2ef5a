import type * as z from 'zod'
import { WaterCheckEntity } from '@/entities/water-check'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { checkDates } from '@/lib/probes/check-dates'
import type { recordWaterCheckSchema } from '@/lib/probes/schema'
import { waterFault } from '@/lib/probes/water-fault'
import { currentSite } from '@/lib/site/current-site'

/** Records a check of the preheat, leak-test and humidifier water; one above the site's limits is kept, and not usable. */
export async function recordWaterCheck(
  actor: Actor,
  input: z.infer<typeof recordWaterCheckSchema>,
): Promise<{ id: string }> {
  requirePermission(actor, 'checks:write')
  const person = requirePerson(actor)
  return inTransaction(async (em) => {
    const { rules } = await currentSite(em)
    const check = em.create(WaterCheckEntity, {
      source: input.source,
      tcaNgPerL: input.tcaNgPerL,
      freeChlorineMgPerL: input.freeChlorineMgPerL,
      ...checkDates(input, rules.checks.waterMonths),
      accountId: person.accountId,
    })
    await em.persistAndFlush(check)
    await writeAuditEntry(
      em,
      actor,
      'water.checked',
      { type: 'water check', id: check.id },
      {
        source: input.source,
        tcaNgPerL: input.tcaNgPerL,
        freeChlorineMgPerL: input.freeChlorineMgPerL,
        overLimit: waterFault(input, rules.checks),
      },
    )
    return { id: check.id }
  })
}
