import { randomUUID } from 'node:crypto'
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest'
import type { PieceDto } from '@/lib/batches/schema'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { abandonFiring } from '@/lib/firings/abandon-firing'
import { addMark } from '@/lib/firings/add-mark'
import { getFiring } from '@/lib/firings/get-firing'
import { scoreInputOf } from '@/lib/firings/score-input'
import { firingReadings } from '@/lib/ingest/firing-readings'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { storeReadings } from '@/lib/ingest/store-readings'
import { listProbeFirings } from '@/lib/probes/list-probe-firings'
import { listProbes } from '@/lib/probes/list-probes'
import { saveProbe } from '@/lib/probes/save-probe'
import { setClock } from '@/lib/runtime'
import { scoreFiring as evaluate } from '@/lib/science/score'
import { defaultSiteRules } from '@/lib/science/site-rules'
import { playFiring } from '@/simulators/scenarios/play-firing'
import type { SeedHearth } from '@/simulators/scenarios/seed-room'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import { approvedVersion, batchOf, checkedRoom, refusalOf, shortContent } from '@/tests/support/firing-room'
import type { TestPeople } from '@/tests/support/people'
import { createPeople } from '@/tests/support/people'

let database: TestDatabase
let people: TestPeople
let hearth: SeedHearth
let other: SeedHearth
let pieces: PieceDto[]
let spareId: string
let next = 0

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
  const [first, second] = await checkedRoom(people, 2)
  if (first === undefined || second === undefined) throw new Error('two hearths')
  hearth = first
  other = second
  pieces = await batchOf(people, await approvedVersion(people, 'Swap', shortContent()), 6)
  const spare = await saveProbe(people.administrator.actor, {
    name: 'Spare',
    gatewayId: hearth.gateway.identity.gatewayId,
    channel: 99,
    thermocoupleType: 'K',
    iecClass: 1,
    serial: '',
    hearthId: null,
    usualRole: 'spare',
    height: 'quarter',
    side: 'B',
    depthMm: 4,
    mounting: 'wedge',
  })
  spareId = spare.id
}, 120_000)

afterEach(() => setClock(null))

afterAll(async () => {
  await closeIngestPool()
  await closeOrm()
  await database.drop()
})

/** A firing that is 200 s into its toast; the clock stands there. */
async function toasting(): Promise<{ id: string; nowMs: number }> {
  const { firing, endAt } = await playFiring({
    pieceId: pieces[next]?.id ?? '',
    hearthId: hearth.id,
    toaster: people.toaster.actor,
    startAt: new Date(Date.now() - 8 * 3600_000 + next * 3600_000),
    content: shortContent(),
    gateway: hearth.gateway,
    probeIds: hearth.probeIds,
    engine: { seed: 70 + next, moisturePercent: 20 },
    stopAtToastS: 200,
  })
  next += 1
  return { id: firing.id, nowMs: endAt.getTime() }
}

const swap = (firingId: string, atMs: number, more: Record<string, unknown> = {}) =>
  addMark(people.toaster.actor, {
    firingId,
    id: randomUUID(),
    kind: 'swap',
    at: new Date(atMs).toISOString(),
    words: '',
    role: 'lead',
    probeId: spareId,
    isAtSamePlace: true,
    ...more,
  })

async function end(id: string): Promise<void> {
  await abandonFiring(people.toaster.actor, { id, reason: 'the test is over' })
}

