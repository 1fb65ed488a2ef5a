import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { firingReadings, rawFiringReadings } from '@/lib/ingest/firing-readings'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { readSealed } from '@/lib/ingest/read-sealed'
import { retainReadings } from '@/lib/ingest/retention'
import { sealFiring } from '@/lib/ingest/seal-firing'
import { startSealingLoop } from '@/lib/ingest/sealing-loop'
import { storeReadings } from '@/lib/ingest/store-readings'
import { setClock } from '@/lib/runtime'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import type { TestPeople } from '@/tests/support/people'
import { createPeople } from '@/tests/support/people'
import type { TestFiring, TestGateway, TestProbe } from '@/tests/support/room'
import { createTestFiring, createTestGateway, createTestProbe, endTestFiring } from '@/tests/support/room'

let database: TestDatabase
let people: TestPeople

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
})

afterAll(async () => {
  setClock(null)
  await closeIngestPool()
  await closeOrm()
  await database.drop()
})

type Room = {
  gateway: TestGateway
  lead: TestProbe
  opposite: TestProbe
  firing: TestFiring
  startMs: number
  bootId: string
}

async function makeRoom(startMs: number): Promise<Room> {
  const gateway = await createTestGateway()
  const lead = await createTestProbe(gateway.gatewayId, 1)
  const opposite = await createTestProbe(gateway.gatewayId, 2)
  const firing = await createTestFiring({
    accountId: people.toaster.accountId,
    customerId: people.customers.first.id,
    state: 'toasting',
    preheatAt: new Date(startMs),
    toastAt: new Date(startMs + 60_000),
    probes: { lead: lead.id, opposite: opposite.id },
  })
  return { gateway, lead, opposite, firing, startMs, bootId: randomUUID() }
}

/** Both probes from `fromS` to `untilS` at one reading a second; even numbers are the lead's. */
async function sendSpan(
  room: Room,
  fromS: number,
  untilS: number,
  skip: (s: number) => boolean = () => false,
) {
  const readings = []
  for (let s = fromS; s < untilS; s += 1) {
    if (skip(s)) continue
    for (const [offset, probe] of [room.lead, room.opposite].entries()) {
      readings.push({
        seq: 1 + 2 * s + offset,
        probeId: probe.id,
        at: new Date(room.startMs + s * 1000).toISOString(),
        emf: { microvolts: 3_000 + s * 3.3 + offset, coldJunctionC: 24.5 },
        ...(s === 50 ? { flag: 'open' } : {}),
      })
    }
  }
  return storeReadings(room.gateway, { bootId: room.bootId, sentAt: new Date().toISOString(), readings })
}

async function countSeals(firingId: string): Promise<number> {
  const rows = await queryRows<{ revision: number }>(
    await forkEm(),
    'select distinct revision from seals where firing_id = ?',
    [firingId],
  )
  return rows.length
}

it('a sealed firing reads back equal to what the table held, and is kept when its partition goes', async () => {
  const room = await makeRoom(Date.now() - 600_000)
  await sendSpan(room, 0, 300)
  await endTestFiring(room.firing.id, new Date(room.startMs + 200_000))
  const em = await forkEm()
  const before = await firingReadings(em, room.firing.id)
  const rawBefore = await rawFiringReadings(em, room.firing.id)
  expect(before.sealRevision).toBeNull()
  expect(before.series.map((series) => [series.role, series.atMs.length])).toEqual([
    ['lead', 200],
    ['opposite', 200],
  ])
  expect(Number.isNaN(before.series[0]?.tempC[50])).toBe(true)
  expect(before.series[0]?.spacingS).toBe(1)
  expect(await sealFiring(room.firing.id)).toEqual({ revision: 1, isNew: true, readingCount: 400 })
  const after = await firingReadings(em, room.firing.id)
  expect(after).toEqual({
    sealRevision: 1,
    series: before.series.map((series) => ({ ...series, assignments: expect.anything() })),
  })
  expect((await rawFiringReadings(em, room.firing.id)).probes.map((probe) => probe.columns)).toEqual(
    rawBefore.probes.map((probe) => probe.columns),
  )
  setClock(() => Date.now() + 4 * 86_400_000)
  try {
    expect(await retainReadings()).not.toHaveLength(0)
    expect((await firingReadings(em, room.firing.id)).series[0]?.tempC).toEqual(before.series[0]?.tempC)
    // Sealing again, with nothing in the table, loses nothing.
    expect(await sealFiring(room.firing.id)).toEqual({ revision: 1, isNew: false, readingCount: 400 })
  } finally {
    setClock(null)
  }
})

