import { afterAll, afterEach, beforeAll, expect, it } from 'vitest'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { firingReadings, toReadingSeries } from '@/lib/ingest/firing-readings'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import type { FiringState, LivePoint } from '@/lib/live/events'
import {
  firingJoinedSchema,
  firingReadingsSchema,
  firingStateSchema,
  roomStateSchema,
} from '@/lib/live/events'
import type { Hub } from '@/lib/live/hub'
import { createHub } from '@/lib/live/hub'
import { notifyFiringChanged } from '@/lib/live/notify'
import { setClock } from '@/lib/runtime'
import { fillGaps } from '@/lib/science/gaps'
import { equivalentMinutes } from '@/lib/science/heat-dose'
import { defaultSiteRules } from '@/lib/science/site-rules'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import type { Fire } from '@/tests/support/fire'
import { makeFire, woodTempC } from '@/tests/support/fire'
import type { TestPeople } from '@/tests/support/people'
import { createPeople } from '@/tests/support/people'
import { endTestFiring } from '@/tests/support/room'

let database: TestDatabase
let people: TestPeople
const hubs: Hub[] = []

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
})

afterEach(() => {
  setClock(null)
  for (const hub of hubs.splice(0)) hub.stop()
})

afterAll(async () => {
  await closeIngestPool()
  await closeOrm()
  await database.drop()
})

type Notebook = { hub: Hub; heard: { event: string; payload: object }[] }

/** A hub that ticks only when it is told to. */
async function startHub(): Promise<Notebook> {
  const heard: Notebook['heard'] = []
  const hub = createHub(
    {
      toFiring: (_firingId, event, payload) => heard.push({ event, payload }),
      toRoom: (event, payload) => heard.push({ event, payload }),
    },
    { isSelfWound: false },
  )
  hubs.push(hub)
  await hub.start()
  return { hub, heard }
}

async function joined(hub: Hub, fire: Fire) {
  hub.tick()
  return firingJoinedSchema.parse(
    await hub.join({ firingId: fire.firing.id, epoch: null, lastIndex: -1 }, () => {}),
  )
}

async function freshFire(ageS: number): Promise<Fire> {
  return makeFire(people, Math.floor(Date.now() / 1000) * 1000 - ageS * 1000)
}

it('the hub says wood temperature, plan, climb, dose, stage, next action, forecast and stave of a toast', async () => {
  const fire = await freshFire(600)
  const { hub } = await startHub()
  setClock(() => fire.toastMs + 600_000)
  await fire.send(fire.readings(-60, 600))
  const { state, points, staveColumns } = await joined(hub, fire)
  expect(points).toHaveLength(660 * 5 * 2)
  expect(state.woodTempC).toBeCloseTo(woodTempC(599.8), 1)
  expect(state.planTempC).toBe(160)
  expect(state.toastS).toBe(600)
  expect(state.climbCPerMin).toBeGreaterThan(0)
  expect(state.stage).toMatchObject({ position: 1, name: 'Climb', elapsedS: 600, leftS: 120 })
  expect(state.next).toEqual({ words: 'then lid on', dueInS: 120 })
  expect(state.signals.map((signal) => [signal.role, signal.condition])).toEqual([
    ['lead', 'live'],
    ['opposite', 'live'],
  ])
  expect(state.dose.minutes).toBeGreaterThan(0)
  expect(state.dose.planMinutesNow).toBeGreaterThan(0)
  expect(state.dose.goodToPercent).toBeCloseTo(10.9, 1)
  expect(state.dose.isIncomplete).toBe(false)
  expect(state.forecast?.sentence).toMatch(/^On/)
  expect(state.stave?.toastDepthMm).not.toBeUndefined()
  expect(staveColumns.length).toBeGreaterThan(55)
  expect(state.alarm).toBeNull()
  roomStateSchema.parse(hub.roomState())
})

