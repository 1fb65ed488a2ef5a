import { randomUUID } from 'node:crypto'
import { Client } from 'pg'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { closeOrm } from '@/lib/db/orm'
import { isoDay } from '@/lib/ingest/ensure-partitions'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { retainReadings } from '@/lib/ingest/retention'
import { storeReadings } from '@/lib/ingest/store-readings'
import { setClock } from '@/lib/runtime'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import { setTestEnvironment } from '@/tests/support/environment'
import type { TestGateway, TestProbe } from '@/tests/support/room'
import { createTestGateway, createTestProbe } from '@/tests/support/room'

/* A day whose partition is missing: the server has it made, and what was read on it is kept. */

const dayMs = 86_400_000
const today = Math.floor(Date.now() / dayMs)
let database: TestDatabase
let app: Client
let owner: Client
let gateway: TestGateway
let probe: TestProbe

beforeAll(async () => {
  database = await createTestDatabase()
  setTestEnvironment(database)
  app = new Client({ connectionString: database.databaseUrl })
  owner = new Client({ connectionString: database.ownerUrl })
  await app.connect()
  await owner.connect()
  gateway = await createTestGateway()
  probe = await createTestProbe(gateway.gatewayId, 1)
})

afterAll(async () => {
  setClock(null)
  await app.end()
  await owner.end()
  await closeIngestPool()
  await closeOrm()
  await database.drop()
})

const partitionOf = (day: number) => `readings_${isoDay(day).replaceAll('-', '')}`

async function hasPartition(day: number): Promise<boolean> {
  const { rows } = await owner.query<{ is_there: boolean }>(
    'select to_regclass($1) is not null as is_there',
    [partitionOf(day)],
  )
  return rows[0]?.is_there === true
}

async function storedAtMs(bootId: string): Promise<number[]> {
  const { rows } = await owner.query<{ at_ms: string }>(
    'select at_ms from readings r join gateway_boots b on b.no = r.boot_no where boot_id = $1 order by seq',
    [bootId],
  )
  return rows.map((row) => Number(row.at_ms))
}

function send(bootId: string, firstSeq: number, instantsMs: readonly number[]) {
  return storeReadings(gateway, {
    bootId,
    sentAt: new Date().toISOString(),
    readings: instantsMs.map((atMs, i) => ({
      seq: firstSeq + i,
      probeId: probe.id,
      at: new Date(atMs).toISOString(),
      tempC: 150,
    })),
  })
}

it('readings on days that have no partition are kept, each day being made', async () => {
  const bootId = randomUUID()
  const instants = [Date.now() - 40 * 3_600_000, Date.now() - 20 * 3_600_000, Date.now() - 1_000]
  expect(await send(bootId, 1, instants)).toEqual({ ackedSeq: 3, refused: [] })
  const stored = await storedAtMs(bootId)
  for (const [i, atMs] of instants.entries()) {
    expect(Math.abs((stored[i] ?? NaN) - atMs)).toBeLessThan(1_000)
    expect(await hasPartition(Math.floor(atMs / dayMs))).toBe(true)
  }
})

it('a partition that goes while the server believes it there is made again, and the readings are kept', async () => {
  const bootId = randomUUID()
  await send(bootId, 1, [Date.now() - 500])
  await owner.query(`drop table ${partitionOf(Math.floor((Date.now() - 500) / dayMs))}`)
  // Both ways of writing: the usual one, and the one that locks because something is refused.
  expect(await send(bootId, 2, [Date.now() - 300])).toEqual({ ackedSeq: 2, refused: [] })
  await owner.query(`drop table ${partitionOf(Math.floor((Date.now() - 300) / dayMs))}`)
  const answer = await send(bootId, 3, [Date.now() - 200, Date.now() + dayMs])
  expect(answer).toMatchObject({ ackedSeq: 4, refused: [{ seq: 4 }] })
  // What the dropped tables held is gone with them; nobody but the owner can do that.
  expect(await storedAtMs(bootId)).toHaveLength(1)
})

it('the role of the server makes and drops partitions by the two functions alone', async () => {
  const day = today + 3
  const [fromMs, untilMs] = [day * dayMs, (day + 1) * dayMs]
  const make = `create table ${partitionOf(day)} partition of readings for values from (${fromMs}) to (${untilMs})`
  await expect(app.query(make)).rejects.toMatchObject({ code: '42501' })
  await app.query('select ensure_readings_partition($1::date)', [isoDay(day)])
  expect(await hasPartition(day)).toBe(true)
  await expect(app.query(`drop table ${partitionOf(day)}`)).rejects.toMatchObject({ code: '42501' })
  await expect(app.query(`truncate ${partitionOf(day)}`)).rejects.toMatchObject({ code: '42501' })
  await expect(app.query(`delete from readings`)).rejects.toMatchObject({ code: '42501' })
  await app.query('select drop_readings_partition($1::date)', [isoDay(day)])
  expect(await hasPartition(day)).toBe(false)
})

it('the running server makes the partitions of today and tomorrow before anything is read', async () => {
  for (const day of [today + 10, today + 11]) expect(await hasPartition(day)).toBe(false)
  setClock(() => (today + 10) * dayMs + 3_600_000)
  await retainReadings()
  setClock(null)
  for (const day of [today + 10, today + 11]) expect(await hasPartition(day)).toBe(true)
})
