import { afterAll, afterEach, beforeAll, expect, it } from 'vitest'
import { acknowledgeAlarm } from '@/lib/alarms/acknowledge-alarm'
import { readFiringAlarms } from '@/lib/alarms/read-firing-alarms'
import { shelveAlarm } from '@/lib/alarms/shelve-alarm'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { scoreInputOf } from '@/lib/firings/score-input'
import { finishFiring } from '@/lib/firings/finish-firing'
import { readFiring } from '@/lib/firings/read-firing'
import { firingReadings } from '@/lib/ingest/firing-readings'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { storeReadings } from '@/lib/ingest/store-readings'
import { firingJoinedSchema, roomStateSchema } from '@/lib/live/events'
import type { FiringState, LivePoint } from '@/lib/live/events'
import type { Hub } from '@/lib/live/hub'
import { createHub } from '@/lib/live/hub'
import { setClock } from '@/lib/runtime'
import { equivalentMinutes } from '@/lib/science/heat-dose'
import { defaultSiteRules } from '@/lib/science/site-rules'
import { emfMv } from '@/lib/science/thermocouple'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import type { Fire } from '@/tests/support/fire'
import { makeFire, woodTempC } from '@/tests/support/fire'
import type { TestPeople } from '@/tests/support/people'
import { createPeople } from '@/tests/support/people'

let database: TestDatabase
let people: TestPeople
const hubs: Hub[] = []
let clockMs = 0

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

async function startHub(): Promise<Hub> {
  const hub = createHub({ toFiring: () => {}, toRoom: () => {} }, { isSelfWound: false })
  hubs.push(hub)
  await hub.start()
  return hub
}

/** A toast 500 s old, whose readings so far are there. */
async function fireAt500(fromS = 440): Promise<Fire> {
  const toastMs = Math.floor(Date.now() / 1000) * 1000 - 500_000
  clockMs = toastMs + 500_000
  setClock(() => clockMs)
  const fire = await makeFire(people, toastMs)
  await fire.send(fire.readings(fromS, 500))
  return fire
}

/** One second on: its readings with the lead at a temperature (its own by default), then a tick. */
async function second(fire: Fire, hub: Hub, leadC: number | null = null, isSent = true): Promise<void> {
  const s = (clockMs - fire.toastMs) / 1000
  clockMs += 1_000
  const readings = fire.readings(s, s + 1).map((reading) => {
    if (leadC === null || reading.probeId !== fire.lead.id) return reading
    return { ...reading, emf: { ...reading.emf, microvolts: 1000 * (emfMv('K', leadC) - emfMv('K', 24.5)) } }
  })
  if (isSent) await fire.send(readings)
  hub.tick()
}

async function seconds(count: number, fire: Fire, hub: Hub, leadC: number | null = null, isSent = true) {
  for (let i = 0; i < count; i += 1) await second(fire, hub, leadC, isSent)
  await hub.settled()
}

async function stateOf(hub: Hub, fire: Fire): Promise<FiringState> {
  const joined = await hub.join({ firingId: fire.firing.id, epoch: null, lastIndex: -1 }, () => {})
  return firingJoinedSchema.parse(joined).state
}

async function movesOf(fire: Fire, kind: string): Promise<string[]> {
  const rows = await queryRows<{ from_state: string; to_state: string }>(
    await forkEm(),
    'select from_state, to_state from alarm_events where firing_id = ? and kind = ? order by id',
    [fire.firing.id, kind],
  )
  return rows.map((row) => `${row.from_state} > ${row.to_state}`)
}

const came = 'normal > unacknowledged'
const hotC = 217

