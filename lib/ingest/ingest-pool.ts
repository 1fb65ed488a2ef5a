import { Pool } from 'pg'
import { env } from '@/lib/env'
import { log } from '@/lib/log'
import type { ClockWatch } from '@/lib/ingest/clock-offset'
import type { SeqRanges } from '@/lib/ingest/seq-ranges'
import type { KnownProbe } from '@/lib/ingest/sort-readings'
import { shared } from '@/lib/runtime'

/** What this process last knew of a boot; the statement that writes checks that it still holds. */
export type Boot = { no: number; received: SeqRanges; receivedText: string; clockOffsetMs: number }

export type ProbesOfGateway = { readAtMs: number; probes: Map<string, KnownProbe> }

/**
 * Connections for the path of readings, apart from the ORM's: a burst of readings never waits for pages, nor they
 * for it, and the driver's named statements are parsed once a connection. Several gateways commit side by side.
 */
type Held = {
  pool: Pool | null
  knownDays: Set<number>
  boots: Map<string, Boot>
  clocks: Map<string, ClockWatch>
  probes: Map<string, ProbesOfGateway>
}

function held(): Held {
  return shared<Held>('ingest.pool', () => ({
    pool: null,
    knownDays: new Set(),
    boots: new Map(),
    clocks: new Map(),
    probes: new Map(),
  }))
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

/** Boots by gateway and boot id. */
export function rememberedBoots(): Map<string, Boot> {
  return held().boots
}

/** What was seen of boots' clocks, by gateway and boot id. */
export function rememberedClocks(): Map<string, ClockWatch> {
  return held().clocks
}

/** Probes by gateway. */
export function rememberedProbes(): Map<string, ProbesOfGateway> {
  return held().probes
}

export async function closeIngestPool(): Promise<void> {
  const holder = held()
  const pool = holder.pool
  holder.pool = null
  for (const known of [holder.knownDays, holder.boots, holder.clocks, holder.probes]) known.clear()
  await pool?.end()
}
