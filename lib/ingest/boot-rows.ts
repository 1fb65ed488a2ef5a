import type { PoolClient } from 'pg'
import type { Loss } from '@/lib/gateway/protocol'
import { int2Array, int4Array, int8Array } from '@/lib/ingest/pg-arrays'
import type { RawReading } from '@/lib/ingest/read-envelope'
import { refusedJson } from '@/lib/ingest/refused-json'
import type { Boot } from '@/lib/ingest/ingest-pool'
import { rememberedProbes } from '@/lib/ingest/ingest-pool'
import type { SeqRanges } from '@/lib/ingest/seq-ranges'
import { parseSeqRanges, printSeqRanges } from '@/lib/ingest/seq-ranges'
import type { CommittedRows } from '@/lib/live/hub-door'
import type { KnownProbe, RefusedReading, SortedReadings } from '@/lib/ingest/sort-readings'

/** A boot's row, its gateway's probes and the statements that write; named, so that a connection parses each once. */

type Queryable = Pick<PoolClient, 'query'>
type BootRow = { no: number; received: string; clock_offset_ms: number }

/** The row of this boot, made when there is none; `lock` holds it until the transaction ends. */
export async function readBoot(
  client: Queryable,
  gatewayId: string,
  bootId: string,
  at: Date,
  lock: boolean,
): Promise<Boot> {
  const select = async () => {
    const { rows } = await client.query<BootRow>(
      `select no, received::text as received, clock_offset_ms
         from gateway_boots where gateway_id = $1 and boot_id = $2 ${lock ? 'for update' : ''}`,
      [gatewayId, bootId],
    )
    return rows[0]
  }
  const known = await select()
  if (known !== undefined) return toBoot(known)
  await client.query(
    `insert into gateway_boots (gateway_id, boot_id, first_seen_at, last_seen_at) values ($1, $2, $3, $3)
     on conflict (gateway_id, boot_id) do nothing`,
    [gatewayId, bootId, at],
  )
  const made = await select()
  if (made === undefined) throw new Error('the row of a boot was not there after it was made')
  return toBoot(made)
}

function toBoot(row: BootRow): Boot {
  return {
    no: row.no,
    received: parseSeqRanges(row.received),
    receivedText: row.received,
    clockOffsetMs: row.clock_offset_ms,
  }
}

type ProbeRow = { id: string; no: number; is_own: boolean; is_retired: boolean }

/** How long a gateway's probes are taken as read: a retired probe is refused this much later at most. */
const probesKnownMs = 2_000

/** The gateway's own probes by id, and those of others that a reading names. */
export async function probesOf(
  client: Queryable,
  gatewayId: string,
  readings: readonly RawReading[],
  atMs: number,
): Promise<ReadonlyMap<string, KnownProbe>> {
  const remembered = rememberedProbes()
  let known = remembered.get(gatewayId)
  if (known === undefined || Math.abs(atMs - known.readAtMs) > probesKnownMs) {
    known = { readAtMs: atMs, probes: await readProbes(client, 'gateway_id = $1', [gatewayId]) }
    remembered.set(gatewayId, known)
  }
  const { probes } = known
  const strangers = new Set<string>()
  for (const { probeId } of readings) {
    if (typeof probeId === 'string' && !probes.has(probeId)) strangers.add(probeId)
  }
  if (strangers.size === 0) return probes
  const ids = [...strangers].filter((id) => !id.includes('\0')).map((id) => id.toLowerCase())
  const named = await readProbes(client, 'id::text = any($2::text[])', [gatewayId, ids])
  return new Map([...probes, ...named])
}

async function readProbes(
  client: Queryable,
  where: string,
  values: [gatewayId: string, ids?: string[]],
): Promise<Map<string, KnownProbe>> {
  const { rows } = await client.query<ProbeRow>(
    `select id, no, gateway_id = $1 as is_own, retired_at is not null as is_retired from probes where ${where}`,
    values,
  )
  return new Map(rows.map((row) => [row.id, toKnownProbe(row)]))
}

function toKnownProbe(row: ProbeRow): KnownProbe {
  return { no: row.no, isOwn: row.is_own, isRetired: row.is_retired }
}