it('wood over its maximum is an alarm after 5 s, is written down, and goes to the room as the gravest', async () => {
  const fire = await fireAt500()
  const hub = await startHub()
  // Climbing there by itself, not in one step, which no wood can.
  for (let leadC = 150; leadC < hotC; leadC += 20) await second(fire, hub, leadC)
  await seconds(4, fire, hub, hotC)
  expect((await stateOf(hub, fire)).alarms.map((alarm) => alarm.kind)).not.toContain('wood maximum')
  await seconds(3, fire, hub, hotC)
  const state = await stateOf(hub, fire)
  expect(state.alarms[0]).toMatchObject({
    kind: 'wood maximum',
    level: 'red',
    state: 'unacknowledged',
    mayAcknowledge: true,
    words: 'Wood at 2 mm is over 215 °C. Lid off, lower the fire.',
  })
  expect(state.alarm).toMatchObject({ level: 'red' })
  expect(await movesOf(fire, 'wood maximum')).toEqual([came])
  const [room] = roomStateSchema
    .parse(hub.roomState())
    .firings.filter((one) => one.firingId === fire.firing.id)
  expect(room?.alarm?.level).toBe('red')
  expect(Reflect.has(room ?? {}, 'alarms')).toBe(false)
})

it('Seen is on the screen with the next tick, outlives a restart, and nothing is written twice', async () => {
  const fire = await fireAt500()
  const hub = await startHub()
  for (let leadC = 150; leadC < hotC; leadC += 20) await second(fire, hub, leadC)
  await seconds(7, fire, hub, hotC)
  const [alarm] = (await stateOf(hub, fire)).alarms
  // Killed before anybody saw it: the same alarm is there again.
  hub.stop()
  const second1 = await startHub()
  await seconds(1, fire, second1, hotC)
  expect((await stateOf(second1, fire)).alarms[0]).toMatchObject({ id: alarm?.id, state: 'unacknowledged' })
  await acknowledgeAlarm(people.toaster.actor, { id: alarm?.id ?? '' })
  await second1.settled()
  second1.tick()
  expect((await stateOf(second1, fire)).alarms[0]).toMatchObject({
    state: 'acknowledged',
    mayAcknowledge: false,
  })
  second1.stop()
  const third = await startHub()
  await seconds(2, fire, third, hotC)
  expect((await stateOf(third, fire)).alarms[0]).toMatchObject({ id: alarm?.id, state: 'acknowledged' })
  // Well inside for the off-delay, and with hands that saw it: over.
  await seconds(18, fire, third, 205)
  expect((await stateOf(third, fire)).alarms.map((one) => one.kind)).not.toContain('wood maximum')
  expect(await movesOf(fire, 'wood maximum')).toEqual([
    came,
    'unacknowledged > acknowledged',
    'acknowledged > normal',
  ])
})

it('one that is over waits to be seen, also over a restart', async () => {
  const fire = await fireAt500()
  const hub = await startHub()
  for (let leadC = 150; leadC < hotC; leadC += 20) await second(fire, hub, leadC)
  await seconds(7, fire, hub, hotC)
  await seconds(17, fire, hub, 205)
  hub.stop()
  const next = await startHub()
  await seconds(2, fire, next, 205)
  const wood = (await stateOf(next, fire)).alarms.find((alarm) => alarm.kind === 'wood maximum')
  expect(wood).toMatchObject({
    state: 'returned unacknowledged',
    words: 'Wood at 2 mm is below 215 °C again.',
  })
  await acknowledgeAlarm(people.toaster.actor, { id: wood?.id ?? '' })
  await next.settled()
  expect((await stateOf(next, fire)).alarms.map((alarm) => alarm.kind)).not.toContain('wood maximum')
})

it('a shelved alarm is not the room’s, and comes back by itself when its time is over', async () => {
  const fire = await fireAt500()
  const hub = await startHub()
  for (let leadC = 150; leadC < hotC; leadC += 20) await second(fire, hub, leadC)
  await seconds(7, fire, hub, hotC)
  const id = (await stateOf(hub, fire)).alarms.find((alarm) => alarm.kind === 'wood maximum')?.id ?? ''
  await shelveAlarm(people.toaster.actor, { id, minutes: 1, reason: 'The probe is wrong' })
  await hub.settled()
  const shelved = await stateOf(hub, fire)
  expect(shelved.alarms.find((alarm) => alarm.id === id)).toMatchObject({
    state: 'shelved',
    mayAcknowledge: false,
  })
  expect(shelved.alarm?.level).not.toBe('red')
  await seconds(57, fire, hub, hotC)
  expect((await stateOf(hub, fire)).alarms.find((alarm) => alarm.id === id)?.state).toBe('shelved')
  await seconds(5, fire, hub, hotC)
  expect((await stateOf(hub, fire)).alarms.find((alarm) => alarm.id === id)?.state).toBe('unacknowledged')
})

