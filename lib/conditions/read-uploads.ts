import type { EntityManager } from '@mikro-orm/postgresql'
import type { ExposureKind, ExposureUploadDto } from '@/lib/conditions/schema'
import { queryRows } from '@/lib/db/orm'
import { isoOrNull } from '@/lib/firings/to-firing'

type Row = {
  id: string
  kind: ExposureKind
  subject: string
  file_name: string
  reading_count: number
  skipped_count: number
  first_at: Date | null
  last_at: Date | null
  by_name: string
  recorded_at: Date
}

const select = `
  select u.id, u.kind, u.subject, u.file_name, u.skipped_count, u.recorded_at, a.name as by_name,
         count(e.id)::integer as reading_count, min(e.at) as first_at, max(e.at) as last_at
    from exposure_uploads u
    join accounts a on a.id = u.account_id
    left join exposure_readings e on e.upload_id = u.id
   where u.removed_at is null`
const group = 'group by u.id, a.name order by u.recorded_at'

/** Files that stand: one, or all with a reading in [from, until). */
export async function readUploads(
  em: EntityManager,
  which: { id: string } | { fromAt: Date; untilAt: Date },
): Promise<ExposureUploadDto[]> {
  const rows =
    'id' in which
      ? await queryRows<Row>(em, `${select} and u.id = ? ${group}`, [which.id])
      : await queryRows<Row>(
          em,
          `${select} and exists (select from exposure_readings x
             where x.upload_id = u.id and x.at >= ? and x.at < ?) ${group}`,
          [which.fromAt, which.untilAt],
        )
  return rows.map((row) => ({
    id: row.id,
    kind: row.kind,
    subject: row.subject,
    fileName: row.file_name,
    readingCount: row.reading_count,
    skippedCount: row.skipped_count,
    firstAt: isoOrNull(row.first_at),
    lastAt: isoOrNull(row.last_at),
    by: row.by_name,
    recordedAt: new Date(row.recorded_at).toISOString(),
  }))
}
