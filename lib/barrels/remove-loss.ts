import type * as z from 'zod'
import { LossEntity } from '@/entities/loss'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { explainLoss } from '@/lib/barrels/add-loss'
import { requireLossPiece } from '@/lib/barrels/may-change-losses'
import { readLosses } from '@/lib/barrels/read-losses'
import type { LossDto, removeLossSchema } from '@/lib/barrels/schema'
import { inTransaction } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { notifyFiringChanged } from '@/lib/live/notify'
import { now } from '@/lib/runtime'

type Input = z.infer<typeof removeLossSchema> & { lossId: string }

/** Takes a loss back with a reason: a row beside it, which stays. The same id again changes nothing. */
export async function removeLoss(actor: Actor, input: Input): Promise<LossDto> {
  requirePermission(actor, 'firings:run trial')
  const person = requirePerson(actor)
  const loss = await inTransaction(async (em) => {
    const row = await em.findOne(LossEntity, { id: input.lossId })
    if (row === null || row.kind === 'taken back') throw new AppError('not found', 'There is no such loss.')
    await requireLossPiece(actor, em, row.pieceId, row.firingId ?? null)
    const known = await em.findOne(LossEntity, { id: input.id })
    if (known === null) {
      em.create(LossEntity, {
        id: input.id,
        pieceId: row.pieceId,
        firingId: row.firingId ?? null,
        kind: 'taken back',
        words: input.reason,
        at: now(),
        recordedAt: now(),
        accountId: person.accountId,
        replacesId: row.id,
      })
      await em.flush()
      await writeAuditEntry(
        em,
        actor,
        'loss.taken back',
        { type: 'piece', id: row.pieceId },
        { lossId: row.id, reason: input.reason },
      )
    } else if (known.replacesId !== row.id) {
      throw new AppError('conflict', 'Another loss has this id. Make a new one.')
    }
    return (await readLosses(em, row.pieceId)).find((one) => one.id === row.id)
  }).catch(explainLoss)
  if (loss === undefined) throw new Error('The loss vanished')
  if (loss.firingId !== null) notifyFiringChanged(loss.firingId, 'details')
  return loss
}
