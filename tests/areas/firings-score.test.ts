import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { PieceDto } from '@/lib/batches/schema'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { compareFirings } from '@/lib/firings/compare-firings'
import { getFiring } from '@/lib/firings/get-firing'
import { getFiringPicture } from '@/lib/firings/get-firing-picture'
import { getReadings } from '@/lib/firings/get-readings'
import { getScore } from '@/lib/firings/get-score'
import { readScore, scoreResultOf } from '@/lib/firings/read-score'
import { scoreFiring } from '@/lib/firings/score-firing'
import { scoreInputOf } from '@/lib/firings/score-input'
import { firingReadings } from '@/lib/ingest/firing-readings'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { sealFiring } from '@/lib/ingest/seal-firing'
import { setClock } from '@/lib/runtime'
import { scoreFiring as evaluate } from '@/lib/science/score'
import { defaultSiteRules } from '@/lib/science/site-rules'
import type { SeedFiring } from '@/simulators/scenarios/play-firing'
import { playFiring } from '@/simulators/scenarios/play-firing'
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
} from '@/tests/support/firing-room'
import type { TestPeople } from '@/tests/support/people'
import { createPeople, createPerson } from '@/tests/support/people'

let database: TestDatabase
let people: TestPeople
let hearths: SeedHearth[]
let pieces: PieceDto[]
const system = { kind: 'system', name: 'sealing' } as const

/** Whole, with a short gap, with a long gap, abandoned. */
const ids = { whole: '', gap: '', cut: '', abandoned: '' }

async function play(index: number, more: Partial<SeedFiring> = {}): Promise<string> {
  const hearth = hearths[0]
  if (hearth === undefined) throw new Error('a hearth')
  const { firing } = await playFiring({
    pieceId: pieces[index]?.id ?? '',
    hearthId: hearth.id,
    toaster: people.toaster.actor,
    startAt: new Date(Date.now() - dayMs + index * 3_600_000),
    content: shortContent(),
    gateway: hearth.gateway,
    probeIds: hearth.probeIds,
    engine: { seed: 40 + index, moisturePercent: 20 },
    finish: { colour: 'chestnut', smell: 'bread', outsideTempC: 61, remarks: 'went well' },
    ...more,
  })
  setClock(null)
  return firing.id
}

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
  hearths = await checkedRoom(people, 1)
  pieces = await batchOf(people, await approvedVersion(people, 'Score', shortContent()), 6)
  ids.whole = await play(0)
  ids.gap = await play(1, { gap: { fromToastS: 400, forS: 20 } })
  ids.cut = await play(2, { gap: { fromToastS: 300, forS: 240 } })
  ids.abandoned = await play(3, { stopAtToastS: 120, abandonReason: 'a hoop sprang' })
}, 120_000)

afterAll(async () => {
  setClock(null)
  await closeIngestPool()
  await closeOrm()
  await database.drop()
})

describe('a score', () => {
  it('waits for the seal, and says so', async () => {
    const refused = await refusalOf(scoreFiring(system, { id: ids.whole }))
    expect(refused).toMatchObject({ kind: 'conflict', detail: expect.stringContaining('sealed') })
    const none = await refusalOf(getScore(people.toaster.actor, { id: ids.whole }))
    expect(none).toMatchObject({ kind: 'not found', detail: expect.stringContaining('gateway') })
  })

  it('is made once from a seal, is the same bit for bit when made again, and is read back equal', async () => {
    await sealFiring(ids.whole)
    const first = await scoreFiring(system, { id: ids.whole })
    expect(await scoreFiring(system, { id: ids.whole })).toEqual(first)
    const em = await forkEm()
    const count = await queryRows(em, 'select 1 from scores where firing_id = ?', [ids.whole])
    expect(count).toHaveLength(1)
    const firing = await getFiring(people.toaster.actor, { id: ids.whole })
    const input = scoreInputOf(firing, await firingReadings(em, ids.whole), defaultSiteRules)
    if (input === null) throw new Error('a toast')
    const stored = await readScore(em, ids.whole)
    const again = JSON.stringify(evaluate(input))
    expect(JSON.stringify(evaluate(input))).toBe(again)
    expect(scoreResultOf(stored?.result)).toEqual(JSON.parse(again))
    expect(stored?.points).not.toBeNull()
  })

  it('with a gap of 20 s is whole and names the gap; with one of 4 min it is incomplete and has no points', async () => {
    for (const id of [ids.gap, ids.cut]) {
      await sealFiring(id)
      await scoreFiring(system, { id })
    }
    const short = scoreResultOf((await getScore(people.toaster.actor, { id: ids.gap })).result)
    expect(short.gaps.map((gap) => gap.treatment)).toEqual(['interpolated'])
    expect(short.points).not.toBeNull()
    const long = await getScore(people.toaster.actor, { id: ids.cut })
    expect(long).toMatchObject({ verdict: 'incomplete', points: null })
    expect(scoreResultOf(long.result).incompleteReasons.join(' ')).toContain('no reading for 4.0 min')
  })

  it('of an abandoned firing is never made', async () => {
    expect((await refusalOf(scoreFiring(system, { id: ids.abandoned }))).kind).toBe('conflict')
    const none = await refusalOf(getScore(people.toaster.actor, { id: ids.abandoned }))
    expect(none.detail).toContain('abandoned')
  })

  it('without ruleset, site settings or result is refused by the database, and a made one is never changed', async () => {
    const em = await forkEm()
    const columns = `firing_id, number, ruleset, site_settings_version, seal_revision, verdict, points,
      plan_dose_minutes, result, sketch, computed_at`
    for (const column of ['ruleset', 'site_settings_version', 'result']) {
      const copied = columns.replace(column, 'null').replace('number', 'number + 1')
      await expect(
        queryRows(em, `insert into scores (${columns}) select ${copied} from scores where firing_id = ?`, [
          ids.whole,
        ]),
      ).rejects.toThrow(/null value/)
    }
    const change = `update scores set points = 100 where firing_id = ?`
    await expect(queryRows(em, change, [ids.whole])).rejects.toThrow()
  })
})

