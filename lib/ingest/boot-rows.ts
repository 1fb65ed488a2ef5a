import type { PoolClient } from 'pg'
import type { Loss } from '@/lib/gateway/protocol'
import { int2Array, int4Array, int8Array } from '@/lib/ingest/pg-arrays'
import type { RawReading } from '@/lib/ingest/read-envelope'
import { refusedJson } from '@/lib/ingest/refused-json'
import type { SeqRanges } from '@/lib/ingest/seq-ranges'
import { parseSeqRanges, printSeqRanges } from '@/lib/ingest/seq-ranges'
import type { KnownProbe, RefusedReading, SortedReadings } from '@/lib/ingest/sort-readings'

/** The statements of one ingest transaction; named, so that a connection parses each once. */

export type Boot = {
  no: number
  received: SeqRanges
  ackedSeq: number
  clockOffsetMs: number
  isNew: boolean
}

type BootRow = { no: number; received: string; acked_seq: string; clock_offset_ms: number }

/** The row of this boot, made when there is none, locked until the transaction ends. */
export async function lockBoot(
  client: PoolClient,
  gatewayId: string,
  bootId: string,
  at: Date,
): Promise<Boot> {
  const known = await selectBoot(client, gatewayId, bootId)
  if (known !== undefined) return toBoot(known, false)
  const made = await client.query(
    `insert into gateway_boots (gateway_id, boot_id, first_seen_at, last_seen_at) values ($1, $2, $3, $3)
     on conflict (gateway_id, boot_id) do nothing`,
    [gatewayId, bootId, at],
  )
  const row = await selectBoot(client, gatewayId, bootId)
  if (row === undefined) throw new Error('the row of a boot was not there after it was made')
  return toBoot(row, made.rowCount === 1)
}

async function selectBoot(
  client: PoolClient,
  gatewayId: string,
  bootId: string,
): Promise<BootRow | undefined> {
  const { rows } = await client.query<BootRow>({
    name: 'lock-boot',
    text: `select no, received::text as received, acked_seq, clock_offset_ms
             from gateway_boots where gateway_id = $1 and boot_id = $2 for update`,
    values: [gatewayId, bootId],
  })
  return rows[0]
}

function toBoot(row: BootRow, isNew: boolean): Boot {
  return {
    no: row.no,
    received: parseSeqRanges(row.received),
    ackedSeq: Number(row.acked_seq),
    clockOffsetMs: row.clock_offset_ms,
    isNew,
  }
}

type ProbeRow = { id: string; no: number; is_own: boolean; is_retired: boolean }

/** The gateway's own probes by id; others only when a reading names one. */
export async function probesOf(
  client: PoolClient,
  gatewayId: string,
  readings: readonly RawReading[],
): Promise<Map<string, KnownProbe>> {
  const own = await client.query<ProbeRow>({
    name: 'probes-of-gateway',
    text: `select id, no, true as is_own, retired_at is not null as is_retired from probes where gateway_id = $1`,
    values: [gatewayId],
  })
  const probes = new Map(own.rows.map((row) => [row.id, toKnownProbe(row)]))
  const strangers = new Set<string>()
  for (const { probeId } of readings) {
    if (typeof probeId === 'string' && !probes.has(probeId)) strangers.add(probeId)
  }
  if (strangers.size > 0) {
    const others = await client.query<ProbeRow>(
      `select id, no, false as is_own, retired_at is not null as is_retired
         from probes where id::text = any($1::text[]) and gateway_id <> $2`,
      [[...strangers].filter((id) => !id.includes('\0')).map((id) => id.toLowerCase()), gatewayId],
    )
    for (const row of others.rows) probes.set(row.id, toKnownProbe(row))
  }
  return probes
}

function toKnownProbe(row: ProbeRow): KnownProbe {
  return { no: row.no, isOwn: row.is_own, isRetired: row.is_retired }
}

/** One statement for all rows; a column that is null throughout is one null, which unnest fills up. */
export async function insertReadings(client: PoolClient, bootNo: number, sorted: SortedReadings): Promise<void> {
  const { rows } = sorted
  await client.query({
    name: 'insert-readings',
    text: `insert into readings
             (boot_no, seq, at_ms, probe_no, emf_tenth_uv, cold_centi_c, temp_centi_c, flag)
           select $1, seq, at_ms, probe_no, emf, cold, temp, coalesce(flag, 0)
             from unnest($2::int8[], $3::int8[], $4::int4[], $5::int4[], $6::int4[], $7::int4[], $8::int2[])
               as r (seq, at_ms, probe_no, emf, cold, temp, flag)`,
    values: [
      bootNo,
      int8Array(sorted.seqs),
      int8Array(rows.atMs),
      int4Array(rows.probeNo),
      sorted.hasEmfs ? int4Array(rows.emfTenthUv) : null,
      sorted.hasEmfs ? int4Array(rows.coldCentiC) : null,
      sorted.hasTemps ? int4Array(rows.tempCentiC) : null,
      sorted.hasFlags ? int2Array(rows.flag) : null,
    ],
  })
}

/** Keeps refused readings with their reasons; a number that was refused before keeps its first reason. */
export async function insertRefused(
  client: PoolClient,
  bootNo: number,
  refused: readonly RefusedReading[],
  at: Date,
): Promise<void> {
  await client.query(
    `insert into refused_readings (boot_no, seq, reason, reading, received_at)
     select $1, seq, reason, reading::jsonb, $5
       from unnest($2::int8[], $3::text[], $4::text[]) as r (seq, reason, reading)
     on conflict do nothing`,
    [
      bootNo,
      refused.map(({ seq }) => seq),
      refused.map(({ reason }) => reason),
      refused.map(({ reading }) => refusedJson(reading)),
      at,
    ],
  )
}

export async function insertLosses(
  client: PoolClient,
  bootNo: number,
  lost: readonly Loss[],
  at: Date,
): Promise<void> {
  await client.query(
    `insert into gateway_losses (boot_no, from_seq, to_seq, reason, declared_at)
     select $1, from_seq, to_seq, reason, $5
       from unnest($2::int8[], $3::int8[], $4::text[]) as l (from_seq, to_seq, reason)
     on conflict do nothing`,
    [
      bootNo,
      lost.map(({ from }) => from),
      lost.map(({ to }) => to),
      lost.map(({ reason }) => reason.replaceAll('\0', ' ')),
      at,
    ],
  )
}

/** Writes what the boot has now; the gateway's own row at most once a second. */
export async function updateBoot(client: PoolClient, gatewayId: string, boot: Boot, at: Date): Promise<void> {
  await client.query({
    name: 'update-boot',
    text: `with seen as (
             update gateways set last_seen_at = $5, clock_offset_ms = $4
              where id = $6 and (last_seen_at is null or last_seen_at < $5::timestamptz - interval '1 second'
                or clock_offset_ms is distinct from $4))
           update gateway_boots
              set received = $2::int8multirange, acked_seq = $3, clock_offset_ms = $4, last_seen_at = $5
            where no = $1`,
    values: [boot.no, printSeqRanges(boot.received), boot.ackedSeq, boot.clockOffsetMs, at, gatewayId],
  })
}
