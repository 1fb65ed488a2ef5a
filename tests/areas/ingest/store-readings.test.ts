import { randomUUID } from 'node:crypto'
import * as fc from 'fast-check'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import type { IngestAnswer, Loss, Reading } from '@/lib/gateway/protocol'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { storeReadings } from '@/lib/ingest/store-readings'
import { hubDoor } from '@/lib/live/hub-door'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import { setTestEnvironment } from '@/tests/support/environment'
import type { TestGateway, TestProbe } from '@/tests/support/room'
import { createTestGateway, createTestProbe } from '@/tests/support/room'

const seed = 20_260_401
let database: TestDatabase
let gateway: TestGateway
let probe: TestProbe
let other: TestProbe
let retired: TestProbe

beforeAll(async () => {
  database = await createTestDatabase()
  setTestEnvironment(database)
  gateway = await createTestGateway()
  probe = await createTestProbe(gateway.gatewayId, 1)
  retired = await createTestProbe(gateway.gatewayId, 2, { isRetired: true })
  const stranger = await createTestGateway()
  other = await createTestProbe(stranger.gatewayId, 1)
})

afterAll(async () => {
  await closeIngestPool()
  await closeOrm()
  await database.drop()
})

function reading(seq: number, more: Partial<Reading> = {}, atMs = Date.now() - 60_000 + seq): Reading {
  return {
    seq,
    probeId: probe.id,
    at: new Date(atMs).toISOString(),
    emf: { microvolts: 5_000 + seq, coldJunctionC: 24.5 },
    ...more,
  }
}

function send(bootId: string, readings: unknown[], lost?: Loss[]): Promise<IngestAnswer> {
  return storeReadings(gateway, {
    bootId,
    sentAt: new Date().toISOString(),
    readings,
    ...(lost === undefined ? {} : { lost }),
  })
}

async function storedSeqs(bootId: string): Promise<number[]> {
  const rows = await queryRows<{ seq: string }>(
    await forkEm(),
    'select r.seq from readings r join gateway_boots b on b.no = r.boot_no where b.boot_id = ? order by r.seq',
    [bootId],
  )
  return rows.map((row) => Number(row.seq))
}

async function refusedReasons(bootId: string): Promise<Record<string, string>> {
  const rows = await queryRows<{ seq: string; reason: string }>(
    await forkEm(),
    'select r.seq, r.reason from refused_readings r join gateway_boots b on b.no = r.boot_no where b.boot_id = ?',
    [bootId],
  )
  return Object.fromEntries(rows.map((row) => [row.seq, row.reason]))
}

it('readings are stored in whole units, and acknowledged up to the first hole', async () => {
  const bootId = randomUUID()
  const at = Date.now() - 10_000
  const answer = await send(bootId, [
    reading(1, { emf: { microvolts: 8_138.46, coldJunctionC: 24.567 } }, at),
    reading(2, { emf: undefined, tempC: 191.234 }, at + 200),
    reading(3, { emf: undefined, flag: 'open' }, at + 400),
    reading(6, {}, at + 600),
  ])
  expect(answer).toEqual({ ackedSeq: 3, refused: [] })
  const rows = await queryRows(
    await forkEm(),
    `select seq, probe_no, emf_tenth_uv, cold_centi_c, temp_centi_c, flag
       from readings r join gateway_boots b on b.no = r.boot_no where b.boot_id = ? order by seq limit 3`,
    [bootId],
  )
  expect(rows).toEqual([
    { seq: '1', probe_no: probe.no, emf_tenth_uv: 81_385, cold_centi_c: 2_457, temp_centi_c: null, flag: 0 },
    { seq: '2', probe_no: probe.no, emf_tenth_uv: null, cold_centi_c: null, temp_centi_c: 19_123, flag: 0 },
    { seq: '3', probe_no: probe.no, emf_tenth_uv: null, cold_centi_c: null, temp_centi_c: null, flag: 1 },
  ])
})