describe('the picture of a firing', () => {
  it('holds the scored curve from toast start to rest start, thin, with its highest reading', async () => {
    const picture = await getFiringPicture(people.toaster.actor, { id: ids.whole })
    const { firing, curves, score } = picture
    if (curves === null || score === null) throw new Error('curves and a score')
    const restS = (Date.parse(firing.restAt ?? '') - Date.parse(firing.toastAt ?? '')) / 1000
    expect(curves.lead.timeS[0]).toBe(0)
    expect(curves.lead.timeS.at(-1)).toBeCloseTo(restS, 2)
    expect(curves.lead.timeS.length).toBeLessThanOrEqual(1500)
    const readings = await getReadings(people.toaster.actor, {
      id: ids.whole,
      from: firing.toastAt ?? '',
      to: firing.restAt ?? '',
    })
    const lead = readings.series.find((series) => series.role === 'lead')
    const highest = Math.max(...(lead?.tempC ?? []).map((tempC) => tempC ?? 0))
    expect(Math.max(...curves.lead.tempC.map((tempC) => tempC ?? 0))).toBeCloseTo(highest, 1)
    expect(curves.dose.equivalentMin.at(-1)).toBeCloseTo(score.result.dose?.doseMin ?? NaN, 3)
    expect(curves.stages.map((stage) => stage.name)).toEqual(['Warm', 'Climb', 'Hold'])
    expect(curves.wood?.timesS).toHaveLength(160)
    expect(curves.wood?.toastDepthMm.at(-1)).toEqual(score.result.toastDepthMm)
    expect(picture.checks.map((check) => check.referenceTempC)).toEqual([0, 205, 0, 205])
  })

  it('joins a short gap and says so; a long one is open, and dose and stave are not known after it', async () => {
    const short = (await getFiringPicture(people.toaster.actor, { id: ids.gap })).curves
    expect(short?.leadGaps).toHaveLength(1)
    const joinedS = short?.lead.timeS.filter((_, i) => short.lead.isInterpolated?.[i] === true) ?? []
    expect(joinedS.length).toBeGreaterThan(0)
    expect(Math.min(...joinedS)).toBeGreaterThanOrEqual(399)
    expect(Math.max(...joinedS)).toBeLessThanOrEqual(421)
    expect(short?.lead.tempC).not.toContain(null)
    const long = (await getFiringPicture(people.toaster.actor, { id: ids.cut })).curves
    const openS = long?.lead.timeS.filter((_, i) => long.lead.tempC[i] === null) ?? []
    expect(openS.length).toBeGreaterThan(0)
    expect(Math.min(...openS)).toBeGreaterThanOrEqual(299)
    expect(Math.max(...openS)).toBeLessThanOrEqual(541)
    expect(long?.lead.isInterpolated).not.toContain(true)
    expect(long?.dose.equivalentMin.at(-1)).toBeNull()
    expect(long?.dose.equivalentMin[0]).not.toBeNull()
    expect(long?.wood?.timesS.at(-1)).toBeLessThanOrEqual(300)
  })

  it('is another toaster’s firing refused as if it were not there', async () => {
    const other = await createPerson({ role: 'toaster', name: 'Runa Vale' })
    expect((await refusalOf(getFiringPicture(other.actor, { id: ids.whole }))).kind).toBe('not found')
    expect((await refusalOf(getFiringPicture(people.customer.actor, { id: ids.whole }))).kind).toBe(
      'not allowed',
    )
    const both = { ids: [ids.whole, ids.gap] }
    expect((await refusalOf(compareFirings(other.actor, both))).kind).toBe('not found')
    expect((await compareFirings(people.toaster.actor, both)).firings).toHaveLength(2)
  })
})

describe('a comparison', () => {
  it('takes two to six firings, each once, in the order given', async () => {
    const { actor } = people.chemist
    expect((await refusalOf(compareFirings(actor, { ids: [ids.whole, ids.whole] }))).kind).toBe('invalid')
    const compared = await compareFirings(actor, { ids: [ids.gap, ids.whole, ids.cut] })
    expect(compared.firings.map((one) => one.firing.id)).toEqual([ids.gap, ids.whole, ids.cut])
  })

  it('is refused for a piece that was not toasted, naming it', async () => {
    const queued = await queryRows<{ id: string }>(
      await forkEm(),
      `select id from firings where state = 'queued' limit 1`,
    )
    const id = queued[0]?.id ?? ''
    const refused = await refusalOf(compareFirings(people.chemist.actor, { ids: [ids.whole, id] }))
    expect(refused).toMatchObject({ kind: 'conflict', fields: { [id]: expect.stringContaining('no toast') } })
  })

  it('is refused across probe places, naming each place', async () => {
    // As a firing of a recipe that is written for another depth would stand in the table.
    await queryRows(
      await forkEm(),
      `update firing_probes set depth_mm = 4 where firing_id = ? and role = 'lead'`,
      [ids.gap],
    )
    const refused = await refusalOf(compareFirings(people.chemist.actor, { ids: [ids.whole, ids.gap] }))
    expect(refused.kind).toBe('conflict')
    expect(refused.detail).toContain('different places')
    expect(refused.fields[ids.whole]).toContain('2.0 mm')
    expect(refused.fields[ids.gap]).toContain('4.0 mm')
  })
})
