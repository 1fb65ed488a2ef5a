import { randomUUID } from 'node:crypto'
import { afterAll, afterEach, beforeAll, expect, it } from 'vitest'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { storeReadings } from '@/lib/ingest/store-readings'
import { setClock } from '@/lib/runtime'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import { setTestEnvironment } from '@/tests/support/environment'
import type { TestGateway, TestProbe } from '@/tests/support/room'
import { createTestGateway, createTestProbe } from '@/tests/support/room'

/*
 * The time that a message spent on its way (a cable that was out for some seconds, a database that was starting) was
 * taken for a clock that goes wrong, and its readings were stored that much too late.
 */

let database: TestDatabase
let gateway: TestGateway
let probe: TestProbe

beforeAll(async () => {
  database = await createTestDatabase()
  setTestEnvironment(database)
  gateway = await createTestGateway()
  probe = await createTestProbe(gateway.gatewayId, 1)
})

afterEach(() => setClock(null))

afterAll(async () => {
  await closeIngestPool()
  await closeOrm()
  await database.drop()
})

const startMs = Math.floor(Date.now() / 1000) * 1000 - 600_000

/** One reading a message, sent as soon as it is read, which arrives later. */
async function send(bootId: string, seq: number, sentAtMs: number, delayMs: number, aheadMs = 0) {
  setClock(() => sentAtMs + delayMs)
  await storeReadings(gateway, {
    bootId,
    sentAt: new Date(sentAtMs + aheadMs).toISOString(),
    readings: [{ seq, probeId: probe.id, at: new Date(sentAtMs + aheadMs).toISOString(), tempC: 150 }],
  })
}

async function storedAtMs(bootId: string): Promise<number[]> {
  const rows = await queryRows<{ at_ms: string }>(
    await forkEm(),
    'select at_ms from readings r join gateway_boots b on b.no = r.boot_no where boot_id = ? order by seq',
    [bootId],
  )
  return rows.map((row) => Number(row.at_ms))
}

it('readings of a message that was held up for seconds keep their instants', async () => {
  const bootId = randomUUID()
  for (let seq = 1; seq <= 9; seq += 1)
    await send(bootId, seq, startMs + 200 * seq, seq === 4 || seq === 5 ? 6_000 : 0)
  expect(await storedAtMs(bootId)).toEqual(Array.from({ length: 9 }, (_, i) => startMs + 200 * (i + 1)))
})

it('a server that was started anew tells a held-up message from a clock that was set back', async () => {
  const [held, set] = [randomUUID(), randomUUID()]
  for (const bootId of [held, set]) await send(bootId, 1, startMs, 0)
  await closeIngestPool()
  await send(held, 2, startMs + 200, 6_000)
  expect(await storedAtMs(held)).toEqual([startMs, startMs + 200])
  await closeIngestPool()
  await send(set, 2, startMs + 200, 0, -20_000)
  expect(await storedAtMs(set)).toEqual([startMs, startMs + 200])
})
