import { randomUUID } from 'node:crypto'
import type { EntityManager } from '@mikro-orm/postgresql'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import type { ProbeAssignment } from '@/lib/ingest/firing-probes'
import { readFiringProbes } from '@/lib/ingest/firing-probes'
import { readHot } from '@/lib/ingest/read-hot'
import type { Sealed } from '@/lib/ingest/read-sealed'
import { readSealed, sealSha256 } from '@/lib/ingest/read-sealed'
import type { ReadingColumns } from '@/lib/ingest/reading-columns'
import { emptyColumns, uniteColumns } from '@/lib/ingest/reading-columns'
import { encodeReadings, sealEncoding } from '@/lib/ingest/seal-codec'
import { now } from '@/lib/runtime'

export type SealResult = { revision: number; isNew: boolean; readingCount: number }

type FiringRow = { id: string; state: string; preheat_at: Date | null; ended_at: Date | null }
type ProbeSeal = { probeId: string; fromMs: number; toMs: number; columns: ReadingColumns }

/**
 * Seals an ended firing: each of its probes' readings as one compact array with its checksum. Sealing again gives a
 * new revision when readings have come since, else the one that is there. What an earlier seal holds is never lost,
 * though its partition may be gone.
 *
 * @throws AppError 'not found', or 'conflict' while the firing goes on
 */
export async function sealFiring(firingId: string): Promise<SealResult> {
  return inTransaction(async (em) => {
    const firing = await lockEnded(em, firingId)
    const before = await readSealed(em, firingId)
    const seals = await collect(em, firing, before)
    const readingCount = seals.reduce((sum, seal) => sum + seal.columns.atMs.length, 0)
    if (before !== null && !hasNews(before, seals)) {
      return { revision: before.revision, isNew: false, readingCount }
    }
    const revision = (before?.revision ?? 0) + 1
    for (const seal of seals) await insertSeal(em, firingId, revision, seal)
    return { revision, isNew: true, readingCount }
  })
}

async function lockEnded(em: EntityManager, firingId: string): Promise<FiringRow> {
  const [firing] = await queryRows<FiringRow>(
    em,
    'select id, state, preheat_at, ended_at from firings where id = ? for update',
    [firingId],
  )
  if (firing === undefined) throw new AppError('not found', 'There is no such firing.')
  if (firing.ended_at === null || firing.preheat_at === null) {
    throw new AppError('conflict', 'Only a firing that was started and has ended is sealed.')
  }
  return firing
}

/** One array a probe, over all its periods in the firing. */
async function collect(em: EntityManager, firing: FiringRow, before: Sealed | null): Promise<ProbeSeal[]> {
  const byProbe = new Map<string, ProbeAssignment[]>()
  for (const one of await readFiringProbes(em, firing.id)) {
    byProbe.set(one.probeId, [...(byProbe.get(one.probeId) ?? []), one])
  }
  const endedMs = new Date(firing.ended_at ?? 0).getTime()
  const seals: ProbeSeal[] = []
  for (const [probeId, assignments] of byProbe) {
    const periods = assignments.map(({ fromMs, untilMs }) => ({
      fromMs,
      untilMs: Math.min(untilMs, endedMs + 1),
    }))
    const hot = await readHot(em, assignments[0]?.probeNo ?? 0, periods)
    seals.push({
      probeId,
      fromMs: Math.min(...periods.map((period) => period.fromMs)),
      toMs: Math.max(...periods.map((period) => Math.max(period.fromMs, period.untilMs))),
      columns: uniteColumns(before?.probes.get(probeId) ?? emptyColumns(), hot),
    })
  }
  return seals
}

function hasNews(before: Sealed, seals: readonly ProbeSeal[]): boolean {
  return seals.some(
    (seal) => seal.columns.atMs.length !== (before.probes.get(seal.probeId)?.atMs.length ?? -1),
  )
}

async function insertSeal(
  em: EntityManager,
  firingId: string,
  revision: number,
  seal: ProbeSeal,
): Promise<void> {
  const data = encodeReadings(seal.columns)
  await queryRows(
    em,
    `insert into seals
       (id, firing_id, revision, probe_id, from_ms, to_ms, reading_count, encoding, data, sha256, sealed_at)
     values (?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?)`,
    [
      randomUUID(),
      firingId,
      revision,
      seal.probeId,
      seal.fromMs,
      seal.toMs,
      seal.columns.atMs.length,
      sealEncoding,
      data,
      sealSha256(data),
      now(),
    ],
  )
}
