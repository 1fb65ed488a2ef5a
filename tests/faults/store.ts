import { setTimeout as sleep } from 'node:timers/promises'
import { Pool } from 'pg'
import type { StoredReading } from '@/tests/faults/ledger'

/** The suite's own look at the database, through kills of PostgreSQL. */
export type Store = {
  query: <Row extends object>(sql: string, values?: readonly unknown[]) => Promise<Row[]>
  /** Readings of one boot with numbers from `fromSeq` to `toSeq`, as the table has them. */
  readingsOf: (bootId: string, fromSeq: number, toSeq: number) => Promise<StoredReading[]>
  close: () => Promise<void>
}

type ReadingRow = {
  seq: string
  probe_id: string
  at_ms: string
  emf_tenth_uv: number | null
  cold_centi_c: number | null
}

export function openStore(databaseUrl: string): Store {
  const pool = new Pool({ connectionString: databaseUrl, max: 2, connectionTimeoutMillis: 5_000 })
  // A connection that is killed while idle is replaced by the next query.
  pool.on('error', () => {})
  const query = async <Row extends object>(sql: string, values: readonly unknown[] = []): Promise<Row[]> =>
    retried(async () => (await pool.query<Row>(sql, [...values])).rows)
  return {
    query,
    readingsOf: async (bootId, fromSeq, toSeq) => {
      const rows = await query<ReadingRow>(
        `select r.seq, p.id as probe_id, r.at_ms, r.emf_tenth_uv, r.cold_centi_c
           from readings r join gateway_boots b on b.no = r.boot_no join probes p on p.no = r.probe_no
          where b.boot_id = $1 and r.seq between $2 and $3`,
        [bootId, fromSeq, toSeq],
      )
      return rows.map((row) => ({
        seq: Number(row.seq),
        probeId: row.probe_id,
        atMs: Number(row.at_ms),
        emfTenthUv: row.emf_tenth_uv,
        coldCentiC: row.cold_centi_c,
      }))
    },
    close: () => pool.end(),
  }
}

/** Tries again for half a minute: PostgreSQL may be on its way back. */
export async function retried<T>(work: () => Promise<T>): Promise<T> {
  for (const untilMs = Date.now() + 30_000; ;) {
    try {
      return await work()
    } catch (error) {
      if (Date.now() > untilMs) throw error
      await sleep(200)
    }
  }
}
