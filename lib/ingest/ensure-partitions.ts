import { ingestPool, knownPartitionDays } from '@/lib/ingest/ingest-pool'

export const dayMs = 86_400_000

/** Makes sure that the daily partition of each day is there; asks the database once a day and process. */
export async function ensurePartitions(days: Iterable<number>): Promise<void> {
  const known = knownPartitionDays()
  for (const day of days) {
    if (known.has(day)) continue
    await ingestPool().query('select ensure_readings_partition($1::date)', [isoDay(day)])
    known.add(day)
  }
}

/** Forgets what is known, after a partition was dropped or an insert found none. */
export function forgetPartitions(): void {
  knownPartitionDays().clear()
}

/** The partitions of the day of `atMs` and the one after it. */
export async function ensureNextPartitions(atMs: number): Promise<void> {
  const today = Math.floor(atMs / dayMs)
  await ensurePartitions([today, today + 1])
}

/** Whole days since 1970 UTC as PostgreSQL's date. */
export function isoDay(day: number): string {
  return new Date(day * dayMs).toISOString().slice(0, 10)
}
