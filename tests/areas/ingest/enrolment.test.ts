import { randomUUID } from 'node:crypto'
import fc from 'fast-check'
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { enrolGateway } from '@/lib/ingest/enrol-gateway'
import { codeSha256, makeCode, readCode } from '@/lib/ingest/enrolment-code'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { listGatewayTokens } from '@/lib/ingest/list-gateway-tokens'
import { makeEnrolmentCode } from '@/lib/ingest/make-enrolment-code'
import { rotateGatewayToken } from '@/lib/ingest/rotate-gateway-token'
import { enrolledGatewaySchema, enrolmentCodeSchema, issuedTokenSchema } from '@/lib/ingest/schema'
import { verifyDeviceToken } from '@/lib/ingest/verify-device-token'
import { setClock } from '@/lib/runtime'
import { callRoute } from '@/tests/support/api'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import { refusalOf } from '@/tests/support/firing-room'
import type { TestPeople } from '@/tests/support/people'
import { createPeople } from '@/tests/support/people'
import { createTestGateway } from '@/tests/support/room'

let database: TestDatabase
let people: TestPeople

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
})

afterEach(() => setClock(null))

afterAll(async () => {
  await closeIngestPool()
  await closeOrm()
  await database.drop()
})

const administrator = () => people.administrator.actor
/** Each test comes from an address of its own, so that one's wrong tries do not brake the next. */
const address = () => `test ${randomUUID()}`

async function isGood(token: string): Promise<boolean> {
  return verifyDeviceToken(token).then(
    () => true,
    () => false,
  )
}

describe('a code', () => {
  it('is read however it is typed, and one wrong letter is always found', () => {
    fc.assert(
      fc.property(fc.nat(11), fc.constantFrom(...'23456789ABCDEFGHJKMNPQRSTWXYZ'), (at, letter) => {
        const code = makeCode()
        expect(readCode(` ${code.toLowerCase().replaceAll('-', ' ')} `)).toBe(code)
        const plain = [...code.replaceAll('-', '')]
        if (plain[at] === letter) return
        plain[at] = letter
        expect(readCode(plain.join(''))).toBeNull()
      }),
      { seed: 20270301, numRuns: 200 },
    )
  })

  it('is shown once: the database holds its hash, and the audit trail neither', async () => {
    const gateway = await createTestGateway()
    const { code } = await makeEnrolmentCode(administrator(), { gatewayId: gateway.gatewayId })
    const em = await forkEm()
    const rows = await queryRows<{ row: string }>(em, 'select e::text as row from gateway_enrolments e')
    expect(rows.map(({ row }) => row).join()).toContain(codeSha256(code))
    expect(rows.map(({ row }) => row).join()).not.toContain(code)
    const audit = await queryRows<{ detail: string }>(em, 'select detail::text from audit_entries')
    expect(audit.map(({ detail }) => detail).join()).not.toContain(code)
  })
})

