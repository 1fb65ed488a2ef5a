import { createHash } from 'node:crypto'
import type { EntityManager } from '@mikro-orm/postgresql'
import { queryRows } from '@/lib/db/orm'
import type { ReadingColumns } from '@/lib/ingest/reading-columns'
import { decodeReadings, sealEncoding } from '@/lib/ingest/seal-codec'

/** The newest seal of a firing: its revision and each probe's readings by probe id. */
export type Sealed = { revision: number; sealedAtMs: number; probes: Map<string, ReadingColumns> }

/** One probe's part of a seal, as its row says it. */
export type SealRow = {
  probe_id: string
  revision: number
  encoding: number
  reading_count: number
  data: Buffer
  sha256: string
  sealed_at: Date
}

/**
 * Reads a firing's newest seal, or the one of a revision, whole or some of its probes; null when there is none.
 *
 * @throws Error when the bytes do not fit their checksum, or were written by an encoding that is not known
 */
export async function readSealed(
  em: EntityManager,
  firingId: string,
  revision?: number,
  probeIds?: readonly string[],
): Promise<Sealed | null> {
  const rows = await queryRows<SealRow>(
    em,
    `select probe_id, revision, encoding, reading_count, data, sha256, sealed_at from seals
      where firing_id = ? and revision = coalesce(?::integer, (select max(revision) from seals where firing_id = ?))
        ${probeIds === undefined ? '' : 'and probe_id = any(?::uuid[])'}`,
    [firingId, revision ?? null, firingId, ...(probeIds === undefined ? [] : [`{${probeIds.join(',')}}`])],
  )
  const [first] = rows
  if (first === undefined) return null
  const probes = new Map(rows.map((row) => [row.probe_id, openSeal(firingId, row)]))
  return { revision: first.revision, sealedAtMs: new Date(first.sealed_at).getTime(), probes }
}

/** @throws Error when the bytes do not fit their checksum or their count, or the encoding is not known */
export function openSeal(firingId: string, row: SealRow): ReadingColumns {
  const where = `seal ${row.revision} of firing ${firingId}, probe ${row.probe_id}`
  if (row.encoding !== sealEncoding) throw new Error(`${where}: encoding ${row.encoding} is not known here`)
  if (sealSha256(row.data) !== row.sha256) throw new Error(`${where}: its bytes do not fit its checksum`)
  const columns = decodeReadings(row.data)
  if (columns.atMs.length !== row.reading_count)
    throw new Error(`${where}: it holds another count than it says`)
  return columns
}

export function sealSha256(data: Uint8Array): string {
  return createHash('sha256').update(data).digest('hex')
}