it('a partition that a firing needs stays until the firing is sealed', async () => {
  const room = await makeRoom(Date.now() - 400_000)
  await sendSpan(room, 0, 100)
  setClock(() => Date.now() + 5 * 86_400_000)
  try {
    expect(await retainReadings()).toHaveLength(0)
    await endTestFiring(room.firing.id, new Date(room.startMs + 100_000))
    expect(await retainReadings()).toHaveLength(0)
    await sealFiring(room.firing.id)
    expect(await retainReadings()).not.toHaveLength(0)
  } finally {
    setClock(null)
  }
})

it('a firing is sealed when its gateway is past the end, and again with a new revision when a reading comes late', async () => {
  const room = await makeRoom(Date.now() - 300_000)
  const scored: string[] = []
  const loop = startSealingLoop({
    everyMs: 3_600_000,
    scoreSealed: async (firingId) => {
      scored.push(firingId)
    },
  })
  try {
    await loop.runOnce()
    await sendSpan(room, 0, 150, (s) => s === 77)
    await endTestFiring(room.firing.id, new Date(room.startMs + 200_000))
    await loop.runOnce()
    expect(await countSeals(room.firing.id)).toBe(0)
    await sendSpan(room, 150, 210)
    await loop.runOnce()
    // 77 is missing, so nothing past it is acknowledged: it may still come.
    expect(await countSeals(room.firing.id)).toBe(0)
    await sendSpan(room, 77, 78)
    await loop.runOnce()
    expect(await countSeals(room.firing.id)).toBe(1)
    expect(scored).toContain(room.firing.id)
    const late = { ...room, bootId: randomUUID() }
    await storeReadings(late.gateway, {
      bootId: late.bootId,
      sentAt: new Date().toISOString(),
      readings: [
        { seq: 1, probeId: room.lead.id, at: new Date(room.startMs + 120_500).toISOString(), tempC: 150 },
      ],
    })
    await loop.runOnce()
    expect(await countSeals(room.firing.id)).toBe(2)
    const sealed = await readSealed(await forkEm(), room.firing.id)
    expect(sealed?.revision).toBe(2)
    expect(sealed?.probes.get(room.lead.id)?.tempCentiC.filter((temp) => temp === 15_000)).toHaveLength(1)
  } finally {
    await loop.stop()
  }
})

it('a firing whose gateway is lost is sealed after two minutes', async () => {
  const room = await makeRoom(Date.now() - 300_000)
  await sendSpan(room, 0, 100)
  await endTestFiring(room.firing.id, new Date(room.startMs + 200_000))
  const loop = startSealingLoop({ everyMs: 3_600_000 })
  try {
    await loop.runOnce()
    expect(await countSeals(room.firing.id)).toBe(0)
    setClock(() => Date.now() + 121_000)
    await loop.runOnce()
    expect(await countSeals(room.firing.id)).toBe(1)
  } finally {
    setClock(null)
    await loop.stop()
  }
})

it('a live firing is not sealed', async () => {
  const room = await makeRoom(Date.now() - 60_000)
  await expect(sealFiring(room.firing.id)).rejects.toMatchObject({ kind: 'conflict' })
})