type CommittedRow = {
  probe_no: number
  at_ms: string
  emf_tenth_uv: number | null
  cold_centi_c: number | null
  temp_centi_c: number | null
  flag: number
}

/** Readings of a boot by their numbers, as they are stored; those that were refused, lost or sealed away are left out. */
export async function readRows(
  client: Queryable,
  bootNo: number,
  seqs: readonly number[],
): Promise<CommittedRows> {
  const { rows } = await client.query<CommittedRow>({
    name: 'read-rows',
    text: `select probe_no, at_ms, emf_tenth_uv, cold_centi_c, temp_centi_c, flag
             from readings where boot_no = $1 and seq = any($2::int8[]) order by seq`,
    values: [bootNo, int8Array(seqs)],
  })
  return {
    probeNo: rows.map((row) => row.probe_no),
    atMs: rows.map((row) => Number(row.at_ms)),
    emfTenthUv: rows.map((row) => row.emf_tenth_uv),
    coldCentiC: rows.map((row) => row.cold_centi_c),
    tempCentiC: rows.map((row) => row.temp_centi_c),
    flag: rows.map((row) => row.flag),
  }
}

/** Instant of the reading of a boot with the highest number, as it is stored; null when none is in the table. */
export async function newestAtMs(client: Queryable, bootNo: number): Promise<number | null> {
  const { rows } = await client.query<{ at_ms: string }>(
    'select at_ms from readings where boot_no = $1 order by seq desc limit 1',
    [bootNo],
  )
  return rows[0] === undefined ? null : Number(rows[0].at_ms)
}

export type BootChange = {
  boot: Boot
  gatewayId: string
  received: SeqRanges
  ackedSeq: number
  clockOffsetMs: number
  sorted: SortedReadings
  at: Date
}

/**
 * Writes the new readings and what the boot has received now, all in one statement, if the boot's row is still as it
 * was read; answers false, and writes nothing, when another sender was faster. A column that is null throughout is
 * one null, which unnest fills up. The gateway's own row is written at most once a second.
 */
export async function writeReadings(client: Queryable, change: BootChange): Promise<boolean> {
  const { boot, sorted, at } = change
  const { rows } = sorted
  const written = await client.query({
    name: 'write-readings',
    text: `with boot as (
             update gateway_boots
                set received = $2::int8multirange, acked_seq = $3, clock_offset_ms = $4, last_seen_at = $5
              where no = $1 and received = $7::int8multirange returning no),
           seen as (
             update gateways set last_seen_at = $5, clock_offset_ms = $4
              where id = $6 and exists (select from boot)
                and (last_seen_at is null or last_seen_at < $5::timestamptz - interval '1 second'
                  or clock_offset_ms is distinct from $4)),
           added as (
             insert into readings
               (boot_no, seq, at_ms, probe_no, emf_tenth_uv, cold_centi_c, temp_centi_c, flag)
             select boot.no, seq, at_ms, probe_no, emf, cold, temp, coalesce(flag, 0)
               from boot, unnest($8::int8[], $9::int8[], $10::int4[], $11::int4[], $12::int4[], $13::int4[], $14::int2[])
                 as r (seq, at_ms, probe_no, emf, cold, temp, flag))
           select no from boot`,
    values: [
      boot.no,
      printSeqRanges(change.received),
      change.ackedSeq,
      change.clockOffsetMs,
      at,
      change.gatewayId,
      boot.receivedText,
      int8Array(sorted.seqs),
      int8Array(rows.atMs),
      int4Array(rows.probeNo),
      sorted.hasEmfs ? int4Array(rows.emfTenthUv) : null,
      sorted.hasEmfs ? int4Array(rows.coldCentiC) : null,
      sorted.hasTemps ? int4Array(rows.tempCentiC) : null,
      sorted.hasFlags ? int2Array(rows.flag) : null,
    ],
  })
  return written.rows.length === 1
}

/** Keeps refused readings with their reasons; a number that was refused before keeps its first reason. */
export async function insertRefused(
  client: Queryable,
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
  client: Queryable,
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
