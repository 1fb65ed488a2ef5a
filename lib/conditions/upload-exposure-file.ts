import { createHash, randomUUID } from 'node:crypto'
import type { EntityManager } from '@mikro-orm/postgresql'
import type * as z from 'zod'
import { ExposureUploadEntity } from '@/entities/exposure-upload'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { readExposureFile, refuseFaulty } from '@/lib/conditions/read-exposure-file'
import { readUploads } from '@/lib/conditions/read-uploads'
import type { ExposureUploadDto, uploadExposureFileSchema } from '@/lib/conditions/schema'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { AppError, invalidField } from '@/lib/errors'
import { now, nowMs } from '@/lib/runtime'
import { foldToMinutes } from '@/lib/science/exposure-record'
import { currentSite } from '@/lib/site/current-site'

type Input = z.infer<typeof uploadExposureFileSchema>

/**
 * Keeps the readings of a meter's file, one a minute where it writes more often, with the peak of that minute. What is
 * kept already is left out; the same id again adds nothing.
 * @throws AppError 'invalid' naming the first line that cannot be read, unless such lines are to be left out
 */
export async function uploadExposureFile(actor: Actor, input: Input): Promise<ExposureUploadDto> {
  requirePermission(actor, 'conditions:write')
  const person = requirePerson(actor)
  return inTransaction(async (em) => {
    if ((await em.findOne(ExposureUploadEntity, { id: input.id })) !== null) return uploaded(em, input.id)
    const site = await currentSite(em)
    const timeZone = input.zone === 'UTC' ? 'UTC' : site.timeZone
    const file = readExposureFile(input.text, { ...input, timeZone, nowMs: nowMs() })
    if (!input.skipsFaulty) refuseFaulty(file.faults)
    if (file.readings.length === 0) throw invalidField('text', 'No line of this file can be read.')
    const { kind, subject, fileName } = input
    const sha256 = createHash('sha256').update(input.text).digest('hex')
    const counts = { lineCount: file.lineCount, skippedCount: file.faults.length }
    em.create(ExposureUploadEntity, {
      id: input.id,
      kind,
      subject,
      fileName,
      sha256,
      ...counts,
      accountId: person.accountId,
      recordedAt: now(),
    })
    await em.flush()
    const keptCount = await insertReadings(em, input, file.readings, person.accountId)
    if (keptCount === 0)
      throw new AppError('conflict', 'Every reading of this file is kept already. Nothing was added.')
    await writeAuditEntry(
      em,
      actor,
      'exposure file.kept',
      { type: 'exposure file', id: input.id },
      { kind, subject, fileName, sha256, ...counts, keptCount },
    )
    return uploaded(em, input.id)
  })
}

/** Answers how many were not there yet. */
async function insertReadings(
  em: EntityManager,
  { id, kind, subject }: Input,
  readings: ReturnType<typeof readExposureFile>['readings'],
  accountId: string,
): Promise<number> {
  const partsAt = new Map(readings.map((reading) => [reading.atMs, reading]))
  const rows = foldToMinutes(readings).map(({ atMs, value, peak }) => {
    // Wet bulb and globe belong to a single reading; a folded minute has only their mean.
    const single = partsAt.get(atMs)
    const isSingle = single !== undefined && single.value === value && single.value === peak
    return {
      id: randomUUID(),
      at: new Date(atMs).toISOString(),
      value,
      peak: Math.max(peak, value),
      wet_bulb_c: isSingle ? single.wetBulbC : null,
      globe_c: isSingle ? single.globeC : null,
    }
  })
  const inserted = await queryRows<{ id: string }>(
    em,
    `insert into exposure_readings
       (id, kind, subject, at, value, peak, wet_bulb_c, globe_c, upload_id, account_id, recorded_at)
     select r.id, ?, ?, r.at, r.value, r.peak, r.wet_bulb_c, r.globe_c, ?, ?, ?
       from jsonb_to_recordset(?::jsonb) as r(id uuid, at timestamptz, value double precision,
         peak double precision, wet_bulb_c double precision, globe_c double precision)
     on conflict (kind, lower(subject), at) where removed_at is null do nothing
     returning id`,
    [kind, subject, id, accountId, now(), JSON.stringify(rows)],
  )
  return inserted.length
}

async function uploaded(em: EntityManager, id: string): Promise<ExposureUploadDto> {
  const [upload] = await readUploads(em, { id })
  if (upload === undefined) throw new AppError('not found', 'This file was taken back.')
  return upload
}
