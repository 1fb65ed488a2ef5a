import { randomUUID } from 'node:crypto'
import { pipeline } from 'node:stream/promises'
import { Readable } from 'node:stream'
import { performance } from 'node:perf_hooks'
import type { Pool, PoolClient } from 'pg'
import { from as copyFrom } from 'pg-copy-streams'
import type { IngestMessage } from '@/lib/gateway/protocol'
import { ensureNextPartitions } from '@/lib/ingest/ensure-partitions'
import { ingestPool } from '@/lib/ingest/ingest-pool'
import { storeReadings } from '@/lib/ingest/store-readings'
import type { GatewayIdentity } from '@/lib/ingest/verify-device-token'
import type { Figure } from '@/tests/bench/figure'
import { median, quantile } from '@/tests/bench/figure'

const probeCount = 12
const spacingMs = 200

type BenchProbe = { id: string; no: number }
type Columns = {
  seq: number[]
  atMs: number[]
  probeNo: number[]
  emf: number[]
  cold: number[]
}

/**
 * What storing a message costs (checking, sorting, locking, committing) against the barest way of writing the same
 * rows: one `insert … select from unnest` of arrays that are ready, and COPY of text that is ready. One connection
 * each, the three taking turns batch by batch, so that the machine's moods meet all of them.
 */
export async function benchIngest(): Promise<Figure[]> {
  const pool = ingestPool()
  const { gateway, probes } = await makeGateway(pool)
  await ensureNextPartitions(Date.now() - 86_400_000)
  await ensureNextPartitions(Date.now())
  const figures: Figure[] = []
  for (const batch of [120, 500, 2_000]) figures.push(...(await compare(pool, gateway, probes, batch)))
  figures.push(...(await steady(gateway, probes)), ...(await burst(gateway, probes)))
  return figures
}

async function compare(
  pool: Pool,
  gateway: GatewayIdentity,
  probes: BenchProbe[],
  batch: number,
): Promise<Figure[]> {
  const rounds = batch >= 2_000 ? 60 : 120
  const ours = makeSource(probes)
  const raw = { source: makeSource(probes), bootNo: await makeBoot(pool, gateway.gatewayId) }
  const copied = { source: makeSource(probes), bootNo: await makeBoot(pool, gateway.gatewayId) }
  const bootId = randomUUID()
  const times = { ours: [] as number[], raw: [] as number[], copy: [] as number[] }
  const client = await pool.connect()
  try {
    for (let round = 0; round < rounds + 10; round += 1) {
      const message = ours.message(bootId, batch)
      const columns = raw.source.columns(batch)
      const text = copyText(copied.bootNo, copied.source.columns(batch))
      const turns: [keyof typeof times, () => Promise<unknown>][] = [
        ['ours', () => storeReadings(gateway, message)],
        ['raw', () => insertRaw(client, raw.bootNo, columns)],
        ['copy', () => copyRows(client, text)],
      ]
      for (let turn = 0; turn < 3; turn += 1) {
        const [name, work] = turns[(turn + round) % 3] ?? turns[0] ?? ['ours', async () => undefined]
        const startedAt = performance.now()
        await work()
        if (round >= 10) times[name].push(performance.now() - startedAt)
      }
    }
  } finally {
    client.release()
  }
  const ms = { ours: median(times.ours), raw: median(times.raw), copy: median(times.copy) }
  const rate = (one: number) => Math.round((batch / one) * 1000)
  const what = `ingest, ${batch} rows a message`
  return [
    { what, value: rate(ms.ours), unit: 'rows/s', target: batch === 2_000 ? '≥ 20000' : '' },
    { what: `${what}, raw unnest`, value: rate(ms.raw), unit: 'rows/s', target: '' },
    { what: `${what}, COPY`, value: rate(ms.copy), unit: 'rows/s', target: '' },
    { what: `${what} ÷ raw unnest`, value: ms.raw / ms.ours, unit: '×', target: '≥ 0.80' },
    { what: `${what} ÷ COPY`, value: ms.copy / ms.ours, unit: '×', target: '≥ 0.60' },
  ]
}

/** 2,400 rows a second for 10 s, from four gateways' boots at 5 messages a second each. */
async function steady(gateway: GatewayIdentity, probes: BenchProbe[]): Promise<Figure[]> {
  const senders = Array.from({ length: 4 }, () => ({ source: makeSource(probes), bootId: randomUUID() }))
  const waits: number[] = []
  const cpu = process.cpuUsage()
  const startedAt = performance.now()
  const work: Promise<void>[] = []
  for (let tick = 0; tick < 50; tick += 1) {
    await sleepUntil(startedAt + tick * 200)
    for (const sender of senders) {
      const message = sender.source.message(sender.bootId, 120)
      const sentAt = performance.now()
      work.push(storeReadings(gateway, message).then(() => void waits.push(performance.now() - sentAt)))
    }
  }
  await Promise.all(work)
  const used = process.cpuUsage(cpu)
  const share = (used.user + used.system) / 1000 / (performance.now() - startedAt)
  return [
    { what: 'steady 2,400 rows/s, commit p99', value: quantile(waits, 0.99), unit: 'ms', target: '≤ 200' },
    { what: 'steady 2,400 rows/s, of one core', value: 100 * share, unit: '%', target: '≤ 50' },
  ]
}