it('bad readings are named by number and kept with their reason, the good ones are stored', async () => {
  const bootId = randomUUID()
  const answer = await send(bootId, [
    reading(1),
    reading(2, { probeId: randomUUID() }),
    reading(3, { probeId: other.id }),
    reading(4, { probeId: retired.id }),
    reading(5, {}, Date.now() + 60_000),
    reading(6, {}, Date.now() - 49 * 3600_000),
    reading(7, { emf: undefined }),
    { ...reading(8), emf: { microvolts: null, coldJunctionC: 24 } },
    reading(9, { emf: { microvolts: 1e9, coldJunctionC: 24 } }),
    { seq: 10, nonsense: 'a\u0000b \ud800' },
    reading(11),
    { ...reading(11), emf: { microvolts: 1, coldJunctionC: 1 } },
    reading(12, { emf: { microvolts: 1, coldJunctionC: 2 }, tempC: 20 }),
    reading(13),
  ])
  expect(answer.ackedSeq).toBe(13)
  expect(answer.refused.map(({ seq }) => seq)).toEqual([2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12])
  expect(await storedSeqs(bootId)).toEqual([1, 11, 13])
  const reasons = await refusedReasons(bootId)
  expect(reasons['2']).toContain('no probe')
  expect(reasons['3']).toContain('another gateway')
  expect(reasons['4']).toContain('retired')
  expect(reasons['5']).toContain('future')
  expect(reasons['6']).toContain('48 h')
  expect(reasons['11']).toContain('twice')
  expect(Object.keys(reasons)).toHaveLength(11)
  // Sent again as it was, nothing changes, and what was refused is not refused anew.
  expect((await send(bootId, [reading(1), reading(2, { probeId: randomUUID() })])).refused).toEqual([])
})

it('an identical repeat inside one message is a repeat, not a fault', async () => {
  const bootId = randomUUID()
  const one = reading(1)
  const answer = await send(bootId, [one, { ...one }, reading(2)])
  expect(answer).toEqual({ ackedSeq: 2, refused: [] })
  expect(await storedSeqs(bootId)).toEqual([1, 2])
})

it('declared losses count as settled and are kept as gaps', async () => {
  const bootId = randomUUID()
  const answer = await send(bootId, [reading(1), reading(8)], [{ from: 2, to: 7, reason: 'disk full' }])
  expect(answer.ackedSeq).toBe(8)
  const losses = await queryRows(
    await forkEm(),
    `select from_seq, to_seq, reason from gateway_losses l join gateway_boots b on b.no = l.boot_no where b.boot_id = ?`,
    [bootId],
  )
  expect(losses).toEqual([{ from_seq: '2', to_seq: '7', reason: 'disk full' }])
})

it("a gateway's clock offset is taken, applied and kept; a small change of it moves nothing", async () => {
  const bootId = randomUUID()
  const skewMs = 3_600_000
  const at = Date.now() - 1_000
  const message = (seq: number, aheadMs: number) => ({
    bootId,
    sentAt: new Date(Date.now() + aheadMs).toISOString(),
    readings: [reading(seq, {}, at + skewMs)],
  })
  await storeReadings(gateway, message(1, skewMs))
  await storeReadings(gateway, message(2, skewMs + 400))
  const rows = await queryRows<{ at_ms: string; clock_offset_ms: number }>(
    await forkEm(),
    `select r.at_ms, b.clock_offset_ms from readings r join gateway_boots b on b.no = r.boot_no where b.boot_id = ?`,
    [bootId],
  )
  expect(rows[0]?.clock_offset_ms).toBeGreaterThan(-skewMs - 1)
  expect(rows[0]?.clock_offset_ms).toBeLessThan(-skewMs + 1_000)
  expect(rows[1]?.at_ms).toBe(rows[0]?.at_ms)
})

it('only a gateway that may replay sends old instants, and its clock has no offset', async () => {
  const replay = await createTestGateway({ mayReplay: true })
  const own = await createTestProbe(replay.gatewayId, 1)
  const bootId = randomUUID()
  const old = Date.parse('2025-11-03T08:00:00.000Z')
  const answer = await storeReadings(replay, {
    bootId,
    sentAt: new Date(old).toISOString(),
    readings: [reading(1, { probeId: own.id }, old)],
  })
  expect(answer).toEqual({ ackedSeq: 1, refused: [] })
  const rows = await queryRows<{ at_ms: string }>(
    await forkEm(),
    'select at_ms from readings where probe_no = ?',
    [own.no],
  )
  expect(rows.map((row) => Number(row.at_ms))).toEqual([old])
})

it.each([
  ['no object', 'x'],
  [
    'a field that is not known',
    { bootId: randomUUID(), sentAt: new Date().toISOString(), readings: [], x: 1 },
  ],
  ['no boot', { sentAt: new Date().toISOString(), readings: [] }],
  ['a reading without number', { bootId: randomUUID(), sentAt: new Date().toISOString(), readings: [{}] }],
  ['an instant that is none', { bootId: randomUUID(), sentAt: 'yesterday', readings: [] }],
])('a message that does not fit as a whole is invalid: %s', async (_what, message) => {
  await expect(storeReadings(gateway, message)).rejects.toMatchObject({ kind: 'invalid' })
})