describe('enrolment', () => {
  it('over the route, without a session, gives a token that sends; the code is spent with it', async () => {
    const gateway = await createTestGateway()
    const made = await callRoute('POST', `/api/gateways/${gateway.gatewayId}/enrolment-codes`, {
      cookie: people.administrator.cookie,
    })
    expect(made.status).toBe(201)
    const { code, expiresAt } = enrolmentCodeSchema.parse(made.json)
    expect(Date.parse(expiresAt) - Date.now()).toBeLessThanOrEqual(30 * 60_000)
    const first = await callRoute('POST', '/api/gateways/enrol', { body: { code, name: 'toast-box-2' } })
    expect(first.status).toBe(201)
    const enrolled = enrolledGatewaySchema.parse(first.json)
    expect(enrolled).toMatchObject({ gatewayId: gateway.gatewayId, gatewayName: gateway.name })
    const at = new Date().toISOString()
    const sent = await callRoute('POST', '/api/ingest/readings', {
      body: { bootId: randomUUID(), sentAt: at, readings: [] },
      headers: { authorization: `Bearer ${enrolled.token}` },
    })
    expect(sent.status).toBe(200)
    const second = await callRoute('POST', '/api/gateways/enrol', { body: { code } })
    expect(second.status).toBe(422)
    expect(second.json).toMatchObject({ fields: { code: expect.stringContaining('new one') } })
  })

  it('of two boxes with one code at the same instant, one gets a token', async () => {
    const gateway = await createTestGateway()
    const { code } = await makeEnrolmentCode(administrator(), { gatewayId: gateway.gatewayId })
    const both = await Promise.allSettled([
      enrolGateway({ code }, address()),
      enrolGateway({ code }, address()),
    ])
    expect(both.map((one) => one.status).sort()).toEqual(['fulfilled', 'rejected'])
  })

  it('ends with the half hour, and with a newer code', async () => {
    const gateway = await createTestGateway()
    const old = await makeEnrolmentCode(administrator(), { gatewayId: gateway.gatewayId })
    const newer = await makeEnrolmentCode(administrator(), { gatewayId: gateway.gatewayId })
    expect((await refusalOf(enrolGateway({ code: old.code }, address()))).kind).toBe('invalid')
    setClock(() => Date.now() + 31 * 60_000)
    expect((await refusalOf(enrolGateway({ code: newer.code }, address()))).kind).toBe('invalid')
  })

  it('is braked: five wrong tries from one address, and the right code has to wait too', async () => {
    const gateway = await createTestGateway()
    const { code } = await makeEnrolmentCode(administrator(), { gatewayId: gateway.gatewayId })
    const from = address()
    for (let i = 0; i < 5; i += 1) {
      expect((await refusalOf(enrolGateway({ code: makeCode() }, from))).kind).toBe('invalid')
    }
    expect((await refusalOf(enrolGateway({ code }, from))).kind).toBe('too many')
    expect((await enrolGateway({ code }, address())).gatewayId).toBe(gateway.gatewayId)
  })

  it('of a box in place of another lets the old token serve until the new one speaks', async () => {
    const gateway = await createTestGateway()
    const { code } = await makeEnrolmentCode(administrator(), { gatewayId: gateway.gatewayId })
    const { token } = await enrolGateway({ code }, address())
    expect(await isGood(gateway.token)).toBe(true)
    expect(await isGood(token)).toBe(true)
    expect(await isGood(gateway.token)).toBe(false)
  })

  it('is the administrator’s to allow', async () => {
    const { gatewayId } = await createTestGateway()
    for (const person of [people.masterCooper, people.chemist, people.toaster, people.customer]) {
      expect((await refusalOf(makeEnrolmentCode(person.actor, { gatewayId }))).kind).toBe('not allowed')
    }
    expect((await refusalOf(makeEnrolmentCode(administrator(), { gatewayId: randomUUID() }))).kind).toBe(
      'not found',
    )
  })
})

describe('the database', () => {
  it('holds a code to one use, half an hour, and one open at a time', async () => {
    const gateway = await createTestGateway()
    await makeEnrolmentCode(administrator(), { gatewayId: gateway.gatewayId })
    const em = await forkEm()
    const insert = (minutes: number) =>
      queryRows(
        em,
        `insert into gateway_enrolments (gateway_id, code_sha256, created_at, created_by, expires_at)
         values (?, encode(sha256(gen_random_uuid()::text::bytea), 'hex'), now(), ?, now() + ? * interval '1 minute')`,
        [gateway.gatewayId, people.administrator.accountId, minutes],
      )
    await expect(insert(30)).rejects.toThrow(/gateway_enrolments_one_open/)
    await expect(insert(31)).rejects.toThrow(/gateway_enrolments_lifetime/)
    await queryRows(em, 'update gateway_enrolments set cancelled_at = now() where gateway_id = ?', [
      gateway.gatewayId,
    ])
    await expect(
      queryRows(em, 'update gateway_enrolments set cancelled_at = null where gateway_id = ?', [
        gateway.gatewayId,
      ]),
    ).rejects.toThrow(/used once/)
  })
})

