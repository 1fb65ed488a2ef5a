import { Pool } from 'pg'
import { env } from '@/lib/env'
import { log } from '@/lib/log'
import { shared } from '@/lib/runtime'

/**
 * Connections for the path of readings, apart from the ORM's: a burst of readings never waits for pages, nor they
 * for it, and the driver's named statements are parsed once a connection. Several gateways commit side by side.
 */
type Held = { pool: Pool | null; knownDays: Set<number> }

function held(): Held {
  return shared<Held>('ingest.pool', () => ({ pool: null, knownDays: new Set() }))
}

export function ingestPool(): Pool {
  const holder = held()
  if (holder.pool === null) {
    holder.pool = new Pool({
      connectionString: env().DATABASE_URL,
      max: 6,
      connectionTimeoutMillis: 5_000,
      idleTimeoutMillis: 60_000,
    })
    // An idle connection that PostgreSQL closes is replaced by the next query; it only has to be heard.
    holder.pool.on('error', (error) => log().warn({ err: error }, 'a connection for readings was closed'))
  }
  return holder.pool
}

/** Days (whole days since 1970 UTC) whose partition is known to be there. */
export function knownPartitionDays(): Set<number> {
  return held().knownDays
}

export async function closeIngestPool(): Promise<void> {
  const holder = held()
  const pool = holder.pool
  holder.pool = null
  holder.knownDays.clear()
  await pool?.end()
}
