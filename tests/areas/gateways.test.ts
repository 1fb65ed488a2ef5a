import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { closeOrm } from '@/lib/db/orm'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { storeReadings } from '@/lib/ingest/store-readings'
import { gatewayWords } from '@/lib/probes/gateway-words'
import { getGateway } from '@/lib/probes/get-gateway'
import { listDeclaredLosses } from '@/lib/probes/list-declared-losses'
import { listGateways } from '@/lib/probes/list-gateways'
import { listRefusedReadings } from '@/lib/probes/list-refused-readings'
import type { GatewayDto } from '@/lib/probes/schema'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import { refusalOf } from '@/tests/support/firing-room'
import type { TestPeople } from '@/tests/support/people'
import { createPeople } from '@/tests/support/people'
import { createTestGateway, createTestProbe } from '@/tests/support/room'

let database: TestDatabase
let people: TestPeople

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
})

afterAll(async () => {
  await closeIngestPool()
  await closeOrm()
  await database.drop()
})

describe('a gateway’s page', () => {
  it('says what was refused and what was declared lost, page by page, and counts both', async () => {
    const gateway = await createTestGateway()
    const probe = await createTestProbe(gateway.gatewayId, 1)
    const foreign = await createTestProbe((await createTestGateway()).gatewayId, 1)
    const at = new Date().toISOString()
    await storeReadings(gateway, {
      bootId: randomUUID(),
      sentAt: at,
      readings: [
        { seq: 1, probeId: probe.id, at, tempC: 20 },
        { seq: 2, probeId: foreign.id, at, tempC: 20 },
        { seq: 3, probeId: foreign.id, at, tempC: 21 },
        { seq: 4, probeId: randomUUID(), at, tempC: 21 },
      ],
      lost: [
        { from: 5, to: 14, reason: 'the disk was full' },
        { from: 15, to: 15, reason: 'the disk was full' },
      ],
    })
    const id = gateway.gatewayId
    const detail = await getGateway(people.toaster.actor, { id })
    expect(detail).toMatchObject({ refusedCount: 3, lostCount: 11, probeCount: 1 })
    expect(detail.refusedReasons).toEqual([
      { reason: 'this probe belongs to another gateway', count: 2 },
      { reason: 'no probe has this probeId', count: 1 },
    ])
    expect(detail.boots).toMatchObject([{ ackedSeq: 15, refusedCount: 3, lostCount: 11 }])
    const first = await listRefusedReadings(people.toaster.actor, { gatewayId: id, limit: 2 })
    const rest = await listRefusedReadings(people.toaster.actor, {
      gatewayId: id,
      limit: 2,
      cursor: first.nextCursor ?? '',
    })
    const refused = [...first.items, ...rest.items]
    expect(refused.map((one) => one.seq)).toEqual([4, 3, 2])
    expect(refused[1]).toMatchObject({ probe: { id: foreign.id }, at })
    const only = await listRefusedReadings(people.toaster.actor, {
      gatewayId: id,
      reason: 'no probe has this probeId',
      limit: 10,
    })
    expect(only.items.map((one) => one.seq)).toEqual([4])
    const lost = await listDeclaredLosses(people.toaster.actor, { gatewayId: id, limit: 1 })
    const more = await listDeclaredLosses(people.toaster.actor, {
      gatewayId: id,
      limit: 1,
      cursor: lost.nextCursor ?? '',
    })
    expect([...lost.items, ...more.items].map((one) => one.count).sort((a, b) => a - b)).toEqual([1, 10])
    expect(more.nextCursor).toBeNull()
  })

  it('is for staff, and there is none for what is not there', async () => {
    const { gatewayId: id } = await createTestGateway()
    for (const read of [
      getGateway(people.customer.actor, { id }),
      listRefusedReadings(people.customer.actor, { gatewayId: id, limit: 1 }),
      listDeclaredLosses(people.customer.actor, { gatewayId: id, limit: 1 }),
      listGateways(people.customer.actor),
    ]) {
      expect((await refusalOf(read)).kind).toBe('not allowed')
    }
    expect((await refusalOf(getGateway(people.toaster.actor, { id: randomUUID() }))).kind).toBe('not found')
  })
})

describe('the words of a gateway’s state', () => {
  const nowMs = Date.parse('2027-03-01T10:00:00Z')
  const ago = (s: number) => new Date(nowMs - s * 1000).toISOString()
  const gateway: GatewayDto = {
    id: '',
    name: 'Shed',
    mayReplay: false,
    clockOffsetMs: 120,
    lastSeenAt: ago(1),
    tokenCount: 1,
    probeCount: 3,
    refusedCount: 0,
    lostCount: 0,
    retiredAt: null,
    status: null,
  }
  const status = {
    at: ago(2),
    spooledReadings: 1_240,
    spooledBytes: 90_000,
    oldestUnsentAt: ago(200),
    programVersion: '1.0.0',
    uptimeS: 60,
  }

  it.each([
    ['sending', {}, 'Sending, up to date.', 'plain'],
    ['silent', { lastSeenAt: ago(720) }, 'Silent for 12 min. Look at its power and its line.', 'wrong'],
    ['never heard of', { lastSeenAt: null }, 'Never heard of.', 'attention'],
    ['without a token', { tokenCount: 0 }, 'It cannot send', 'attention'],
    ['retired', { retiredAt: ago(60), tokenCount: 0 }, 'Retired', 'plain'],
    ['behind', { status }, '1240 readings behind, the oldest from 3 min ago', 'attention'],
    ['on its way', { status: { ...status, oldestUnsentAt: ago(2) } }, 'Sending, up to date.', 'plain'],
    ['slow clock', { clockOffsetMs: 4_200 }, 'Its clock is 4.2 s behind ours', 'attention'],
    ['fast clock', { clockOffsetMs: -4_200 }, 'Its clock is 4.2 s ahead of ours', 'attention'],
  ] as const)('%s', (_name, changes, words, tone) => {
    const said = gatewayWords({ ...gateway, ...changes }, nowMs)
    expect(said.words.replaceAll('\u00a0', ' ')).toContain(words)
    expect(said.tone).toBe(tone)
  })
})
