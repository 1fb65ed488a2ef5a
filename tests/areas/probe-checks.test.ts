import { randomUUID } from 'node:crypto'
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest'
import type { PieceDto } from '@/lib/batches/schema'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { abandonFiring } from '@/lib/firings/abandon-firing'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { storeReadings } from '@/lib/ingest/store-readings'
import { getProbe } from '@/lib/probes/get-probe'
import { getRecentReadings } from '@/lib/probes/get-recent-readings'
import { listWaterSources } from '@/lib/probes/list-water-sources'
import { recordProbeCheck } from '@/lib/probes/record-probe-check'
import { recordWaterCheck } from '@/lib/probes/record-water-check'
import { saveProbe } from '@/lib/probes/save-probe'
import { setClock } from '@/lib/runtime'
import { boilingPointC, standardPressurePa } from '@/lib/science/steam'
import type { SeedHearth } from '@/simulators/scenarios/seed-room'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import {
  approvedVersion,
  batchOf,
  checkedRoom,
  dayMs,
  refusalOf,
  shortContent,
  startOn,
} from '@/tests/support/firing-room'
import type { TestPeople } from '@/tests/support/people'
import { createPeople, testPassword } from '@/tests/support/people'

let database: TestDatabase
let people: TestPeople
let hearths: SeedHearth[]
let pieces: PieceDto[]

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
  hearths = await checkedRoom(people, 2)
  pieces = await batchOf(people, await approvedVersion(people, 'Checks', shortContent()), 6)
})

afterEach(() => setClock(null))

afterAll(async () => {
  await closeIngestPool()
  await closeOrm()
  await database.drop()
})

function hearth(index = 0): SeedHearth {
  const found = hearths[index]
  if (found === undefined) throw new Error('a hearth')
  return found
}

const override = { password: testPassword, reason: 'the lab is closed' }

/** A minute and a half of readings, once a second, up to `untilMs`. */
async function send(probeId: string, untilMs: number, tempCAt: (i: number) => number): Promise<void> {
  const readings = Array.from({ length: 90 }, (_, i) => ({
    seq: i + 1,
    probeId,
    at: new Date(untilMs - (89 - i) * 1000).toISOString(),
    tempC: tempCAt(i),
  }))
  const { gateway } = hearth(1)
  await storeReadings(gateway.identity, {
    bootId: randomUUID(),
    sentAt: new Date(untilMs).toISOString(),
    readings,
  })
}

describe('a check from the probe’s own readings', () => {
  it('takes their mean once they have settled, with their scatter in its uncertainty', async () => {
    const probeId = hearth(1).probeIds.lead
    const untilMs = Date.now()
    await send(probeId, untilMs, (i) => 0.3 + (i % 2 === 0 ? 0.05 : -0.05))
    setClock(() => untilMs + 2_000)
    const recent = await getRecentReadings(people.toaster.actor, { id: probeId, seconds: 60 })
    expect(recent.tempC.at(-1)).toBeCloseTo(0.25, 6)
    expect(recent.atMs.length).toBeGreaterThan(50)
    await recordProbeCheck(people.toaster.actor, {
      probeId,
      kind: 'ice',
      takenAt: new Date(untilMs).toISOString(),
    })
    const [check] = (await getProbe(people.toaster.actor, { id: probeId })).allChecks
    expect(check).toMatchObject({ kind: 'ice', way: 'live', referenceTempC: 0 })
    expect(check?.measuredTempC).toBeCloseTo(0.3, 6)
    // Sixty readings ±0.05: s = 0.05·√(60/59); 2s and 2·0.01/√12 as squares.
    expect(check?.uncertaintyC).toBeCloseTo(Math.hypot(0.1 * Math.sqrt(60 / 59), 0.02 / Math.sqrt(12)), 6)
    // The site's six months.
    const due = new Date(check?.dueAt ?? 0).getTime() - new Date(check?.checkedAt ?? 0).getTime()
    expect(due / dayMs).toBeGreaterThan(180)
    expect(due / dayMs).toBeLessThan(185)
  })

  it('is refused while they drift, and when they were not taken just now', async () => {
    const probeId = hearth(1).probeIds.opposite
    const untilMs = Date.now()
    await send(probeId, untilMs, (i) => 99 + i * 0.01)
    setClock(() => untilMs + 2_000)
    const take = (takenMs: number) =>
      recordProbeCheck(people.toaster.actor, {
        probeId,
        kind: 'boiling',
        stationPressureHpa: 1005,
        takenAt: new Date(takenMs).toISOString(),
      })
    expect((await refusalOf(take(untilMs))).fields['takenAt']).toMatch(/drifts|scatters/)
    setClock(() => untilMs + 300_000)
    expect((await refusalOf(take(untilMs))).fields['takenAt']).toContain('just now')
  })

  it('and what it reads now are for those who check', async () => {
    const id = hearth(1).probeIds.lead
    for (const person of [people.chemist, people.customer]) {
      const read = getRecentReadings(person.actor, { id, seconds: 60 })
      expect((await refusalOf(read)).kind).toBe('not allowed')
    }
  })
})

