import { randomUUID } from 'node:crypto'
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { storeReadings } from '@/lib/ingest/store-readings'
import { abandonStudy } from '@/lib/probes/abandon-study'
import { addPlacement } from '@/lib/probes/add-placement'
import { adoptStudy } from '@/lib/probes/adopt-study'
import { finishStudy } from '@/lib/probes/finish-study'
import { getStudy } from '@/lib/probes/get-study'
import { listStudies } from '@/lib/probes/list-studies'
import { retireProbe } from '@/lib/probes/retire-probe'
import { startStudy } from '@/lib/probes/start-study'
import { strikePlacement } from '@/lib/probes/strike-placement'
import { smallestHonestTolerance } from '@/lib/recipes/honest-tolerance'
import { setClock } from '@/lib/runtime'
import { getSiteSettings } from '@/lib/site/get-site-settings'
import type { SeedHearth } from '@/simulators/scenarios/seed-room'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import { checkedRoom, refusalOf } from '@/tests/support/firing-room'
import type { TestPeople } from '@/tests/support/people'
import { createPeople, testPassword } from '@/tests/support/people'

let database: TestDatabase
let people: TestPeople
let hearths: SeedHearth[]

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
  hearths = await checkedRoom(people, 2)
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

const signature = { password: testPassword, meaning: 'I placed the probe and read both.' }

async function begun(index = 0) {
  const { lead, opposite } = hearth(index).probeIds
  return startStudy(people.toaster.actor, {
    probeId: lead,
    referenceProbeId: opposite,
    heatWords: 'Test stave on the block, 190 °C',
  })
}

const place = (studyId: string, differenceC: number, id: string = randomUUID()) =>
  addPlacement(people.toaster.actor, {
    studyId,
    id,
    placedTempC: 190 + differenceC,
    referenceTempC: 190,
  })

async function placed(studyId: string, differencesC: readonly number[]) {
  for (const differenceC of differencesC) await place(studyId, differenceC)
}