it('the live dose is bit for bit the integral over the same readings, and agrees with the joined record', async () => {
  const fire = await freshFire(900)
  const { hub } = await startHub()
  setClock(() => fire.toastMs + 900_000)
  await fire.send(fire.readings(0, 900))
  const { state } = await joined(hub, fire)
  const em = await forkEm()
  const lead = (await firingReadings(em, fire.firing.id)).series.find((series) => series.role === 'lead')
  if (lead === undefined) throw new Error('no lead probe')
  const series = toReadingSeries(lead, fire.toastMs)
  const points = Array.from(series.timeS, (timeS, i) => ({ timeS, tempC: series.tempC[i] ?? NaN }))
  expect(state.dose.minutes).toBe(equivalentMinutes(defaultSiteRules.dose, points))
  const filled = fillGaps(series, { fromS: 0, toS: points.at(-1)?.timeS ?? 0 }, defaultSiteRules.gaps)
  if (filled === null) throw new Error('nothing read')
  const joinedPoints = Array.from(filled.timeS, (timeS, i) => ({ timeS, tempC: filled.tempC[i] ?? NaN }))
  const scored = equivalentMinutes(defaultSiteRules.dose, joinedPoints)
  expect(Math.abs(state.dose.minutes / scored - 1)).toBeLessThan(1e-9)
})

it('a hub started anew in a firing goes on with the same dose, whatever order the readings came in', async () => {
  const fire = await freshFire(800)
  const first = await startHub()
  setClock(() => fire.toastMs + 800_000)
  const all = fire.readings(-30, 800)
  // Every third message late, and one in reverse: the set is the same.
  const parts = Array.from({ length: 30 }, (_, i) =>
    all.slice((i * all.length) / 30, ((i + 1) * all.length) / 30),
  )
  for (const [i, part] of parts.entries())
    if (i % 3 !== 0) await fire.send(i % 2 === 0 ? part : part.toReversed())
  for (const [i, part] of parts.entries()) if (i % 3 === 0) await fire.send(part)
  const before = (await joined(first.hub, fire)).state.dose.minutes
  first.hub.stop()
  const second = await startHub()
  const after = await joined(second.hub, fire)
  expect(after.state.dose.minutes).toBe(before)
  expect(after.isFresh).toBe(true)
  expect(after.points).toHaveLength(all.length)
})

it('points go out coalesced once a tick, and state once a second or when something changes', async () => {
  const fire = await freshFire(100)
  const { hub, heard } = await startHub()
  let clockMs = fire.toastMs + 100_000
  setClock(() => clockMs)
  await fire.send(fire.readings(98, 100))
  hub.tick()
  heard.length = 0
  for (let tick = 0; tick < 10; tick += 1) {
    clockMs += 200
    await fire.send(fire.readings(100 + tick * 0.2, 100.2 + tick * 0.2))
    hub.tick()
  }
  const mine = heard.filter(({ payload }) => Reflect.get(payload, 'firingId') === fire.firing.id)
  const readings = mine.filter(({ event }) => event === 'firing:readings')
  expect(readings.length).toBeLessThanOrEqual(10)
  expect(readings.flatMap(({ payload }) => Reflect.get(payload, 'points'))).toHaveLength(20)
  expect(mine.filter(({ event }) => event === 'firing:state')).toHaveLength(2)
  for (const { event, payload } of mine) if (event === 'firing:state') firingStateSchema.parse(payload)
  // Silence is said once it is stale, without waiting for the next whole second, and never later than 3 s.
  clockMs += 2_800
  heard.length = 0
  hub.tick()
  const stale = heard.find(
    ({ event, payload }) => event === 'firing:state' && Reflect.get(payload, 'firingId') === fire.firing.id,
  )
  const state = firingStateSchema.parse(stale?.payload)
  expect(state.signals[0]).toMatchObject({ condition: 'stale' })
  expect(state.woodTempC).toBeNull()
})

it('a broken probe has no reading at once, with its cause; its alarm comes after 5 s and says what to do', async () => {
  const fire = await freshFire(500)
  const { hub } = await startHub()
  let clockMs = fire.toastMs + 500_000
  setClock(() => clockMs)
  await fire.send(fire.readings(400, 500))
  hub.tick()
  for (let s = 500; s < 507; s += 1) {
    clockMs += 1000
    const broken = fire.readings(s, s + 1).map((reading) => ({ ...reading, flag: 'open' as const }))
    await fire.send(broken)
    hub.tick()
    const { state } = await joined(hub, fire)
    expect(state.signals[0]).toMatchObject({ condition: 'no reading', cause: 'open circuit', tempC: null })
    expect(state.woodTempC).toBeNull()
    if (s < 504) expect(state.alarm).toBeNull()
    if (s > 505)
      expect(state.alarm).toMatchObject({
        level: 'amber',
        words: 'Bilge A has no reading. Look at the barrel, then its lead.',
      })
  }
  const { state } = await joined(hub, fire)
  expect(state.forecast?.sentence).toBe('No forecast while Bilge A has no reading.')
})

