import { ingestPool, knownPartitionDays } from '@/lib/ingest/ingest-pool'

export const dayMs = 86_400_000

type Queryable = { query: (text: string, values: unknown[]) => Promise<unknown> }

/**
 * Makes sure that the daily partition of each day is there, in the caller's transaction, and answers the days that
 * it had to ask for: tell `rememberPartitions` after the commit, so that each is asked once a process.
 */
export async function ensurePartitions(client: Queryable, days: Iterable<number>): Promise<number[]> {
  const known = knownPartitionDays()
  const asked = [...days].filter((day) => !known.has(day))
  for (const day of asked) await client.query('select ensure_readings_partition($1::date)', [isoDay(day)])
  return asked
}

export function rememberPartitions(days: readonly number[]): void {
  for (const day of days) knownPartitionDays().add(day)
}

/** Forgets what is known, after a partition was dropped or an insert found none. */
export function forgetPartitions(): void {
  knownPartitionDays().clear()
}

/** The partitions of the day of `atMs` and the one after it. */
export async function ensureNextPartitions(atMs: number): Promise<void> {
  const today = Math.floor(atMs / dayMs)
  rememberPartitions(await ensurePartitions(ingestPool(), [today, today + 1]))
}

/** Whole days since 1970 UTC as PostgreSQL's date. */
export function isoDay(day: number): string {
  return new Date(day * dayMs).toISOString().slice(0, 10)
}
