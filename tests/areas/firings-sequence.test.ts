import { randomUUID } from 'node:crypto'
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest'
import { listPieces } from '@/lib/batches/list-pieces'
import type { PieceDto } from '@/lib/batches/schema'
import { summedDose } from '@/lib/batches/summed-dose'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { abandonFiring } from '@/lib/firings/abandon-firing'
import { addMark } from '@/lib/firings/add-mark'
import { finishFiring } from '@/lib/firings/finish-firing'
import { getFiring } from '@/lib/firings/get-firing'
import { getForecastRecord } from '@/lib/firings/get-forecast-record'
import { getNextPieceLine } from '@/lib/firings/get-next-piece-line'
import { getRoomPicture } from '@/lib/firings/get-room-picture'
import { listFirings } from '@/lib/firings/list-firings'
import { moveFiring } from '@/lib/firings/move-firing'
import { nextPieceWords } from '@/lib/firings/next-piece-words'
import { scoreFiring } from '@/lib/firings/score-firing'
import { scoreInputOf } from '@/lib/firings/score-input'
import { shortStepsOf, shortStepWords } from '@/lib/firings/short-steps'
import { firingReadings } from '@/lib/ingest/firing-readings'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { sealFiring } from '@/lib/ingest/seal-firing'
import { storeReadings } from '@/lib/ingest/store-readings'
import type { RecipeContent } from '@/lib/recipes/schema'
import { setClock } from '@/lib/runtime'
import { scoreFiring as evaluate } from '@/lib/science/score'
import { defaultSiteRules } from '@/lib/science/site-rules'
import { playFiring } from '@/simulators/scenarios/play-firing'
import type { SeedHearth } from '@/simulators/scenarios/seed-room'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import {
  approvedVersion,
  batchOf,
  checkedRoom,
  refusalOf,
  shortContent,
  startOn,
} from '@/tests/support/firing-room'
import type { TestPeople } from '@/tests/support/people'
import { createPeople } from '@/tests/support/people'

let database: TestDatabase
let people: TestPeople
let hearths: SeedHearth[]
let pieces: PieceDto[]
let heads: PieceDto[]
let next = 0

const minute = 60_000
const headContent = (): RecipeContent =>
  shortContent({ pieceKind: 'head', bend: { minimumMinutes: 0, woodLimitC: 120 } })

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
  hearths = await checkedRoom(people, 3)
  pieces = await batchOf(people, await approvedVersion(people, 'Sequence', shortContent()), 16)
  heads = await batchOf(people, await approvedVersion(people, 'Heads', headContent()), 2)
}, 120_000)

afterEach(() => setClock(null))

afterAll(async () => {
  setClock(null)
  await closeIngestPool()
  await closeOrm()
  await database.drop()
})

function hearthAt(index: number): SeedHearth {
  const hearth = hearths[index]
  if (hearth === undefined) throw new Error('three hearths')
  return hearth
}

function nextPiece(): string {
  const piece = pieces[next]
  if (piece === undefined) throw new Error('enough pieces')
  next += 1
  return piece.id
}

const toaster = () => people.toaster.actor

/** Marks of a firing by hand, minutes after its start; the clock goes along. */
function handsOf(firingId: string, startMs: number) {
  return {
    at: (minutes: number) => new Date(startMs + minutes * minute).toISOString(),
    async mark(minutes: number, what: Partial<Parameters<typeof addMark>[1]>) {
      setClock(() => startMs + minutes * minute)
      return addMark(toaster(), {
        firingId,
        id: randomUUID(),
        kind: 'note',
        words: '',
        at: this.at(minutes),
        ...what,
      })
    },
    async finish(minutes: number) {
      setClock(() => startMs + minutes * minute)
      return finishFiring(toaster(), {
        id: firingId,
        at: this.at(minutes),
        colour: null,
        smell: null,
        outsideTempC: null,
        remarks: '',
      })
    },
  }
}

