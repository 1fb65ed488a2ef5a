import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { abandonFiring } from '@/lib/firings/abandon-firing'
import { createGateway } from '@/lib/probes/create-gateway'
import { getGatewayPage } from '@/lib/probes/get-gateway-page'
import { getProbesPage } from '@/lib/probes/get-probes-page'
import { listProbes } from '@/lib/probes/list-probes'
import { listWaterChecks } from '@/lib/probes/list-water-checks'
import { recordProbeCheck } from '@/lib/probes/record-probe-check'
import { recordWaterCheck } from '@/lib/probes/record-water-check'
import { saveHearth } from '@/lib/probes/save-hearth'
import { saveProbe } from '@/lib/probes/save-probe'
import { updateGateway } from '@/lib/probes/update-gateway'
import { issueGatewayToken } from '@/lib/ingest/issue-gateway-token'
import { revokeGatewayToken } from '@/lib/ingest/revoke-gateway-token'
import { boilingPointC } from '@/lib/science/steam'
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
import { createPeople } from '@/tests/support/people'

let database: TestDatabase
let people: TestPeople
let hearths: SeedHearth[]

const inDays = (days: number) => new Date(Date.now() + days * dayMs).toISOString()

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
  hearths = await checkedRoom(people, 2)
})

afterAll(async () => {
  await closeOrm()
  await database.drop()
})

function seeded(index: number): SeedHearth {
  const hearth = hearths[index]
  if (hearth === undefined) throw new Error(`hearth ${index}`)
  return hearth
}

const newProbe = (index: number, channel: number) =>
  ({
    name: `Spare ${channel}`,
    gatewayId: seeded(index).gateway.identity.gatewayId,
    channel,
    thermocoupleType: 'K',
    iecClass: 1,
    serial: '',
    hearthId: null,
    usualRole: 'spare',
    height: 'bilge',
    side: 'C',
    depthMm: 2,
    mounting: 'wedge',
  }) as const

async function findProbe(id: string) {
  const { items } = await listProbes(people.toaster.actor, { limit: 200 })
  const probe = items.find((one) => one.id === id)
  if (probe === undefined) throw new Error('the probe')
  return probe
}

describe('a check of a probe', () => {
  it('never made, or past its date, is due; the earliest date of its kinds counts', async () => {
    const { id } = await saveProbe(people.administrator.actor, newProbe(0, 40))
    expect(await findProbe(id)).toMatchObject({ isCheckDue: true, checkDueAt: null, checks: [] })
    const check = { probeId: id, measuredTempC: 0.2, uncertaintyC: 0.3, checkedAt: inDays(-2) }
    await recordProbeCheck(people.toaster.actor, { ...check, kind: 'ice', dueAt: inDays(-1) })
    expect((await findProbe(id)).isCheckDue).toBe(true)
    await recordProbeCheck(people.toaster.actor, {
      ...check,
      kind: 'ice',
      checkedAt: undefined,
      dueAt: inDays(9),
    })
    await recordProbeCheck(people.toaster.actor, {
      ...check,
      kind: 'block',
      referenceTempC: 205,
      measuredTempC: 206,
      dueAt: inDays(5),
    })
    const probe = await findProbe(id)
    expect(probe.isCheckDue).toBe(false)
    expect(probe.checkDueAt?.slice(0, 10)).toBe(inDays(5).slice(0, 10))
    expect(probe.checks.map((one) => [one.kind, one.correctionC])).toEqual([
      ['ice', -0.2],
      ['block', -1],
    ])
  })

  it('at boiling water takes its reference from the station pressure and asks for it', async () => {
    const probeId = seeded(0).probeIds.lead
    const check = {
      probeId,
      kind: 'boiling',
      measuredTempC: 99.1,
      uncertaintyC: 0.3,
      dueAt: inDays(30),
    } as const
    const refused = await refusalOf(recordProbeCheck(people.toaster.actor, check))
    expect(refused.fields).toHaveProperty('stationPressureHpa')
    await recordProbeCheck(people.toaster.actor, { ...check, stationPressureHpa: 985 })
    const made = (await findProbe(probeId)).checks.find((one) => one.kind === 'boiling')
    // IF97 saturation line at 98.5 kPa, checked against published values in tests/science.
    expect(made?.referenceTempC).toBeCloseTo(boilingPointC(985), 9)
  })

  it('in the future, or due before it was made, is refused', async () => {
    const check = {
      probeId: seeded(0).probeIds.lead,
      kind: 'ice',
      measuredTempC: 0,
      uncertaintyC: 0.3,
    } as const
    const future = recordProbeCheck(people.toaster.actor, {
      ...check,
      checkedAt: inDays(1),
      dueAt: inDays(9),
    })
    expect((await refusalOf(future)).fields).toHaveProperty('checkedAt')
    const early = recordProbeCheck(people.toaster.actor, { ...check, dueAt: inDays(-1) })
    expect((await refusalOf(early)).fields).toHaveProperty('dueAt')
    const unmeasured = recordProbeCheck(people.toaster.actor, { ...check, kind: 'block', dueAt: inDays(9) })
    expect((await refusalOf(unmeasured)).fields).toHaveProperty('referenceTempC')
  })
})

