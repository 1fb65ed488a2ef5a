import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { abandonFiring } from '@/lib/firings/abandon-firing'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { storeReadings } from '@/lib/ingest/store-readings'
import { createGateway } from '@/lib/probes/create-gateway'
import { getProbe } from '@/lib/probes/get-probe'
import { listProbeFirings } from '@/lib/probes/list-probe-firings'
import { listProbes } from '@/lib/probes/list-probes'
import { retireGateway } from '@/lib/probes/retire-gateway'
import { retireProbe } from '@/lib/probes/retire-probe'
import { saveProbe } from '@/lib/probes/save-probe'
import { setClock } from '@/lib/runtime'
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
import { createPeople, createPerson } from '@/tests/support/people'

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

const fields = (channel: number, more: object = {}) => ({
  name: `Probe ${channel}`,
  gatewayId: hearth().gateway.identity.gatewayId,
  channel,
  thermocoupleType: 'K' as const,
  iecClass: 1,
  serial: '',
  hearthId: null,
  usualRole: 'spare' as const,
  height: 'bilge' as const,
  side: 'C',
  depthMm: 2,
  mounting: 'wedge' as const,
  ...more,
})

const add = (channel: number, more: object = {}) =>
  saveProbe(people.administrator.actor, fields(channel, more))

describe('where a probe was', () => {
  it('is kept with every change, from when to when and by whom; a change of name is none', async () => {
    const begin = Date.now() - 10 * dayMs
    setClock(() => begin)
    const { id } = await add(40)
    setClock(() => begin + dayMs)
    await saveProbe(people.administrator.actor, { ...fields(40, { name: 'Renamed' }), id })
    setClock(() => begin + 2 * dayMs)
    const other = await createPerson({ role: 'administrator', name: 'Ilse Marram' })
    await saveProbe(other.actor, { ...fields(41, { depthMm: 3, hearthId: hearth(1).id }), id })
    setClock(() => begin + 3 * dayMs)
    await retireProbe(people.administrator.actor, { id, reason: 'the sheath burnt through' })
    const { places } = await getProbe(people.toaster.actor, { id })
    const at = (days: number) => new Date(begin + days * dayMs).toISOString()
    expect(places).toMatchObject([
      { channel: 41, depthMm: 3, hearthNumber: 2, fromAt: at(2), untilAt: at(3), changedBy: 'Ilse Marram' },
      { channel: 40, depthMm: 2, hearthNumber: null, fromAt: at(0), untilAt: at(2) },
    ])
  })

  it('is kept by the database itself, whoever changes the row, and is nobody’s to change', async () => {
    const { id } = await add(42)
    const em = await forkEm()
    await queryRows(em, 'update probes set depth_mm = 5 where id = ?', [id])
    const { places } = await getProbe(people.toaster.actor, { id })
    expect(places.map((one) => [one.depthMm, one.untilAt === null])).toEqual([
      [5, true],
      [2, false],
    ])
    await expect(
      queryRows(em, 'update probe_places set depth_mm = 9 where probe_id = ?', [id]),
    ).rejects.toThrow(/permission denied/)
    await expect(queryRows(em, 'delete from probes where id = ?', [id])).rejects.toThrow()
  })
})

describe('a retired probe', () => {
  it('frees its channel, is refused by ingest, stays in the list of retired, and is not changed again', async () => {
    const { id } = await add(43, { name: 'Old one' })
    const taken = await refusalOf(add(43))
    expect(taken.fields['channel']).toContain('Old one')
    expect((await refusalOf(retireProbe(people.masterCooper.actor, { id, reason: 'worn out' }))).kind).toBe(
      'not allowed',
    )
    await retireProbe(people.administrator.actor, { id, reason: 'worn out' })
    const next = await add(43, { name: 'New one' })
    expect(next.id).not.toBe(id)
    const at = new Date().toISOString()
    setClock(() => Date.now() + 5_000)
    const answer = await storeReadings(hearth().gateway.identity, {
      bootId: '5f8f2a5e-7d2f-4a53-9a70-3f1f5b7a1d11',
      sentAt: at,
      readings: [{ seq: 1, probeId: id, at, tempC: 20 }],
    })
    expect(answer.refused).toMatchObject([{ seq: 1, reason: 'this probe is retired' }])
    setClock(null)
    const retired = await listProbes(people.toaster.actor, { state: 'retired', limit: 200 })
    expect(retired.items.map((one) => one.id)).toContain(id)
    const inUse = await listProbes(people.toaster.actor, { limit: 200 })
    expect(inUse.items.map((one) => one.id)).not.toContain(id)
    expect((await refusalOf(saveProbe(people.administrator.actor, { ...fields(44), id }))).kind).toBe(
      'conflict',
    )
    const twice = retireProbe(people.administrator.actor, { id, reason: 'again' })
    expect((await refusalOf(twice)).detail).toContain('already')
    const em = await forkEm()
    await expect(queryRows(em, 'update probes set retired_at = null where id = ?', [id])).rejects.toThrow(
      /retired probe/,
    )
  })

  it('keeps its firings with the place it had then; type and class of one that fired stay', async () => {
    const [piece] = await batchOf(people, await approvedVersion(people, 'History', shortContent()), 1)
    const firing = await startOn(people, piece?.id ?? '', hearth().id)
    const id = hearth().probeIds.lead
    expect(
      (await refusalOf(retireProbe(people.administrator.actor, { id, reason: 'worn' }))).detail,
    ).toContain('live firing')
    const em = await forkEm()
    await expect(queryRows(em, 'update probes set retired_at = now() where id = ?', [id])).rejects.toThrow(
      /live firing/,
    )
    await abandonFiring(people.toaster.actor, { id: firing.id, reason: 'the test is over' })
    const lead = fields(0, { hearthId: hearth().id, usualRole: 'lead', side: 'A', name: 'Bilge A' })
    const typed = saveProbe(people.administrator.actor, { ...lead, thermocoupleType: 'N', id })
    expect((await refusalOf(typed)).fields['thermocoupleType']).toContain('Retire it')
    const classed = saveProbe(people.administrator.actor, { ...lead, iecClass: 2, id })
    expect((await refusalOf(classed)).fields).toHaveProperty('iecClass')
    await expect(
      queryRows(em, `update probes set thermocouple_type = 'N' where id = ?`, [id]),
    ).rejects.toThrow(/not changed/)
    await saveProbe(people.administrator.actor, { ...lead, depthMm: 6, id })
    const mine = await listProbeFirings(people.toaster.actor, { id, limit: 10 })
    expect(mine.items).toMatchObject([{ firingId: firing.id, role: 'lead', place: { depthMm: 2 } }])
    const other = await createPerson({ role: 'toaster', name: 'Runa Vale' })
    expect((await listProbeFirings(other.actor, { id, limit: 10 })).items).toEqual([])
  })
})

