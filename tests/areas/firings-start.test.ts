import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { PieceDto } from '@/lib/batches/schema'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { abandonFiring } from '@/lib/firings/abandon-firing'
import { getFiring } from '@/lib/firings/get-firing'
import { listFirings } from '@/lib/firings/list-firings'
import { recordWaterCheck } from '@/lib/probes/record-water-check'
import { saveProbe } from '@/lib/probes/save-probe'
import { contentSha256 } from '@/lib/recipes/content-sha256'
import { recipeCopyOf } from '@/lib/recipes/recipe-copy'
import { getVersion } from '@/lib/recipes/get-version'
import { withdrawVersion } from '@/lib/recipes/withdraw-version'
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
import { createPeople, createPerson, testPassword } from '@/tests/support/people'

let database: TestDatabase
let people: TestPeople
let hearths: SeedHearth[]
let pieces: PieceDto[]
let versionId: string

const hearth = (index: number) => hearths[index]?.id ?? ''
const piece = (index: number) => pieces[index]?.id ?? ''

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
  hearths = await checkedRoom(people, 3)
  versionId = await approvedVersion(people, 'Start', shortContent())
  pieces = await batchOf(people, versionId, 8)
})

afterAll(async () => {
  await closeOrm()
  await database.drop()
})

async function endAll(): Promise<void> {
  const live = await listFirings(people.masterCooper.actor, { state: 'live', limit: 50 })
  for (const { id } of live.items) {
    await abandonFiring(people.masterCooper.actor, { id, reason: 'the test is over' })
  }
}

describe('a start', () => {
  it('copies the recipe whole, places the piece and gives it its probes', async () => {
    const firing = await startOn(people, piece(0), hearth(0))
    const version = await getVersion(people.chemist.actor, { id: versionId })
    const { copy, sha256 } = recipeCopyOf(version)
    expect(firing).toMatchObject({ state: 'preheating', hearthNumber: 1, recipeSha256: sha256 })
    expect(firing.recipeCopy).toEqual(copy)
    expect(contentSha256(firing.recipeCopy?.content ?? shortContent())).toBe(contentSha256(version.content))
    expect(firing.probes.map((probe) => probe.role)).toEqual(['lead', 'opposite', 'coals'])
    await endAll()
  })

  it('is refused on a hearth where a firing stands, and for a piece that is over a fire', async () => {
    await startOn(people, piece(1), hearth(0))
    expect(await refusalOf(startOn(people, piece(2), hearth(0)))).toMatchObject({
      kind: 'invalid',
      fields: { hearthId: expect.stringContaining('already') },
    })
    expect(await refusalOf(startOn(people, piece(1), hearth(1)))).toMatchObject({
      kind: 'invalid',
      fields: { pieceId: expect.stringContaining('already') },
    })
    await endAll()
  })

  it('of two people who start on one hearth at the same instant one gets it', async () => {
    const both = await Promise.allSettled([
      startOn(people, piece(2), hearth(0)),
      startOn(people, piece(3), hearth(0)),
    ])
    expect(both.map((one) => one.status).sort()).toEqual(['fulfilled', 'rejected'])
    const live = await listFirings(people.masterCooper.actor, { state: 'live', limit: 50 })
    expect(live.items).toHaveLength(1)
    await endAll()
  })

  it('is refused when the lead probe sits at another place than the recipe is written for, naming both', async () => {
    const seeded = hearths[2]
    if (seeded === undefined) throw new Error('three hearths')
    const lead = {
      name: 'Bilge A',
      usualRole: 'lead',
      height: 'bilge',
      side: 'A',
      mounting: 'wedge',
      thermocoupleType: 'K',
      iecClass: 1,
      serial: '',
      gatewayId: seeded.gateway.identity.gatewayId,
      hearthId: seeded.id,
      channel: 0,
    } as const
    const id = seeded.probeIds.lead
    await saveProbe(people.administrator.actor, { ...lead, id, depthMm: 3 })
    const refused = await refusalOf(startOn(people, piece(2), seeded.id))
    expect(refused.kind).toBe('invalid')
    expect(refused.fields['probes.lead']).toMatch(/2 mm.*3 mm/)
    await saveProbe(people.administrator.actor, { ...lead, id, depthMm: 2 })
    await startOn(people, piece(2), seeded.id)
    await endAll()
  })

  it('on water that is out of date needs an override signed with password and reason', async () => {
    const past = new Date(Date.now() - 1000)
    await queryRows(
      await forkEm(),
      `insert into water_checks (source, tca_ng_per_l, free_chlorine_mg_per_l, checked_at, due_at, account_id)
       values ('Well', 0.2, 0, ?, ?, ?)`,
      [new Date(past.getTime() - dayMs), past, people.masterCooper.accountId],
    )
    const refused = await refusalOf(startOn(people, piece(3), hearth(0)))
    expect(refused).toMatchObject({ kind: 'conflict', fields: { override: expect.any(String) } })
    expect(refused.detail).toContain('water')
    const wrong = { password: 'not the password', reason: 'the lab is closed' }
    expect((await refusalOf(startOn(people, piece(3), hearth(0), { override: wrong }))).kind).toBe('invalid')
    const override = { password: testPassword, reason: 'the lab is closed' }
    const firing = await startOn(people, piece(3), hearth(0), { override })
    const signatures = await queryRows<{ reason: string; account_name: string }>(
      await forkEm(),
      `select reason, account_name from signatures where subject_id = ?`,
      [firing.id],
    )
    expect(signatures).toEqual([
      { reason: expect.stringContaining('the lab is closed'), account_name: people.toaster.actor.name },
    ])
    await endAll()
    await recordWaterCheck(people.masterCooper.actor, {
      source: 'Well',
      tcaNgPerL: 0.2,
      freeChlorineMgPerL: 0,
      dueAt: new Date(Date.now() + dayMs).toISOString(),
    })
  })

  it('of a withdrawn version is refused', async () => {
    const other = await approvedVersion(people, 'Withdrawn', shortContent())
    const [first] = await batchOf(people, other, 1)
    await withdrawVersion(people.masterCooper.actor, {
      id: other,
      reason: 'it scorched',
      password: testPassword,
      meaning: 'I withdraw this.',
    })
    const refused = await refusalOf(startOn(people, first?.id ?? '', hearth(0)))
    expect(refused).toMatchObject({ kind: 'conflict', detail: expect.stringContaining('withdrawn') })
  })
})

describe('a toaster', () => {
  it('reads what is live and their own, and another toaster’s finished firing not at all', async () => {
    const other = await createPerson({ role: 'toaster', name: 'Runa Vale' })
    const { id } = await startOn(people, piece(4), hearth(0))
    expect((await getFiring(other.actor, { id })).id).toBe(id)
    await abandonFiring(people.toaster.actor, { id, reason: 'the hoop broke' })
    expect((await getFiring(people.toaster.actor, { id })).endReason).toBe('the hoop broke')
    expect((await refusalOf(getFiring(other.actor, { id }))).kind).toBe('not found')
    const theirs = await listFirings(other.actor, { state: 'abandoned', limit: 50 })
    expect(theirs.items).toEqual([])
    expect((await refusalOf(getFiring(people.customer.actor, { id }))).kind).toBe('not allowed')
  })
})