describe('rotation', () => {
  it('gives a new token; the old one ends with the first word of the new, and that is audited', async () => {
    const gateway = await createTestGateway()
    const path = `/api/gateways/${gateway.gatewayId}/tokens/${gateway.tokenId}/rotate`
    const made = await callRoute('POST', path, { cookie: people.administrator.cookie })
    expect(made.status).toBe(201)
    const { id, token } = issuedTokenSchema.parse(made.json)
    expect(await isGood(gateway.token)).toBe(true)
    expect(await isGood(token)).toBe(true)
    expect(await isGood(gateway.token)).toBe(false)
    const audited = await queryRows<{ action: string; actor_name: string; detail: { replacedBy?: string } }>(
      await forkEm(),
      'select action, actor_name, detail from audit_entries where subject_id = ? order by seq',
      [gateway.gatewayId],
    )
    expect(audited.map((entry) => entry.action)).toEqual(['gateway.token rotated', 'gateway.token revoked'])
    expect(audited[1]?.detail.replacedBy).toBe(id)
  })

  it('ends the old token after 24 h, though the new one never spoke; rotating again ends both', async () => {
    const gateway = await createTestGateway()
    const { gatewayId, tokenId } = gateway
    const second = await rotateGatewayToken(administrator(), { gatewayId, tokenId })
    expect((await refusalOf(rotateGatewayToken(administrator(), { gatewayId, tokenId }))).kind).toBe(
      'conflict',
    )
    const third = await rotateGatewayToken(administrator(), { gatewayId, tokenId: second.id })
    expect(await isGood(gateway.token)).toBe(true)
    setClock(() => Date.now() + 24 * 3600_000 - 60_000)
    expect(await isGood(gateway.token)).toBe(true)
    setClock(() => Date.now() + 24 * 3600_000 + 60_000)
    expect(await isGood(gateway.token)).toBe(false)
    setClock(null)
    expect(await isGood(gateway.token)).toBe(true)
    expect(await isGood(third.token)).toBe(true)
    expect([await isGood(gateway.token), await isGood(second.token)]).toEqual([false, false])
    const { items } = await listGatewayTokens(administrator(), { gatewayId })
    expect(items.filter((item) => item.revokedAt === null).map((item) => item.id)).toEqual([third.id])
  })
})

describe('what a gateway says of itself', () => {
  it('is kept with its instants corrected, ten seconds apart at the least, and costs the message nothing', async () => {
    const gateway = await createTestGateway()
    const bootId = randomUUID()
    const status = (spooledReadings: number) => ({
      spooledReadings,
      spooledBytes: 4_096,
      oldestUnsentAt: new Date(Date.now() - 60_000).toISOString(),
      programVersion: '1.4.0',
      uptimeS: 500,
    })
    const send = (spooledReadings: number) =>
      callRoute('POST', '/api/ingest/readings', {
        body: { bootId, sentAt: new Date().toISOString(), readings: [], status: status(spooledReadings) },
        headers: { authorization: `Bearer ${gateway.token}` },
      })
    const kept = async () => {
      const rows = await queryRows<{ spooled_readings: string | null; program_version: string | null }>(
        await forkEm(),
        'select spooled_readings, program_version from gateways where id = ?',
        [gateway.gatewayId],
      )
      return rows[0]
    }
    expect((await send(12)).status).toBe(200)
    await expect
      .poll(kept, { timeout: 3_000 })
      .toMatchObject({ spooled_readings: '12', program_version: '1.4.0' })
    await send(99)
    await new Promise((resolve) => setTimeout(resolve, 200))
    expect(await kept()).toMatchObject({ spooled_readings: '12' })
    setClock(() => Date.now() + 11_000)
    await send(0)
    await expect.poll(kept, { timeout: 3_000 }).toMatchObject({ spooled_readings: '0' })
  })
})