describe('a check by hand', () => {
  const probeId = () => hearth(1).probeIds.opposite

  it('at boiling water by altitude carries the weather in its uncertainty', async () => {
    await recordProbeCheck(people.toaster.actor, {
      probeId: probeId(),
      kind: 'boiling',
      altitudeM: 500,
      measuredTempC: 98.1,
    })
    const [check] = (await getProbe(people.toaster.actor, { id: probeId() })).allChecks
    // ISO 2533: 95,460.8 Pa at 500 m; IF97 there 98.31 °C.
    expect(check?.referenceTempC).toBeCloseTo(boilingPointC(standardPressurePa(500) / 100), 9)
    expect(check?.referenceTempC).toBeCloseTo(98.312, 2)
    expect(check?.altitudeM).toBe(500)
    expect(check?.uncertaintyC).toBeGreaterThan(0.85)
  })

  it('at a block asks for the reference and its uncertainty; one 20 °C off is no check', async () => {
    const block = { probeId: probeId(), kind: 'block', measuredTempC: 206 } as const
    const bare = await refusalOf(recordProbeCheck(people.toaster.actor, block))
    expect(Object.keys(bare.fields)).toEqual(['referenceTempC'])
    const named = await refusalOf(recordProbeCheck(people.toaster.actor, { ...block, referenceTempC: 205 }))
    expect(Object.keys(named.fields)).toEqual(['referenceUncertaintyC'])
    const far = { ...block, referenceTempC: 180, referenceUncertaintyC: 0.5 }
    expect((await refusalOf(recordProbeCheck(people.toaster.actor, far))).fields['measuredTempC']).toContain(
      'which probe',
    )
  })
})

describe('a start', () => {
  it('under a lead probe that was never checked at 180 to 230 °C needs a signed override', async () => {
    const { id } = await saveProbe(people.administrator.actor, {
      name: 'New lead',
      gatewayId: hearth().gateway.identity.gatewayId,
      channel: 77,
      thermocoupleType: 'K',
      iecClass: 1,
      serial: '',
      hearthId: null,
      usualRole: 'lead',
      height: 'bilge',
      side: 'A',
      depthMm: 2,
      mounting: 'wedge',
    })
    const start = (index: number, more: object = {}) =>
      startOn(people, pieces[index]?.id ?? '', hearth().id, {
        probes: { lead: id, opposite: null, coals: null },
        ...more,
      })
    expect((await refusalOf(start(0))).detail).toContain('New lead has never been checked')
    const dueAt = new Date(Date.now() + 30 * dayMs).toISOString()
    const check = { probeId: id, uncertaintyC: 0.3, dueAt }
    await recordProbeCheck(people.toaster.actor, { ...check, kind: 'ice', measuredTempC: 0.1 })
    await recordProbeCheck(people.toaster.actor, {
      ...check,
      kind: 'block',
      referenceTempC: 150,
      measuredTempC: 151,
    })
    const refused = await refusalOf(start(0))
    expect(refused).toMatchObject({ kind: 'conflict', fields: { override: expect.any(String) } })
    expect(refused.detail).toContain('never checked at 180 °C to 230 °C')
    const firing = await start(0, { override })
    const [signed] = await queryRows<{ reason: string }>(
      await forkEm(),
      'select reason from signatures where subject_id = ?',
      [firing.id],
    )
    expect(signed?.reason).toContain('where the dose is made')
    await abandonFiring(people.toaster.actor, { id: firing.id, reason: 'the test is over' })
    await recordProbeCheck(people.toaster.actor, {
      ...check,
      kind: 'block',
      referenceTempC: 205,
      measuredTempC: 206,
    })
    const plain = await start(0)
    expect(plain.state).toBe('preheating')
    await abandonFiring(people.toaster.actor, { id: plain.id, reason: 'the test is over' })
  })

  it('on water above the site’s limits needs a signed override; another source that is good does not', async () => {
    await recordWaterCheck(people.toaster.actor, {
      source: 'Well',
      tcaNgPerL: 2.4,
      freeChlorineMgPerL: 0.5,
    })
    const sources = await listWaterSources(people.chemist.actor)
    expect(sources.items.map((one) => [one.source, one.overLimit !== null])).toEqual([
      ['Well', true],
      ['Mains', false],
    ])
    expect(sources.items[0]?.overLimit).toBe(
      'TCA 2.40 ng/L is above 1.50 and free chlorine 0.500 mg/L is above 0.100.',
    )
    const start = (more: object = {}) => startOn(people, pieces[1]?.id ?? '', hearth().id, more)
    expect((await refusalOf(start())).detail).toContain('The water of Well is not to be used')
    expect((await refusalOf(start({ waterSource: 'Rain' }))).fields).toHaveProperty('waterSource')
    const onMains = await start({ waterSource: 'mains' })
    await abandonFiring(people.toaster.actor, { id: onMains.id, reason: 'the test is over' })
    await recordWaterCheck(people.toaster.actor, { source: 'well', tcaNgPerL: 0.2, freeChlorineMgPerL: 0 })
    const onWell = await start()
    await abandonFiring(people.toaster.actor, { id: onWell.id, reason: 'the test is over' })
    const newest = (await listWaterSources(people.chemist.actor)).items
    expect(newest.map((one) => one.source)).toEqual(['well', 'Mains'])
  })
})