describe('a probe', () => {
  it('shares its channel with no other of its gateway', async () => {
    const refused = await refusalOf(saveProbe(people.administrator.actor, newProbe(0, 0)))
    expect(refused.fields['channel']).toContain('already')
  })

  it('and its hearth stay as they are while they serve a live firing', async () => {
    const [piece] = await batchOf(people, await approvedVersion(people, 'Probes', shortContent()), 1)
    const { id, probeIds, number } = seeded(1)
    const firing = await startOn(people, piece?.id ?? '', id)
    const move = saveProbe(people.administrator.actor, { ...newProbe(1, 0), id: probeIds.lead })
    expect((await refusalOf(move)).kind).toBe('conflict')
    const close = { id, number, name: '', isActive: false }
    expect((await refusalOf(saveHearth(people.administrator.actor, close))).kind).toBe('conflict')
    await abandonFiring(people.toaster.actor, { id: firing.id, reason: 'the test is over' })
    expect(await saveHearth(people.administrator.actor, close)).toEqual({ id })
    await saveHearth(people.administrator.actor, { ...close, isActive: true })
  })
})

describe('a water check', () => {
  it('is in date until its date, newest first', async () => {
    const check = { source: 'Well', tcaNgPerL: 0.6, freeChlorineMgPerL: 0.01 }
    const { id } = await recordWaterCheck(people.toaster.actor, { ...check, dueAt: inDays(7) })
    const { items } = await listWaterChecks(people.chemist.actor, { limit: 10 })
    expect(items[0]).toMatchObject({ id, isInDate: true, checkedBy: people.toaster.actor.name })
    const future = recordWaterCheck(people.toaster.actor, {
      ...check,
      checkedAt: inDays(1),
      dueAt: inDays(2),
    })
    expect((await refusalOf(future)).fields).toHaveProperty('checkedAt')
  })
})

describe('the room’s equipment', () => {
  it('is the administrator’s to change, checks are also the master cooper’s and the toaster’s', async () => {
    for (const person of [people.masterCooper, people.chemist, people.toaster, people.customer]) {
      const { actor } = person
      expect((await refusalOf(createGateway(actor, { name: 'Mine', mayReplay: false }))).kind).toBe(
        'not allowed',
      )
      expect((await refusalOf(saveProbe(actor, newProbe(0, 60)))).kind).toBe('not allowed')
      const gatewayId = seeded(0).gateway.identity.gatewayId
      expect((await refusalOf(issueGatewayToken(actor, { gatewayId }))).kind).toBe('not allowed')
    }
    const check = { source: 'Tank', tcaNgPerL: 0, freeChlorineMgPerL: 0, dueAt: inDays(3) }
    expect((await refusalOf(recordWaterCheck(people.chemist.actor, check))).kind).toBe('not allowed')
    expect((await refusalOf(getProbesPage(people.customer.actor, { limit: 50 }))).kind).toBe('not allowed')
  })

  it('shows device tokens to administrators alone, never the token itself', async () => {
    const gateway = await createGateway(people.administrator.actor, { name: 'Yard', mayReplay: false })
    const made = await issueGatewayToken(people.administrator.actor, { gatewayId: gateway.id })
    const { id } = gateway
    const page = await getGatewayPage(people.administrator.actor, { id })
    expect(page.tokens?.map((token) => [token.id, token.revokedAt])).toEqual([[made.id, null]])
    expect(JSON.stringify(page)).not.toContain(made.token)
    const seen = await getGatewayPage(people.masterCooper.actor, { id })
    expect(seen.tokens).toBeNull()
    expect(seen.gateway.tokenCount).toBe(1)
    await revokeGatewayToken(people.administrator.actor, { gatewayId: id, tokenId: made.id })
    const after = await getGatewayPage(people.administrator.actor, { id })
    expect(after.gateway.tokenCount).toBe(0)
    expect(after.tokens?.[0]?.revokedAt).not.toBeNull()
  })

  it('keeps a gateway’s name its own, and every change in the audit trail', async () => {
    const { id } = await createGateway(people.administrator.actor, { name: 'Shed', mayReplay: false })
    const twin = createGateway(people.administrator.actor, { name: 'Shed', mayReplay: false })
    expect((await refusalOf(twin)).fields).toHaveProperty('name')
    await updateGateway(people.administrator.actor, { id, name: 'Long shed', mayReplay: false })
    const entries = await queryRows<{ action: string }>(
      await forkEm(),
      'select action from audit_entries where subject_id = ? order by seq',
      [id],
    )
    expect(entries.map((entry) => entry.action)).toEqual(['gateway.registered', 'gateway.changed'])
  })
})