describe('a swap', () => {
  it('in the same place lets the replacement go on as the lead from its instant on', async () => {
    const { id, nowMs } = await toasting()
    const mark = await swap(id, nowMs - 30_000)
    expect(mark.words).toBe('lead: Bilge A out, Spare in, same place')
    const readings = Array.from({ length: 20 }, (_, i) => ({
      seq: i + 1,
      probeId: spareId,
      at: new Date(nowMs - 40_000 + i * 2_000).toISOString(),
      tempC: 120 + i,
    }))
    const bootId = randomUUID()
    await storeReadings(hearth.gateway.identity, { bootId, sentAt: new Date(nowMs).toISOString(), readings })
    const em = await forkEm()
    const firing = await getFiring(people.toaster.actor, { id })
    const lead = firing.probes.filter((probe) => probe.role === 'lead')
    expect(lead.map((probe) => [probe.name, probe.height, probe.depthMm])).toEqual([
      ['Bilge A', 'bilge', 2],
      ['Spare', 'bilge', 2],
    ])
    const read = await firingReadings(em, id)
    const series = read.series.find((one) => one.role === 'lead')
    // The spare's readings from before the swap were of another place: only those since it count.
    const since = [...(series?.atMs ?? [])].filter((atMs) => atMs >= nowMs - 30_000)
    expect(since).toEqual(Array.from({ length: 15 }, (_, i) => nowMs - 30_000 + i * 2_000))
    const input = scoreInputOf(firing, read, defaultSiteRules)
    expect(input?.firing.leadSwaps).toEqual([{ timeS: expect.closeTo(170, -1), isSamePlace: true }])
    const used = await listProbeFirings(people.masterCooper.actor, { id: spareId, limit: 10 })
    expect(used.items[0]).toMatchObject({
      firingId: id,
      role: 'lead',
      place: { height: 'bilge', depthMm: 2 },
    })
    await end(id)
  })

  it('to another place is recorded as such, and the firing is not scored', async () => {
    const { id, nowMs } = await toasting()
    const mark = await swap(id, nowMs, { isAtSamePlace: false })
    expect(mark.words).toContain('now at quarter, side B, 4 mm')
    const firing = await getFiring(people.toaster.actor, { id })
    const input = scoreInputOf(firing, await firingReadings(await forkEm(), id), defaultSiteRules)
    if (input === null) throw new Error('a toast')
    expect(input.firing.leadSwaps).toMatchObject([{ isSamePlace: false }])
    expect(evaluate(input).verdict).toBe('incomplete')
    await end(id)
  })

  it('sent twice is one swap; it is not undone or moved, and asks for role, probe and place', async () => {
    const { id, nowMs } = await toasting()
    const markId = randomUUID()
    await swap(id, nowMs, { id: markId })
    await swap(id, nowMs, { id: markId })
    expect((await getFiring(people.toaster.actor, { id })).probes).toHaveLength(4)
    const undo = swap(id, nowMs, { kind: 'undone', replacesId: markId })
    expect((await refusalOf(undo)).fields['kind']).toContain('Swap again')
    for (const missing of ['role', 'probeId', 'isAtSamePlace']) {
      const refused = await refusalOf(swap(id, nowMs, { [missing]: undefined }))
      expect(Object.keys(refused.fields)).toEqual([missing])
    }
    expect((await refusalOf(swap(id, nowMs - 1_000))).fields).toHaveProperty('probeId')
    const early = await refusalOf(swap(id, nowMs - 1_000, { probeId: hearth.probeIds.lead }))
    expect(early.fields).toHaveProperty('at')
    await end(id)
  })

  it('takes no probe that reads another firing, then or now', async () => {
    const { id, nowMs } = await toasting()
    const busy = (await listProbes(people.toaster.actor, { limit: 200 })).items.filter((one) => one.isReading)
    expect(busy.map((one) => one.id).sort()).toEqual(Object.values(hearth.probeIds).sort())
    const own = await refusalOf(swap(id, nowMs, { probeId: hearth.probeIds.opposite }))
    expect(own.fields['probeId']).toContain('reads a live firing')
    const em = await forkEm()
    const [piece] = pieces.slice(5)
    const [old] = await queryRows<{ id: string }>(
      em,
      `insert into firings (piece_id, recipe_version_id, state, queued_at) select id, ?, 'queued', now() from pieces
        where id = ? returning id`,
      [(await getFiring(people.toaster.actor, { id })).recipe.versionId, piece?.id ?? ''],
    )
    await queryRows(
      em,
      `insert into firing_probes (firing_id, probe_id, role, height, side, depth_mm, mounting, from_at, until_at)
       values (?, ?, 'lead', 'bilge', 'A', 2, 'wedge', ?, ?)`,
      [old?.id, other.probeIds.lead, new Date(nowMs - 60_000), new Date(nowMs - 10_000)],
    )
    const then = await refusalOf(swap(id, nowMs - 30_000, { probeId: other.probeIds.lead }))
    expect(then.fields['probeId']).toContain('another firing at that time')
    await end(id)
  })

  it('without its probes named is refused by the database', async () => {
    const { id } = await toasting()
    await expect(
      queryRows(
        await forkEm(),
        `insert into marks (id, firing_id, kind, at, recorded_at, account_id) values (?, ?, 'swap', now(), now(), ?)`,
        [randomUUID(), id, people.toaster.accountId],
      ),
    ).rejects.toThrow(/marks_swap_given/)
    await end(id)
  })
})