it('a move that a hand has overtaken is dropped, and what the table says holds', async () => {
  const fire = await fireAt500()
  const hub = await startHub()
  for (let leadC = 150; leadC < hotC; leadC += 20) await second(fire, hub, leadC)
  await seconds(7, fire, hub, hotC)
  // Another process' hand: this hub is not told.
  await queryRows(
    await forkEm(),
    `insert into alarm_events (firing_id, kind, subject, occurrence_id, from_state, to_state, at, account_id, words)
     select firing_id, kind, subject, occurrence_id, to_state, 'acknowledged', at, ?, words from alarm_events
      where firing_id = ? and kind = 'wood maximum'`,
    [people.toaster.accountId, fire.firing.id],
  )
  await seconds(20, fire, hub, 205)
  expect(await movesOf(fire, 'wood maximum')).toEqual([
    came,
    'unacknowledged > acknowledged',
    'acknowledged > normal',
  ])
  expect((await stateOf(hub, fire)).alarms.map((alarm) => alarm.kind)).not.toContain('wood maximum')
})

it('a lost gateway is one alarm that says so, in place of a missing reading; and it comes back', async () => {
  const fire = await fireAt500()
  const hub = await startHub()
  await seconds(3, fire, hub)
  await seconds(8, fire, hub, null, false)
  const lost = await stateOf(hub, fire)
  expect(lost.alarms.map((alarm) => alarm.kind)).toEqual(['gateway lost'])
  expect(lost.alarms[0]?.words).toContain(fire.gateway.name)
  expect(lost.troubles.map((trouble) => trouble.kind)).toEqual(['gateway lost'])
  await seconds(4, fire, hub, null, false)
  expect(await movesOf(fire, 'no reading')).toEqual(['normal > suppressed'])
  await seconds(18, fire, hub)
  expect((await stateOf(hub, fire)).alarms).toMatchObject([
    { kind: 'gateway lost', state: 'returned unacknowledged', words: 'The gateway is back.' },
  ])
})

it('after a start nobody is called lost before the gateways could come back', async () => {
  const fire = await fireAt500()
  const hub = await startHub()
  await seconds(18, fire, hub, null, false)
  expect((await stateOf(hub, fire)).alarms.map((alarm) => alarm.kind)).not.toContain('gateway lost')
  await seconds(5, fire, hub, null, false)
  expect((await stateOf(hub, fire)).alarms.map((alarm) => alarm.kind)).toContain('gateway lost')
})

it('a gateway whose clock differs is said, and its times are put right', async () => {
  const fire = await fireAt500()
  const hub = await startHub()
  const fastMs = 90_000
  const readings = fire.readings(500, 502).map((reading) => ({
    ...reading,
    at: new Date(Date.parse(reading.at) + fastMs).toISOString(),
  }))
  clockMs += 2_000
  await storeReadings(fire.gateway, {
    bootId: '5a1f8c1e-1111-4a7e-9c52-2a1f6f1d0009',
    sentAt: new Date(clockMs + fastMs).toISOString(),
    readings,
  })
  hub.tick()
  const state = await stateOf(hub, fire)
  expect(state.troubles).toMatchObject([{ kind: 'clock differs' }])
  expect(state.troubles[0]?.words).toContain('90 s fast')
  expect(state.signals[0]).toMatchObject({ condition: 'live' })
})