it('a marked turn-over silences NO READING for 90 s, and the gap still counts', async () => {
  const fire = await freshFire(500)
  const { hub } = await startHub()
  let clockMs = fire.toastMs + 500_000
  setClock(() => clockMs)
  await fire.send(fire.readings(0, 500))
  await queryRows(
    await forkEm(),
    `insert into marks (id, firing_id, kind, at, recorded_at, account_id) values (gen_random_uuid(), ?, 'turn over', ?, ?, ?)`,
    [fire.firing.id, new Date(clockMs), new Date(clockMs), people.toaster.accountId],
  )
  notifyFiringChanged(fire.firing.id, 'mark')
  await hub.settled()
  const alarmAfter = async (untilS: number) => {
    while (clockMs < fire.toastMs + untilS * 1000) {
      // The lead is pulled out; the gateway goes on speaking of it.
      const s = (clockMs - fire.toastMs) / 1000
      clockMs += 1000
      await fire.send(fire.readings(s, s + 1).map((reading) => ({ ...reading, flag: 'open' as const })))
      hub.tick()
    }
    return (await joined(hub, fire)).state
  }
  expect((await alarmAfter(585)).alarm).toBeNull()
  expect((await alarmAfter(600)).alarm?.words).toContain('has no reading')
  expect((await alarmAfter(720)).dose.isIncomplete).toBe(true)
})

it('a changed firing is read again and announced; an ended one is no longer followed', async () => {
  const fire = await freshFire(300)
  const { hub, heard } = await startHub()
  setClock(() => fire.toastMs + 300_000)
  await fire.send(fire.readings(0, 300))
  await endTestFiring(fire.firing.id, new Date(fire.toastMs + 300_000))
  notifyFiringChanged(fire.firing.id, 'finished')
  await hub.settled()
  expect(heard.map(({ event }) => event)).toEqual(expect.arrayContaining(['firing:changed', 'room:changed']))
  expect((await joined(hub, fire)).state.state).toBe('finished')
  expect(hub.roomState().firings.map((firing) => firing.firingId)).not.toContain(fire.firing.id)
})

it('a client that says what it holds gets exactly what it lacks; another epoch gets everything', async () => {
  const fire = await freshFire(100)
  const { hub, heard } = await startHub()
  setClock(() => fire.toastMs + 100_000)
  await fire.send(fire.readings(0, 50))
  hub.tick()
  const first = await joined(hub, fire)
  await fire.send(fire.readings(60, 100))
  await fire.send(fire.readings(50, 60))
  hub.tick()
  const last = first.points.at(-1)?.[0] ?? -1
  const again = await hub.join({ firingId: fire.firing.id, epoch: first.epoch, lastIndex: last }, () => {})
  expect(again.isFresh).toBe(false)
  expect(again.points.map(([index]) => index)).toEqual(Array.from({ length: 500 }, (_, i) => last + 1 + i))
  const sent = heard
    .filter(({ event }) => event === 'firing:readings')
    .flatMap(({ payload }): LivePoint[] => firingReadingsSchema.parse(payload).points)
  expect(sent.filter(([index]) => index > last)).toEqual(again.points)
  const stranger = await hub.join({ firingId: fire.firing.id, epoch: 'gone', lastIndex: last }, () => {})
  expect(stranger.isFresh).toBe(true)
  expect(stranger.points).toHaveLength(1_000)
})

it('a firing that the hub was never told of is found by itself', async () => {
  const { hub } = await startHub()
  const fire = await freshFire(50)
  await fire.send(fire.readings(0, 50))
  await hub.reconcile()
  expect(hub.roomState().firings.map((firing) => firing.firingId)).toContain(fire.firing.id)
  const state: FiringState = (await joined(hub, fire)).state
  expect(state.signals).toHaveLength(2)
})