describe('a study of repeat placements', () => {
  it('finished by signature and adopted becomes the figure that scores and the bench judge by', async () => {
    const study = await begun()
    expect(study).toMatchObject({
      state: 'open',
      place: { height: 'bilge', side: 'A', depthMm: 2, mounting: 'wedge' },
      result: null,
    })
    await placed(study.id, [-1, 1, -1, 1, 0, 0])
    const before = await getSiteSettings(people.masterCooper.actor)
    expect(before.rules.errors).toMatchObject({ sameMountLog10: 0.045, isSameMountAssumed: true })
    const finished = await finishStudy(people.toaster.actor, { id: study.id, ...signature })
    // Σd² = 4 over five degrees of freedom: s = √0.8; half-width 2s; ÷ z of 34 °C, rounded up to 0.0001.
    expect(finished.result?.sdC).toBeCloseTo(Math.sqrt(0.8), 12)
    expect(finished.result?.halfWidthLog10).toBeCloseTo((2 * Math.sqrt(0.8)) / 34, 12)
    expect(finished.signedBy).toBe(people.toaster.actor.name)
    const adopted = await adoptStudy(people.masterCooper.actor, { id: study.id, ...signature })
    const after = await getSiteSettings(people.masterCooper.actor)
    expect(after.version).toBe(before.version + 1)
    expect(adopted.adopted).toMatchObject({ version: after.version, by: people.masterCooper.actor.name })
    expect(after.rules.errors).toMatchObject({ sameMountLog10: 0.0527, isSameMountAssumed: false })
    const smallest = 2 * Math.hypot(0.0527, before.rules.errors.driftC / 34)
    expect(smallestHonestTolerance(after.rules)).toBeCloseTo(smallest, 2)
    expect(smallestHonestTolerance(after.rules)).toBeGreaterThan(smallestHonestTolerance(before.rules))
    const entries = await queryRows<{ action: string }>(
      await forkEm(),
      `select action from audit_entries where subject_id = ? or action = 'site.changed' order by seq`,
      [study.id],
    )
    expect(entries.map(({ action }) => action).slice(-3)).toEqual([
      'repeatability.finished',
      'site.changed',
      'repeatability.adopted',
    ])
    const again = adoptStudy(people.masterCooper.actor, { id: study.id, ...signature })
    expect((await refusalOf(again)).detail).toContain('was adopted')
  })

  it('below five placements, all alike, or signed with a wrong password is not finished', async () => {
    const study = await begun(1)
    await placed(study.id, [0.5, 0.5, 0.5, 0.5])
    const finish = (password = testPassword) =>
      finishStudy(people.toaster.actor, { id: study.id, ...signature, password })
    expect((await refusalOf(finish())).detail).toContain('4 placements so far; it takes 5')
    await place(study.id, 0.5)
    expect((await refusalOf(finish())).detail).toContain('alike')
    await place(study.id, 0.7)
    expect((await refusalOf(finish('wrong'))).fields).toHaveProperty('password')
    expect((await getStudy(people.chemist.actor, { id: study.id })).state).toBe('open')
    const gone = await abandonStudy(people.toaster.actor, { id: study.id, reason: 'the block was off' })
    expect(gone).toMatchObject({ state: 'abandoned', endReason: 'the block was off' })
    expect((await refusalOf(place(study.id, 1))).kind).toBe('conflict')
    const adopt = adoptStudy(people.masterCooper.actor, { id: study.id, ...signature })
    expect((await refusalOf(adopt)).detail).toContain('abandoned')
  })

  it('keeps a struck-out placement with its reason, and does not count it', async () => {
    const study = await begun(1)
    await placed(study.id, [0, 1, 2, 3, 4])
    const wrong = await place(study.id, 40)
    const last = wrong.placements.at(-1)
    const struck = await strikePlacement(people.toaster.actor, {
      studyId: study.id,
      placementId: last?.id ?? '',
      reason: 'the probe had slipped out',
    })
    expect(struck.placements).toHaveLength(6)
    expect(struck.placements.at(-1)?.struck).toMatchObject({ reason: 'the probe had slipped out' })
    expect(struck.result).toMatchObject({ n: 5, sdC: expect.closeTo(Math.sqrt(2.5), 12) })
    const twice = strikePlacement(people.toaster.actor, {
      studyId: study.id,
      placementId: last?.id ?? '',
      reason: 'again',
    })
    expect((await refusalOf(twice)).kind).toBe('conflict')
    await abandonStudy(people.toaster.actor, { id: study.id, reason: 'the test is over' })
  })

  it('takes the same placement once, refuses cold wood, one probe twice and a coals probe', async () => {
    const study = await begun(1)
    const id = randomUUID()
    await place(study.id, 1, id)
    expect((await place(study.id, 1, id)).placements).toHaveLength(1)
    const cold = addPlacement(people.toaster.actor, {
      studyId: study.id,
      id: randomUUID(),
      placedTempC: 100,
      referenceTempC: 100,
    })
    expect((await refusalOf(cold)).fields['referenceTempC']).toContain('no dose is made')
    const { lead, coals } = hearth(0).probeIds
    const start = (probeId: string, referenceProbeId: string) =>
      startStudy(people.toaster.actor, { probeId, referenceProbeId, heatWords: '' })
    expect((await refusalOf(start(lead, lead))).fields).toHaveProperty('referenceProbeId')
    expect((await refusalOf(start(coals, lead))).fields).toHaveProperty('probeId')
    expect((await refusalOf(start(hearth(1).probeIds.lead, lead))).fields['probeId']).toContain('already')
    const retire = retireProbe(people.administrator.actor, {
      id: hearth(1).probeIds.opposite,
      reason: 'worn out',
    })
    expect((await refusalOf(retire)).detail).toContain('Repeat placements')
    await abandonStudy(people.toaster.actor, { id: study.id, reason: 'the test is over' })
  })

  it('takes both probes’ own readings once they have settled, and not before', async () => {
    const study = await begun(1)
    const { gateway, probeIds } = hearth(1)
    const takenAt = Date.now()
    const send = (fromS: number, seq: number, slopeCPerS: number) => {
      const readings = Array.from({ length: 61 }, (_, i) => i).flatMap((i) => [
        { seq: seq + 2 * i, probeId: probeIds.lead, at: atS(fromS + i), tempC: 191.2 + i * slopeCPerS },
        { seq: seq + 2 * i + 1, probeId: probeIds.opposite, at: atS(fromS + i), tempC: 190 },
      ])
      return storeReadings(gateway.identity, {
        bootId: randomUUID(),
        sentAt: new Date(takenAt).toISOString(),
        readings,
      })
    }
    const atS = (s: number) => new Date(takenAt + s * 1000).toISOString()
    const take = (atS: number) =>
      addPlacement(people.toaster.actor, {
        studyId: study.id,
        id: randomUUID(),
        takenAt: new Date(takenAt + atS * 1000).toISOString(),
      })
    await send(-60, 1, 0)
    setClock(() => takenAt + 1_000)
    const taken = await take(0)
    expect(taken.placements).toMatchObject([
      {
        way: 'live',
        placedTempC: expect.closeTo(191.2, 9),
        referenceTempC: expect.closeTo(190, 9),
        differenceC: 1.2,
      },
    ])
    setClock(() => takenAt + 61_000)
    await send(1, 1_000, 0.05)
    expect((await refusalOf(take(61))).fields['placedTempC']).toContain('settled')
    setClock(() => takenAt + 400_000)
    expect((await refusalOf(take(0))).fields['placedTempC']).toContain('just now')
    setClock(null)
    await abandonStudy(people.toaster.actor, { id: study.id, reason: 'the test is over' })
  })

  it('is read by all staff, made by those who check, and adopted by administrator or master cooper', async () => {
    const page = await listStudies(people.chemist.actor, { limit: 2 })
    expect(page.items).toHaveLength(2)
    const rest = await listStudies(people.chemist.actor, { limit: 50, cursor: page.nextCursor ?? '' })
    expect(rest.items[0]?.number).toBe((page.items.at(-1)?.number ?? 0) - 1)
    const start = startStudy(people.chemist.actor, {
      probeId: hearth().probeIds.lead,
      referenceProbeId: hearth().probeIds.opposite,
      heatWords: '',
    })
    expect((await refusalOf(start)).kind).toBe('not allowed')
    for (const person of [people.toaster, people.chemist, people.customer]) {
      const adopt = adoptStudy(person.actor, { id: randomUUID(), ...signature })
      expect((await refusalOf(adopt)).kind).toBe('not allowed')
    }
    expect((await refusalOf(listStudies(people.customer.actor, { limit: 1 }))).kind).toBe('not allowed')
  })
})

describe('the database', () => {
  it('finishes no study below five, and never changes a placement or an ended study', async () => {
    const study = await begun(1)
    await placed(study.id, [0, 1, 2, 3])
    const em = await forkEm()
    const finish = `update repeatability_studies set state = 'finished', ended_at = now(), result = '{}',
      signature_id = (select id from signatures limit 1) where id = ?`
    await expect(queryRows(em, finish, [study.id])).rejects.toThrow(/five placements/)
    const change = 'update repeatability_placements set placed_temp_c = 1 where study_id = ?'
    await expect(queryRows(em, change, [study.id])).rejects.toThrow(/never changed/)
    await abandonStudy(people.toaster.actor, { id: study.id, reason: 'the test is over' })
    const reopen = `update repeatability_studies set state = 'open', ended_at = null where id = ?`
    await expect(queryRows(em, reopen, [study.id])).rejects.toThrow(/not changed/)
  })
})