it('a probe that is stuck is no reading from where it began, on the screen and in the score alike', async () => {
  const fire = await fireAt500(-10)
  const hub = await startHub()
  const stuckC = woodTempC(500)
  // The opposite probe climbs 10 °C a minute meanwhile: the witness where no coals are read.
  await seconds(100, fire, hub, stuckC)
  const state = await stateOf(hub, fire)
  expect(state.signals[0]).toMatchObject({
    condition: 'no reading',
    cause: 'stuck: it stands still while the coals move',
    tempC: null,
  })
  expect(state.alarms.map((alarm) => alarm.kind)).toContain('no reading')
  await seconds(30, fire, hub)
  const joined = firingJoinedSchema.parse(
    await hub.join({ firingId: fire.firing.id, epoch: null, lastIndex: -1 }, () => {}),
  )
  const held = new Map<number, number | null>()
  for (const [, role, atMs, tempC] of joined.points satisfies LivePoint[]) {
    if (role === 'lead') held.set(atMs, tempC)
  }
  const em = await forkEm()
  const firing = await readFiring(em, fire.firing.id)
  const input = scoreInputOf(firing, await firingReadings(em, fire.firing.id), defaultSiteRules)
  if (input === null) throw new Error('there is nothing to score')
  const stored = Array.from(input.lead.timeS, (timeS, i) => ({ timeS, tempC: input.lead.tempC[i] ?? NaN }))
  const missing = stored.filter((point) => Number.isNaN(point.tempC))
  expect(missing.length).toBeGreaterThan(400)
  for (const { timeS, tempC } of stored) {
    expect(held.get(fire.toastMs + Math.round(timeS * 1000)) === null).toBe(Number.isNaN(tempC))
  }
  const points = stored.filter((point) => !Number.isNaN(point.tempC) && point.timeS >= 0)
  expect(joined.state.dose.minutes).toBe(equivalentMinutes(defaultSiteRules.dose, points))
})

it('one reading that jumps is passed over; a loose plug is no reading', async () => {
  const fire = await fireAt500()
  const hub = await startHub()
  await seconds(2, fire, hub)
  const s = (clockMs - fire.toastMs) / 1000
  clockMs += 1_000
  const spiked = fire
    .readings(s, s + 1)
    .map((reading, i) =>
      i === 8 ? { ...reading, emf: { ...reading.emf, microvolts: reading.emf.microvolts + 6_000 } } : reading,
    )
  await fire.send(spiked)
  hub.tick()
  expect((await stateOf(hub, fire)).signals[0]).toMatchObject({ condition: 'live' })
  for (let i = 0; i < 8; i += 1) {
    const from = (clockMs - fire.toastMs) / 1000
    clockMs += 1_000
    await fire.send(
      fire.readings(from, from + 1).map((reading, k) => ({
        ...reading,
        emf: { ...reading.emf, microvolts: reading.emf.microvolts + 3_000 + 2_500 * (k % 3) },
      })),
    )
    hub.tick()
  }
  await hub.settled()
  const state = await stateOf(hub, fire)
  expect(state.signals[0]).toMatchObject({ condition: 'no reading', cause: 'jumps faster than wood can' })
  expect(state.alarms.map((alarm) => alarm.kind)).toContain('no reading')
})

it('a firing that is over has no alarms, in the table either', async () => {
  const fire = await fireAt500()
  const hub = await startHub()
  for (let leadC = 150; leadC < hotC; leadC += 20) await second(fire, hub, leadC)
  await seconds(7, fire, hub, hotC)
  await finishFiring(people.toaster.actor, {
    id: fire.firing.id,
    at: new Date(clockMs).toISOString(),
    colour: null,
    smell: null,
    outsideTempC: null,
    remarks: '',
  })
  await seconds(10, fire, hub, hotC)
  expect((await stateOf(hub, fire)).alarms).toEqual([])
  const alarms = await readFiringAlarms(await forkEm(), fire.firing.id)
  expect(alarms.map((alarm) => alarm.state)).not.toContain('unacknowledged')
})