it('new rows go to the hub after the commit, and a repeat as it is stored', async () => {
  const bootId = randomUUID()
  const taken: number[] = []
  const seen: Promise<number[]>[] = []
  hubDoor().current = {
    takeRows: (rows) => {
      taken.push(...rows.atMs)
      seen.push(storedSeqs(bootId))
    },
    gatewayHeard: () => {},
    alarmsChanged: () => {},
    firingChanged: () => {},
    sketchOf: () => null,
  }
  try {
    await send(bootId, [reading(1), reading(2)])
    expect(await seen[0]).toEqual([1, 2])
    const again = [reading(1), reading(2, {}, Date.now()), reading(3)]
    await send(bootId, again)
    const [first, second] = taken
    expect(taken).toEqual([first, second, Date.parse(again[2]?.at ?? ''), first, second])
  } finally {
    hubDoor().current = null
  }
})

type Step =
  { kind: 'send'; seqs: number[]; isAnswerLost: boolean } | { kind: 'lose'; from: number; to: number }

const steps: fc.Arbitrary<Step[]> = fc.array(
  fc.oneof(
    {
      weight: 6,
      arbitrary: fc.record({
        kind: fc.constant('send' as const),
        seqs: fc.array(fc.integer({ min: 1, max: 40 }), { minLength: 0, maxLength: 25 }),
        isAnswerLost: fc.boolean(),
      }),
    },
    {
      weight: 1,
      arbitrary: fc
        .tuple(fc.integer({ min: 1, max: 40 }), fc.integer({ min: 0, max: 6 }))
        .map(([from, length]) => ({ kind: 'lose' as const, from, to: from + length })),
    },
  ),
  { minLength: 1, maxLength: 12 },
)

/** What must be stored and acknowledged, by the simplest set there is. Every fifth number is a bad reading. */
function createModel() {
  const stored = new Set<number>()
  const settled = new Set<number>()
  return {
    stored,
    take(step: Step) {
      if (step.kind === 'lose') for (let seq = step.from; seq <= step.to; seq += 1) settled.add(seq)
      else
        for (const seq of step.seqs) {
          if (!settled.has(seq) && seq % 5 !== 0) stored.add(seq)
          settled.add(seq)
        }
    },
    ackedSeq() {
      let acked = 0
      while (settled.has(acked + 1)) acked += 1
      return acked
    },
  }
}

function apply(bootId: string, step: Step): Promise<IngestAnswer> {
  if (step.kind === 'lose') return send(bootId, [], [{ from: step.from, to: step.to, reason: 'lost' }])
  const base = Date.now() - 30_000
  return send(
    bootId,
    step.seqs.map((seq) => ({
      ...reading(seq, {}, base - (base % 60_000) + seq),
      ...(seq % 5 === 0 && { probeId: 'no' }),
    })),
  )
}

it('any order, repeats and lost answers give the set and the acknowledgement of a plain model', async () => {
  await fc.assert(
    fc.asyncProperty(steps, async (all) => {
      const bootId = randomUUID()
      const model = createModel()
      for (const step of all) {
        model.take(step)
        const answer = await apply(bootId, step)
        expect(answer.ackedSeq).toBe(model.ackedSeq())
        // A sender that did not hear the answer sends the same again.
        if (step.kind === 'send' && step.isAnswerLost) {
          expect(await apply(bootId, step)).toEqual({ ackedSeq: model.ackedSeq(), refused: [] })
        }
      }
      expect(await storedSeqs(bootId)).toEqual([...model.stored].sort((a, b) => a - b))
    }),
    { seed, numRuns: 30 },
  )
}, 120_000)

it('two senders of one boot at the same time, and a second process, settle the same set', async () => {
  await fc.assert(
    fc.asyncProperty(steps, steps, async (first, second) => {
      const bootId = randomUUID()
      const model = createModel()
      // Losses settle numbers without storing them, so their order against readings matters: leave them out here.
      const sends = (all: Step[]) => all.filter((step) => step.kind === 'send')
      const run = async (all: Step[]) => {
        for (const step of all) await apply(bootId, step)
      }
      await Promise.all([run(sends(first)), run(sends(second))])
      // Forgetting what is remembered is what a second process, or a restart, does.
      await closeIngestPool()
      await run(sends(first))
      for (const step of [...sends(first), ...sends(second)]) model.take(step)
      expect((await send(bootId, [])).ackedSeq).toBe(model.ackedSeq())
      expect(await storedSeqs(bootId)).toEqual([...model.stored].sort((a, b) => a - b))
    }),
    { seed, numRuns: 12 },
  )
}, 120_000)