/** Each firing begins an hour after the one before, so that none stands in another's way. */
let clockMs = Date.now() - 40 * 60 * minute

function anHourLater(): number {
  clockMs += 60 * minute
  return clockMs
}

async function startedNow(hearthIndex: number, startMs = anHourLater()) {
  setClock(() => startMs)
  const firing = await startOn(people, nextPiece(), hearthAt(hearthIndex).id)
  return { firing, hands: handsOf(firing.id, startMs), startMs }
}

describe('a step that was left out or short', () => {
  it('is found with its minutes, keeps the reason that is given for it, and loses nothing by having none', async () => {
    const { firing, hands } = await startedNow(0)
    await hands.mark(1, { kind: 'phase', phase: 'bending' })
    await hands.mark(2, { kind: 'pull' })
    await hands.mark(2.5, { kind: 'phase', phase: 'toasting' })
    await hands.mark(5, { kind: 'stage', stagePosition: 1 })
    await hands.mark(8, { kind: 'stage', stagePosition: 2 })
    await hands.mark(11, { kind: 'phase', phase: 'resting' })
    await hands.mark(11.2, { kind: 'reason', step: 'bend', words: 'Wood gave easily' })
    await hands.mark(11.3, { kind: 'reason', step: 'stage', stagePosition: 1, words: 'Fire too hot' })
    const finished = await hands.finish(11.5)
    const steps = shortStepsOf(finished)
    expect(steps.map((step) => [shortStepWords(step), step.reason])).toEqual([
      ['Preheat was 1:00 of 2 min', null],
      ['The pull was 1:00 of 2 min', 'Wood gave easily'],
      ['Warm was 2:30 of 6 min', 'Fire too hot'],
      ['Rest was 0:30 of 2 min', null],
    ])
    // Afterwards still, and the newest holds.
    await hands.mark(20, { kind: 'reason', step: 'preheat', words: 'Staves hot already' })
    await hands.mark(21, { kind: 'reason', step: 'preheat', words: 'Second firing' })
    const later = await getFiring(people.masterCooper.actor, { id: firing.id })
    expect(shortStepsOf(later)[0]?.reason).toBe('Second firing')
  })

  it('is a bend that is left out, and none at all when each had its time', async () => {
    const left = await startedNow(0)
    await left.hands.mark(2, { kind: 'phase', phase: 'toasting' })
    const skipped = shortStepsOf(await getFiring(toaster(), { id: left.firing.id }))
    expect(skipped).toMatchObject([{ step: 'bend', isSkipped: true, askedMinutes: 2 }])
    await abandonFiring(toaster(), { id: left.firing.id, reason: 'the test is over' })
    const whole = await startedNow(0)
    await whole.hands.mark(2, { kind: 'phase', phase: 'bending' })
    await whole.hands.mark(4, { kind: 'pull' })
    await whole.hands.mark(4, { kind: 'phase', phase: 'toasting' })
    await whole.hands.mark(16, { kind: 'phase', phase: 'resting' })
    expect(shortStepsOf(await whole.hands.finish(18))).toEqual([])
  })

  it('asks its step and its words, and a position for a stage alone', async () => {
    const { firing, hands } = await startedNow(0)
    expect((await refusalOf(hands.mark(1, { kind: 'reason', words: 'x' }))).fields).toHaveProperty('step')
    expect((await refusalOf(hands.mark(1, { kind: 'reason', step: 'bend' }))).fields).toHaveProperty('words')
    const placed = hands.mark(1, { kind: 'reason', step: 'bend', stagePosition: 1, words: 'x' })
    expect((await refusalOf(placed)).fields).toHaveProperty('stagePosition')
    const unplaced = hands.mark(1, { kind: 'reason', step: 'stage', words: 'x' })
    expect((await refusalOf(unplaced)).fields).toHaveProperty('stagePosition')
    const unanswered = hands.mark(1, { kind: 'advice', words: 'Hold 3 min longer.' })
    expect((await refusalOf(unanswered)).fields).toHaveProperty('answer')
    const kept = await hands.mark(1, { kind: 'advice', answer: 'not now', words: 'Hold 3 min longer.' })
    expect(kept).toMatchObject({ kind: 'advice', answer: 'not now', words: 'Hold 3 min longer.' })
    await abandonFiring(toaster(), { id: firing.id, reason: 'the test is over' })
  })

  it('without its step is refused by the database', async () => {
    const { firing } = await startedNow(0)
    const insert = (kind: string) =>
      forkEm().then((em) =>
        queryRows(
          em,
          `insert into marks (id, firing_id, kind, at, recorded_at, account_id, words) values (?, ?, ?, now(), now(), ?, 'x')`,
          [randomUUID(), firing.id, kind, people.toaster.accountId],
        ),
      )
    await expect(insert('reason')).rejects.toThrow(/marks_reason_given/)
    await expect(insert('advice')).rejects.toThrow(/marks_advice_answered/)
    await expect(insert('move')).rejects.toThrow(/marks_move_given/)
    await abandonFiring(toaster(), { id: firing.id, reason: 'the test is over' })
  })
})

