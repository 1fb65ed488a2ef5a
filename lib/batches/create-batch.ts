import { randomUUID } from 'node:crypto'
import type { EntityManager } from '@mikro-orm/postgresql'
import type * as z from 'zod'
import { BatchEntity } from '@/entities/batch'
import { CustomerEntity } from '@/entities/customer'
import { FiringEntity } from '@/entities/firing'
import { PieceEntity } from '@/entities/piece'
import { RecipeVersionEntity } from '@/entities/recipe-version'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { getBatch } from '@/lib/batches/get-batch'
import { pieceSerial } from '@/lib/batches/piece-serial'
import type { BatchDto, createBatchSchema } from '@/lib/batches/schema'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { invalidField } from '@/lib/errors'
import { now } from '@/lib/runtime'
import { currentSite } from '@/lib/site/current-site'

/** Makes a batch and its pieces, each with a serial and a queued firing at the end of the queue of roses. */
export async function createBatch(actor: Actor, input: z.infer<typeof createBatchSchema>): Promise<BatchDto> {
  requirePermission(actor, 'batches:write')
  const person = requirePerson(actor)
  const id = await inTransaction(async (em) => {
    const version = await em.findOne(RecipeVersionEntity, { id: input.recipeVersionId })
    if (version === null || version.state !== 'approved') {
      throw invalidField('recipeVersionId', 'Choose an approved version: only those go into a batch.')
    }
    if ((await em.findOne(CustomerEntity, { id: input.customerId })) === null) {
      throw invalidField('customerId', 'Choose a customer from the list.')
    }
    const batch = em.create(BatchEntity, {
      customerId: input.customerId,
      recipeVersionId: version.id,
      pieceKind: version.pieceKind,
      sizeAndShape: version.sizeAndShape,
      pieceCount: input.pieceCount,
      woodLot: input.woodLot,
      dueWeek: input.dueWeek,
      notes: input.notes,
      createdAt: now(),
      createdBy: person.accountId,
    })
    await em.persistAndFlush(batch)
    await addPieces(em, {
      id: batch.id,
      versionId: version.id,
      kind: version.pieceKind,
      count: input.pieceCount,
    })
    await writeAuditEntry(
      em,
      actor,
      'batch.created',
      { type: 'batch', id: batch.id },
      { pieces: input.pieceCount },
    )
    return batch.id
  })
  return getBatch(actor, { id })
}

type NewPieces = { id: string; versionId: string; kind: 'barrel' | 'head'; count: number }

async function addPieces(em: EntityManager, batch: NewPieces): Promise<void> {
  const site = await currentSite(em)
  const [last] = await queryRows<{ last: number | null }>(
    em,
    'select max(queue_position) as last from pieces',
  )
  const numbers = await queryRows<{ no: string }>(
    em,
    `select nextval('piece_serial_seq') as no from generate_series(1, ?)`,
    [batch.count],
  )
  const pieces = numbers.map((row, index) =>
    em.create(PieceEntity, {
      id: randomUUID(),
      kind: batch.kind,
      serial: pieceSerial(site.serialPrefix, Number(row.no)),
      batchId: batch.id,
      position: index + 1,
      queuePosition: (last?.last ?? 0) + index + 1,
      createdAt: now(),
    }),
  )
  // Foreign keys are plain columns here, so the ORM does not know that a firing needs its piece first.
  await em.flush()
  for (const piece of pieces) {
    em.create(FiringEntity, {
      pieceId: piece.id,
      recipeVersionId: batch.versionId,
      state: 'queued',
      queuedAt: now(),
    })
  }
  await em.flush()
}