/** 40,000 rows at once from four boots in messages of 2,000. */
async function burst(gateway: GatewayIdentity, probes: BenchProbe[]): Promise<Figure[]> {
  const batches = Array.from({ length: 4 }, () => {
    const source = makeSource(probes)
    const bootId = randomUUID()
    return Array.from({ length: 5 }, () => source.message(bootId, 2_000))
  })
  const startedAt = performance.now()
  await Promise.all(
    batches.map(async (messages) => {
      for (const message of messages) await storeReadings(gateway, message)
    }),
  )
  const rate = Math.round((40_000 / (performance.now() - startedAt)) * 1000)
  return [{ what: 'burst from four boots', value: rate, unit: 'rows/s', target: '≥ 20000' }]
}

/** Believable rows: 12 probes at 5 Hz, a slow climb with a microvolt of noise; numbers and instants run on. */
function makeSource(probes: BenchProbe[]) {
  let seq = 0
  let atMs = Date.now() - 3_600_000
  const next = () => {
    const probe = probes[seq % probes.length] ?? { id: '', no: 0 }
    seq += 1
    if (seq % probes.length === 0) atMs += spacingMs
    const emf = 60_000 + Math.round(seq / 50) + Math.round((Math.random() - 0.5) * 40)
    return { seq, probe, atMs, emf, cold: 2_400 + Math.round(Math.random() * 4) }
  }
  return {
    message(bootId: string, count: number): IngestMessage {
      const readings = Array.from({ length: count }, () => {
        const one = next()
        return {
          seq: one.seq,
          probeId: one.probe.id,
          at: new Date(one.atMs).toISOString(),
          emf: { microvolts: one.emf / 10, coldJunctionC: one.cold / 100 },
        }
      })
      return { bootId, sentAt: new Date().toISOString(), readings }
    },
    columns(count: number): Columns {
      const columns: Columns = { seq: [], atMs: [], probeNo: [], emf: [], cold: [] }
      for (let i = 0; i < count; i += 1) {
        const one = next()
        columns.seq.push(one.seq)
        columns.atMs.push(one.atMs)
        columns.probeNo.push(one.probe.no)
        columns.emf.push(one.emf)
        columns.cold.push(one.cold)
      }
      return columns
    },
  }
}

async function insertRaw(client: PoolClient, bootNo: number, columns: Columns): Promise<void> {
  await client.query({
    name: 'bench-raw',
    text: `insert into readings (boot_no, seq, at_ms, probe_no, emf_tenth_uv, cold_centi_c)
           select $1, * from unnest($2::int8[], $3::int8[], $4::int4[], $5::int4[], $6::int4[])`,
    values: [bootNo, columns.seq, columns.atMs, columns.probeNo, columns.emf, columns.cold],
  })
}

function copyText(bootNo: number, columns: Columns): string {
  const { seq, atMs, probeNo, emf, cold } = columns
  return seq.map((one, i) => `${bootNo}\t${one}\t${atMs[i]}\t${probeNo[i]}\t${emf[i]}\t${cold[i]}\n`).join('')
}

async function copyRows(client: PoolClient, text: string): Promise<void> {
  const columns = 'boot_no, seq, at_ms, probe_no, emf_tenth_uv, cold_centi_c'
  await pipeline(Readable.from([text]), client.query(copyFrom(`copy readings (${columns}) from stdin`)))
}

async function makeGateway(pool: Pool): Promise<{ gateway: GatewayIdentity; probes: BenchProbe[] }> {
  const name = `Bench ${randomUUID().slice(0, 8)}`
  const { rows } = await pool.query<{ id: string }>(
    'insert into gateways (name, may_replay, created_at) values ($1, false, now()) returning id',
    [name],
  )
  const gatewayId = rows[0]?.id ?? ''
  const probes = await pool.query<BenchProbe>(
    `insert into probes (gateway_id, channel, name, thermocouple_type, iec_class, usual_role, height, side,
       depth_mm, mounting, created_at)
     select $1, n, 'Probe ' || n, 'K', 1, 'lead', 'bilge', 'A', 2, 'wedge', now() from generate_series(1, $2) n
     returning id, no`,
    [gatewayId, probeCount],
  )
  return { gateway: { gatewayId, name, mayReplay: false }, probes: probes.rows }
}

async function makeBoot(pool: Pool, gatewayId: string): Promise<number> {
  const { rows } = await pool.query<{ no: number }>(
    `insert into gateway_boots (gateway_id, boot_id, first_seen_at, last_seen_at)
     values ($1, $2, now(), now()) returning no`,
    [gatewayId, randomUUID()],
  )
  return rows[0]?.no ?? 0
}

async function sleepUntil(at: number): Promise<void> {
  const waitMs = at - performance.now()
  if (waitMs > 0) await new Promise((resolve) => setTimeout(resolve, waitMs))
}