describe('a rose that changes its hearth', () => {
  it('before the toast takes the new hearth’s probes, and is scored by those that read the toast', async () => {
    const { firing, hands, startMs } = await startedNow(0)
    await hands.mark(2, { kind: 'phase', phase: 'bending' })
    setClock(() => startMs + 4.5 * minute)
    const moved = await moveFiring(toaster(), { id: firing.id, hearthId: hearthAt(1).id })
    expect(moved.hearthNumber).toBe(2)
    const leads = moved.probes.filter((probe) => probe.role === 'lead')
    expect(leads.map((probe) => probe.probeId)).toEqual([
      hearthAt(0).probeIds.lead,
      hearthAt(1).probeIds.lead,
    ])
    expect(leads[0]?.untilAt).toBe(leads[1]?.fromAt)
    expect(moved.marks.at(-1)?.words).toContain('hearth 1 to hearth 2; lead Bilge A to Bilge A')
    await hands.mark(5, { kind: 'phase', phase: 'toasting' })
    const { gateway, probeIds } = hearthAt(1)
    const readings = Array.from({ length: 120 }, (_, i) => ({
      seq: (gateway.nextSeq += 1),
      probeId: probeIds.lead,
      at: new Date(startMs + 5 * minute + i * 6_000).toISOString(),
      tempC: 60 + i,
    }))
    setClock(() => startMs + 17 * minute)
    await storeReadings(gateway.identity, { bootId: randomUUID(), sentAt: hands.at(17), readings })
    await hands.mark(17, { kind: 'phase', phase: 'resting' })
    await hands.finish(19)
    const whole = await getFiring(toaster(), { id: firing.id })
    const input = scoreInputOf(whole, await firingReadings(await forkEm(), firing.id), defaultSiteRules)
    if (input === null) throw new Error('a toast')
    // The lead of before the toast is neither a swap of it nor where its errors come from.
    expect(input.firing.leadSwaps).toEqual([])
    expect(evaluate(input).incompleteReasons).not.toContain(
      'The lead probe was replaced by one at another place.',
    )
    const audit = await queryRows<{ detail: object }>(
      await forkEm(),
      `select detail from audit_entries where action = 'firing.moved' and subject_id = ?`,
      [firing.id],
    )
    expect(audit).toMatchObject([{ detail: { from: 1, to: 2 } }])
  })

  it('goes to no hearth that is taken, nor to the one where it stands, nor once it toasts', async () => {
    const one = await startedNow(0)
    const other = await startedNow(1, one.startMs)
    setClock(() => other.startMs + minute)
    const taken = await refusalOf(moveFiring(toaster(), { id: one.firing.id, hearthId: hearthAt(1).id }))
    expect(taken.fields['hearthId']).toContain('stands on this hearth already')
    const same = await refusalOf(moveFiring(toaster(), { id: one.firing.id, hearthId: hearthAt(0).id }))
    expect(same).toMatchObject({ kind: 'conflict', detail: expect.stringContaining('hearth 1 already') })
    await one.hands.mark(2, { kind: 'phase', phase: 'toasting' })
    const late = await refusalOf(moveFiring(toaster(), { id: one.firing.id, hearthId: hearthAt(2).id }))
    expect(late).toMatchObject({ kind: 'conflict', detail: expect.stringContaining('stays on its hearth') })
    const insert = queryRows(
      await forkEm(),
      `with ended as (update firing_placements set until_at = now() where firing_id = ? returning firing_id)
       insert into firing_placements (firing_id, hearth_id, from_at) select firing_id, ?, now() + interval '1 hour' from ended`,
      [one.firing.id, hearthAt(2).id],
    )
    await expect(insert).rejects.toThrow(/toasts stays on its hearth/)
    setClock(() => one.startMs + 5 * minute)
    for (const { firing } of [one, other]) {
      await abandonFiring(toaster(), { id: firing.id, reason: 'the test is over' })
    }
  })
})

