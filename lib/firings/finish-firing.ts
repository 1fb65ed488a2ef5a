import type { EntityManager } from '@mikro-orm/postgresql'
import type * as z from 'zod'
import type { Firing } from '@/entities/firing'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { closePeriods } from '@/lib/firings/end-firing'
import { canMove } from '@/lib/firings/firing-states'
import { lockFiring } from '@/lib/firings/lock-firing'
import { markInstant } from '@/lib/firings/mark-instant'
import { readFiring } from '@/lib/firings/read-firing'
import type { FiringDto, finishFiringSchema } from '@/lib/firings/schema'
import { notifyFiringChanged } from '@/lib/live/notify'

type Input = z.infer<typeof finishFiringSchema> & { id: string }

/** A second finish ends nothing again; what it says of the wood is kept where nothing was said yet. */
async function describeFinished(em: EntityManager, actor: Actor, row: Firing, input: Input): Promise<void> {
  const added = {
    ...(row.colour === null && input.colour !== null ? { colour: input.colour } : {}),
    ...(row.smell === null && input.smell !== null ? { smell: input.smell } : {}),
    ...(row.outsideTempC === null && input.outsideTempC !== null ? { outsideTempC: input.outsideTempC } : {}),
    ...(row.remarks === '' && input.remarks !== '' ? { remarks: input.remarks } : {}),
  }
  if (Object.keys(added).length === 0) return
  em.assign(row, { ...added, revision: row.revision + 1 })
  await em.flush()
  await writeAuditEntry(em, actor, 'firing.described', { type: 'firing', id: row.id }, added)
}

/** Finishes a firing that toasts or rests. Its readings are sealed and scored once its gateway has sent them all. */
export async function finishFiring(actor: Actor, input: Input): Promise<FiringDto> {
  requirePermission(actor, 'firings:run trial')
  const firing = await inTransaction(async (em) => {
    const row = await lockFiring(em, input.id)
    if (!row.isTrial) requirePermission(actor, 'firings:run')
    if (row.state === 'finished') {
      await describeFinished(em, actor, row, input)
      return readFiring(em, row.id)
    }
    if (!canMove(row.state, 'finished')) {
      throw new AppError(
        'conflict',
        `A firing that is ${row.state} cannot be finished. Abandon it with a reason instead.`,
      )
    }
    const at = markInstant(input.at, { notBefore: row.restAt ?? row.toastAt ?? row.preheatAt })
    em.assign(row, {
      state: 'finished',
      endedAt: at,
      colour: input.colour,
      smell: input.smell,
      outsideTempC: input.outsideTempC,
      remarks: input.remarks,
      revision: row.revision + 1,
    })
    await closePeriods(em, row, at)
    await writeAuditEntry(em, actor, 'firing.finished', { type: 'firing', id: row.id })
    return readFiring(em, row.id)
  })
  notifyFiringChanged(firing.id, 'finished')
  return firing
}
