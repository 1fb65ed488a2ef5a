import type { EntityManager } from '@mikro-orm/postgresql'
import type { Loss } from '@/entities/loss'
import { LossEntity } from '@/entities/loss'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { requireLossPiece } from '@/lib/barrels/may-change-losses'
import type { LossPiece } from '@/lib/barrels/may-change-losses'
import { readLosses } from '@/lib/barrels/read-losses'
import type { AddLoss, LossDto } from '@/lib/barrels/schema'
import { violatedConstraint } from '@/lib/db/database-errors'
import { inTransaction } from '@/lib/db/orm'
import { AppError, invalidField } from '@/lib/errors'
import { markInstant } from '@/lib/firings/mark-instant'
import { notifyFiringChanged } from '@/lib/live/notify'
import { now } from '@/lib/runtime'

type Input = AddLoss & { pieceId: string }

/**
 * Notes a loss of a piece, with stave position and lot; one with `replacesId` stands in place of another, and both are
 * kept. The same id again is a success that changes nothing.
 * @throws AppError 'conflict' for a loss that was put right or taken back already, 'invalid' naming the field
 */
export async function addLoss(actor: Actor, input: Input): Promise<LossDto> {
  requirePermission(actor, 'firings:run trial')
  const person = requirePerson(actor)
  const loss = await inTransaction(async (em) => {
    const piece = await requireLossPiece(actor, em, input.pieceId, input.firingId)
    const known = await em.findOne(LossEntity, { id: input.id })
    if (known === null) await insertLoss(em, actor, input, piece, person.accountId)
    else requireSameLoss(known, input)
    return (await readLosses(em, piece.id)).find((one) => one.id === input.id)
  }).catch(explainLoss)
  if (loss === undefined) throw new Error('The loss vanished')
  if (loss.firingId !== null) notifyFiringChanged(loss.firingId, 'details')
  return loss
}

async function insertLoss(
  em: EntityManager,
  actor: Actor,
  input: Input,
  piece: LossPiece,
  accountId: string,
): Promise<void> {
  const { id: _id, pieceId: _pieceId, replacesId, ...facts } = input
  const kept = { ...facts, woodLot: input.woodLot ?? piece.woodLot }
  const at = markInstant(input.at, { notBefore: null })
  em.create(LossEntity, {
    ...kept,
    id: input.id,
    pieceId: piece.id,
    replacesId: replacesId ?? null,
    at,
    recordedAt: now(),
    accountId,
  })
  await em.flush()
  const action = replacesId === undefined ? 'loss.noted' : 'loss.put right'
  await writeAuditEntry(
    em,
    actor,
    action,
    { type: 'piece', id: piece.id },
    { lossId: input.id, ...kept, at: at.toISOString(), ...(replacesId === undefined ? {} : { replacesId }) },
  )
}

function requireSameLoss(known: Loss, input: Input): void {
  if (known.pieceId === input.pieceId && known.kind === input.kind) return
  throw new AppError('conflict', 'Another loss has this id. Make a new one.')
}

/** The database holds what a loss needs; its refusals in words. */
export function explainLoss(error: unknown): never {
  const constraint = violatedConstraint(error)
  if (constraint === 'losses_pull_after_bend')
    throw invalidField('kind', 'The bend of this firing has not begun: nothing broke at its pull.')
  if (constraint === 'losses_replaced_once')
    throw new AppError('conflict', 'This loss was put right or taken back already. Look at it again.')
  if (constraint === 'losses_replaced_of_one_piece' || constraint === 'losses_replaces_id_fkey')
    throw invalidField('replacesId', 'There is no such loss of this piece.')
  throw error
}