/** Plays a piece whole on a hearth, so many hours ago, seals and scores it. */
async function played(
  pieceId: string,
  hoursAgo: number,
  content = shortContent(),
  seed = 90,
): Promise<string> {
  const hearth = hearthAt(2)
  const { firing } = await playFiring({
    pieceId,
    hearthId: hearth.id,
    toaster: toaster(),
    startAt: new Date(Date.now() - hoursAgo * 60 * minute),
    content,
    gateway: hearth.gateway,
    probeIds: hearth.probeIds,
    engine: { seed, moisturePercent: 20 },
    finish: { colour: 'chestnut', smell: 'bread', outsideTempC: 61, remarks: '' },
  })
  setClock(null)
  await sealFiring(firing.id)
  await scoreFiring({ kind: 'system', name: 'sealing' }, { id: firing.id })
  return firing.id
}

describe('a piece', () => {
  it('that is fired again has two firings with a score each, and a sum that says it is one', async () => {
    const pieceId = nextPiece()
    await played(pieceId, 30)
    const again = await listPieces(toaster(), { show: 'again', limit: 50 })
    expect(again.items.find((piece) => piece.id === pieceId)).toMatchObject({
      firedCount: 1,
      isWaiting: false,
    })
    expect(
      (await listPieces(toaster(), { show: 'waiting', limit: 50 })).items.map((piece) => piece.id),
    ).not.toContain(pieceId)
    await played(pieceId, 29, shortContent(), 91)
    const { items } = await listFirings(people.masterCooper.actor, { pieceId, state: 'all', limit: 10 })
    expect(items).toHaveLength(2)
    const doses = items.map((firing) => firing.score?.doseMinutes ?? 0)
    expect(Math.min(...doses)).toBeGreaterThan(0)
    expect(summedDose(items)).toMatchObject({ count: 2, missingCount: 0 })
    expect(summedDose(items)?.doseMin).toBeCloseTo(
      doses.reduce((a, b) => a + b, 0),
      9,
    )
    expect(summedDose(items.slice(0, 1))).toBeNull()
  })

  it('that is a head is offered, fired without a bend and scored as a piece of its own', async () => {
    const head = heads[0]
    if (head === undefined) throw new Error('a head')
    const queue = await listPieces(toaster(), { show: 'waiting', limit: 200 })
    expect(queue.items.find((piece) => piece.id === head.id)).toMatchObject({ kind: 'head' })
    const startMs = anHourLater()
    setClock(() => startMs)
    const firing = await startOn(people, head.id, hearthAt(0).id)
    const hands = handsOf(firing.id, startMs)
    await hands.mark(2, { kind: 'phase', phase: 'toasting' })
    await hands.mark(14, { kind: 'phase', phase: 'resting' })
    const finished = await hands.finish(16)
    expect(finished).toMatchObject({ state: 'finished', piece: { kind: 'head' } })
    expect(shortStepsOf(finished)).toEqual([])
  })
})