describe('the list of probes', () => {
  it('in every order gives each probe once, page by page', async () => {
    const all = (await listProbes(people.chemist.actor, { state: 'all', limit: 200 })).items.map(
      (one) => one.id,
    )
    expect(all.length).toBeGreaterThan(6)
    for (const sort of ['no', '-no', 'name', '-name', 'hearth', '-hearth', 'due', '-due'] as const) {
      const seen: string[] = []
      let cursor: string | undefined
      do {
        const page = await listProbes(people.chemist.actor, { state: 'all', sort, limit: 3, cursor })
        seen.push(...page.items.map((one) => one.id))
        cursor = page.nextCursor ?? undefined
      } while (cursor !== undefined)
      expect([...seen].sort(), sort).toEqual([...all].sort())
    }
    const names = await listProbes(people.chemist.actor, { sort: 'name', limit: 200 })
    const shown = names.items.map((one) => one.name.toLowerCase())
    expect(shown).toEqual([...shown].sort())
  })

  it('finds what is overdue, what is due soon, and what is on a hearth or a gateway', async () => {
    const { id } = await add(60, { name: 'Never checked', hearthId: hearth(1).id })
    const overdue = await listProbes(people.toaster.actor, { due: 'overdue', limit: 200 })
    const found = overdue.items.find((one) => one.id === id)
    expect(found).toMatchObject({
      checkState: 'never',
      leadFaults: ['Never checked has never been checked.'],
    })
    expect(overdue.items.every((one) => one.usualRole !== 'coals' && one.isCheckDue)).toBe(true)
    setClock(() => Date.now() + 95 * dayMs)
    const soon = await listProbes(people.toaster.actor, { due: 'soon', limit: 200 })
    expect(soon.items.map((one) => one.checkState)).toEqual(soon.items.map(() => 'due soon'))
    expect(soon.items).toHaveLength(4)
    setClock(null)
    const there = await listProbes(people.toaster.actor, { hearthId: hearth(1).id, role: 'spare', limit: 50 })
    expect(there.items.map((one) => one.name)).toEqual(['Never checked'])
    const box = hearth().gateway.identity.gatewayId
    const onBox = await listProbes(people.toaster.actor, { gatewayId: box, limit: 200 })
    expect(onBox.items.every((one) => one.gateway.id === box)).toBe(true)
  })
})

describe('a retired gateway', () => {
  it('has no probe and no token, takes no probe and no new token, and stays retired', async () => {
    const { id } = await createGateway(people.administrator.actor, { name: 'Leaving', mayReplay: false })
    const probe = await add(1, { gatewayId: id })
    const refused = await refusalOf(retireGateway(people.administrator.actor, { id, reason: 'drowned' }))
    expect(refused.detail).toContain('still reads 1 probe')
    await retireProbe(people.administrator.actor, { id: probe.id, reason: 'drowned with it' })
    await retireGateway(people.administrator.actor, { id, reason: 'drowned' })
    expect((await refusalOf(add(2, { gatewayId: id }))).fields['gatewayId']).toContain('retired')
    const em = await forkEm()
    await expect(queryRows(em, 'update gateways set retired_at = null where id = ?', [id])).rejects.toThrow(
      /stays retired/,
    )
    await expect(
      queryRows(
        em,
        `insert into probes (gateway_id, channel, name, thermocouple_type, iec_class, usual_role, height, side,
           depth_mm, mounting, created_at) values (?, 9, 'x', 'K', 1, 'spare', 'bilge', 'A', 2, 'wedge', now())`,
        [id],
      ),
    ).rejects.toThrow(/reads no probe/)
  })
})
