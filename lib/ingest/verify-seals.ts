import type { EntityManager } from '@mikro-orm/postgresql'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm, queryRows } from '@/lib/db/orm'
import type { SealRow } from '@/lib/ingest/read-sealed'
import { openSeal } from '@/lib/ingest/read-sealed'

/** A seal that does not hold. */
export type BadSeal = {
  firingId: string
  /** Of the barrel or head. */
  serial: string
  revision: number
  probeName: string
  reason: string
}

export type SealsDto = {
  /** Arrays that were looked at: one a firing, revision and probe. */
  seals: number
  firings: number
  readings: number
  bytes: number
  bad: BadSeal[]
}

type Row = SealRow & {
  id: string
  firing_id: string
  serial: string
  probe_name: string
  from_ms: string
  to_ms: string
}

const pageSize = 40

/**
 * Walks every seal of every firing, also those that a later one stands beside: computes its checksum again, decodes it,
 * and holds its count, its order and its span against what its row says; and says where a revision is missing.
 */
export async function verifySeals(actor: Actor): Promise<SealsDto> {
  requirePermission(actor, 'audit:read')
  const em = await forkEm()
  const dto: SealsDto = { seals: 0, firings: 0, readings: 0, bytes: 0, bad: [] }
  let last: Row | null = null
  for (;;) {
    const rows = await readPage(em, last)
    for (const row of rows) {
      take(dto, row, last)
      last = row
    }
    if (rows.length < pageSize) return dto
  }
}

/** In the order of firing, revision and probe. */
async function readPage(em: EntityManager, last: Row | null): Promise<Row[]> {
  return queryRows<Row>(
    em,
    `select s.id, s.firing_id, s.revision, s.probe_id, s.encoding, s.reading_count, s.data, s.sha256, s.sealed_at,
            s.from_ms, s.to_ms, pc.serial, p.name as probe_name
       from seals s join firings f on f.id = s.firing_id join pieces pc on pc.id = f.piece_id
       join probes p on p.id = s.probe_id
      ${last === null ? '' : 'where (s.firing_id, s.revision, s.probe_id) > (?::uuid, ?::integer, ?::uuid)'}
      order by s.firing_id, s.revision, s.probe_id limit ${pageSize}`,
    last === null ? [] : [last.firing_id, last.revision, last.probe_id],
  )
}

function take(dto: SealsDto, row: Row, before: Row | null): void {
  const isFirstOfFiring = before?.firing_id !== row.firing_id
  dto.seals += 1
  dto.bytes += row.data.length
  if (isFirstOfFiring) dto.firings += 1
  const revisionBefore = isFirstOfFiring ? 0 : (before?.revision ?? 0)
  const reasons = [
    ...(row.revision > revisionBefore + 1 ? [`revision ${revisionBefore + 1} is missing`] : []),
    ...faultsOf(row, (count) => (dto.readings += count)),
  ]
  for (const reason of reasons) {
    dto.bad.push({
      firingId: row.firing_id,
      serial: row.serial,
      revision: row.revision,
      probeName: row.probe_name,
      reason,
    })
  }
}

function faultsOf(row: Row, count: (readings: number) => void): string[] {
  try {
    const { atMs } = openSeal(row.firing_id, row)
    count(atMs.length)
    const [first, last] = [atMs[0] ?? Infinity, atMs.at(-1) ?? -Infinity]
    if (atMs.some((at, i) => at < (atMs[i - 1] ?? -Infinity)))
      return ['its readings are not in order of time']
    if (first < Number(row.from_ms) || last > Number(row.to_ms))
      return ['it holds readings of another time than it says']
    return []
  } catch (error) {
    const sentence = error instanceof Error ? error.message : String(error)
    return [sentence.replace(/^seal .*?: /, '')]
  }
}
