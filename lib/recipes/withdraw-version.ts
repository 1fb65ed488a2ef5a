import type { EntityManager } from '@mikro-orm/postgresql'
import type * as z from 'zod'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { signAs } from '@/lib/auth/sign'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { readVersion } from '@/lib/recipes/read-version'
import type { WithdrawnVersionDto, withdrawVersionSchema } from '@/lib/recipes/schema'
import { lockVersion } from '@/lib/recipes/version-access'
import { moveVersion } from '@/lib/recipes/version-states'
import { now } from '@/lib/runtime'

type WithdrawVersionInput = z.output<typeof withdrawVersionSchema> & { id: string }

/**
 * Withdraws an approved or superseded version by signature: it may not be fired any more. What waits to be fired
 * with it is named in the answer; firings under way go on with their copy.
 */
export async function withdrawVersion(
  actor: Actor,
  input: WithdrawVersionInput,
): Promise<WithdrawnVersionDto> {
  requirePermission(actor, 'recipes:approve')
  const person = requirePerson(actor)
  return inTransaction(async (em) => {
    const version = await lockVersion(em, input.id)
    const state = moveVersion('withdraw', version)
    const { contentSha256 } = await readVersion(em, version.id)
    await signAs(em, person, {
      password: input.password,
      meaning: input.meaning,
      reason: input.reason,
      subject: { type: 'recipe version', id: version.id, sha256: contentSha256 },
    })
    em.assign(version, {
      state,
      withdrawnAt: now(),
      withdrawnBy: person.accountId,
      withdrawReason: input.reason,
      updatedAt: now(),
    })
    const touched = await findTouched(em, version.id)
    await writeAuditEntry(
      em,
      person,
      'recipe version withdrawn',
      { type: 'recipe version', id: version.id },
      {
        number: version.number,
        reason: input.reason,
        batches: touched.batches.map((batch) => batch.number),
        queuedFirings: touched.queuedFirings.length,
      },
    )
    return { ...(await readVersion(em, version.id)), touched }
  })
}

/** Batches that are pinned to the version and have pieces waiting, and the queued firings themselves. */
export async function findTouched(
  em: EntityManager,
  versionId: string,
): Promise<WithdrawnVersionDto['touched']> {
  const rows = await queryRows<{ id: string; serial: string; batch_id: string; batch_number: number }>(
    em,
    `select f.id, p.serial, b.id as batch_id, b.number as batch_number
       from firings f join pieces p on p.id = f.piece_id join batches b on b.id = p.batch_id
      where f.recipe_version_id = ? and f.state = 'queued' order by b.number, p.position`,
    [versionId],
  )
  const batches = new Map<string, { id: string; number: number; unfiredCount: number }>()
  for (const row of rows) {
    const batch = batches.get(row.batch_id) ?? { id: row.batch_id, number: row.batch_number, unfiredCount: 0 }
    batches.set(row.batch_id, { ...batch, unfiredCount: batch.unfiredCount + 1 })
  }
  return {
    batches: [...batches.values()],
    queuedFirings: rows.map((row) => ({ id: row.id, serial: row.serial })),
  }
}