describe('what the last firings tell the next', () => {
  it('is silent with fewer than five, then says the lot’s common deviation with its n', async () => {
    const ids: string[] = []
    // A fire that is late by the same few minutes each time: a damp, slow one of the same engine.
    const slow = { skill: 0.2, moisturePercent: 30 }
    for (let i = 0; i < 5; i += 1) {
      const hearth = hearthAt(2)
      const { firing } = await playFiring({
        pieceId: nextPiece(),
        hearthId: hearth.id,
        toaster: toaster(),
        startAt: new Date(Date.now() - (20 - i) * 60 * minute),
        content: shortContent(),
        gateway: hearth.gateway,
        probeIds: hearth.probeIds,
        engine: { seed: 100 + i, ...slow },
        finish: { colour: '', smell: '', outsideTempC: 60, remarks: '' },
      })
      setClock(null)
      await sealFiring(firing.id)
      await scoreFiring({ kind: 'system', name: 'sealing' }, { id: firing.id })
      ids.push(firing.id)
    }
    expect(ids).toHaveLength(5)
    const { line } = await getNextPieceLine(toaster(), { id: pieces[15]?.id ?? '' })
    if (line !== null) {
      expect(line.n).toBeGreaterThanOrEqual(5)
      expect(line.low * line.high).toBeGreaterThan(0)
      expect(nextPieceWords(line, 'C')).toMatch(/^Last \d+ of this (lot|recipe)/)
    }
    // Of another recipe nothing is known.
    expect(await getNextPieceLine(toaster(), { id: heads[1]?.id ?? '' })).toEqual({ line: null })
    const outcomes = await queryRows<{ n: number }>(
      await forkEm(),
      'select count(*)::int as n from forecast_outcomes',
    )
    expect(outcomes[0]?.n ?? 0).toBeGreaterThan(0)
    const { record } = await getForecastRecord(toaster())
    if (record !== null) expect(record.rightCount).toBeLessThanOrEqual(record.n)
  })

  it('is worded with its range in the reader’s unit', () => {
    const line = {
      what: 'minutes to temperature' as const,
      n: 12,
      value: 4,
      low: 2,
      high: 6,
      tempC: 150,
      isSameLot: true,
      isSameFirst: true,
      isFirstOfDay: true,
    }
    expect(nextPieceWords(line, 'C')).toBe(
      'Last 12 of this lot, first fire: 4 min slow to 150\u00a0°C (2 to 6); feed sooner.',
    )
    expect(nextPieceWords({ ...line, value: -4, low: -6, high: -2, isSameFirst: false }, 'F')).toBe(
      'Last 12 of this lot: 4 min fast to 302\u00a0°F (2 to 6); feed later.',
    )
  })
})

describe('the room’s picture', () => {
  it('is the plan alone before the toast, and curve and wood of the readings after', async () => {
    const { firing } = await startedNow(0)
    const before = await getRoomPicture(toaster(), { id: firing.id })
    expect(before.sketch).toMatchObject({ timeS: [], wood: null })
    expect(before.sketch?.band.length).toBeGreaterThan(3)
    const fired = (await listFirings(people.masterCooper.actor, { state: 'finished', limit: 1 })).items[0]
    const after = await getRoomPicture(people.masterCooper.actor, { id: fired?.id ?? '' })
    expect(after.sketch?.timeS.length).toBeGreaterThan(20)
    expect(after.sketch?.wood).not.toBeNull()
    await abandonFiring(toaster(), { id: firing.id, reason: 'the test is over' })
  })
})
