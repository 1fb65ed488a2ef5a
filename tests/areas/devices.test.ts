import { randomUUID } from 'node:crypto'
import { afterAll, afterEach, beforeAll, describe, expect, test } from 'vitest'
import { deviceCookieName } from '@/lib/auth/device-cookie'
import { readDeviceActor } from '@/lib/auth/read-device-actor'
import { readSessionActor } from '@/lib/auth/read-session-actor'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { enrolDevice } from '@/lib/devices/enrol-device'
import { listDevices } from '@/lib/devices/list-devices'
import { makeDevice } from '@/lib/devices/make-device'
import { makeDeviceCode } from '@/lib/devices/make-device-code'
import { revokeDevice } from '@/lib/devices/revoke-device'
import type { DeviceCodeDto, MakeDeviceBody } from '@/lib/devices/schema'
import { makeDeviceBody } from '@/lib/devices/schema'
import { updateDevice } from '@/lib/devices/update-device'
import { saveHearth } from '@/lib/probes/save-hearth'
import { setClock } from '@/lib/runtime'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import { createTestDevice, createTestPinSession } from '@/tests/support/devices'
import { refusalOf } from '@/tests/support/firing-room'
import type { TestPeople } from '@/tests/support/people'
import { createPeople } from '@/tests/support/people'

let database: TestDatabase
let people: TestPeople
let hearthId = ''
let otherHearthId = ''

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
  hearthId = (await saveHearth(people.administrator.actor, { number: 1, name: '', isActive: true })).id
  otherHearthId = (await saveHearth(people.administrator.actor, { number: 2, name: '', isActive: true })).id
})

afterEach(() => setClock(null))

afterAll(async () => {
  await closeOrm()
  await database.drop()
})

let addresses = 0
/** Somewhere new each time, so that tries of one rule do not slow another. */
const somewhere = () => ({ address: `203.0.113.${(addresses += 1)}`, userAgent: 'test tablet' })

const make = (more: Partial<MakeDeviceBody> = {}): Promise<DeviceCodeDto> =>
  makeDevice(
    people.administrator.actor,
    makeDeviceBody.parse({ name: `Tablet ${randomUUID().slice(0, 6)}`, kind: 'room', ...more }),
  )

/** The Cookie header of a Set-Cookie value. */
const cookieOf = (setCookie: string) => setCookie.split(';')[0] ?? ''

const actionsOf = async (deviceId: string) =>
  (
    await queryRows<{ action: string }>(
      await forkEm(),
      `select action from audit_entries where subject_type = 'device' and subject_id = ? order by seq`,
      [deviceId],
    )
  ).map((row) => row.action)

describe('enrolling a device', () => {
  test('a code made by an administrator makes the browser that device, by a cookie scripts cannot read', async () => {
    const made = await make({ name: 'Tablet hearth 1', kind: 'hearth', hearthId })
    expect(made.device).toMatchObject({ state: 'waiting', hearth: { number: 1 }, idleMinutes: 10 })
    const { device, setCookie } = await enrolDevice({ code: made.code.toLowerCase() }, somewhere())
    expect(device).toEqual({ name: 'Tablet hearth 1', kind: 'hearth' })
    expect(setCookie).toMatch(/; HttpOnly; SameSite=Lax; Max-Age=\d{8}$/)
    const actor = await readDeviceActor(cookieOf(setCookie))
    expect(actor).toMatchObject({ kind: 'device', deviceId: made.device.id, hearthNumber: 1 })
    expect(await actionsOf(made.device.id)).toEqual(['device.made', 'device.enrolled'])
  })

  test('neither the code nor the cookie’s token is in the database', async () => {
    const made = await make()
    const { setCookie } = await enrolDevice({ code: made.code }, somewhere())
    const token = cookieOf(setCookie).slice(deviceCookieName.length + 1)
    const rows = await queryRows<{ text: string }>(
      await forkEm(),
      `select d::text as text from devices d union all select e::text from device_enrolments e
       union all select a.detail::text from audit_entries a`,
    )
    const all = rows.map((row) => row.text).join('\n')
    expect(all).not.toContain(token)
    expect(all).not.toContain(made.code)
  })

  test('a code serves once, for 30 minutes, and a newer one ends it; the answer is the same for each', async () => {
    const spent = await make()
    await enrolDevice({ code: spent.code }, somewhere())
    const replaced = await make()
    await makeDeviceCode(people.administrator.actor, { id: replaced.device.id })
    const old = await make()
    const nobodys = await make()
    await revokeDevice(people.administrator.actor, { id: nobodys.device.id })
    const refused = [
      await refusalOf(enrolDevice({ code: spent.code }, somewhere())),
      await refusalOf(enrolDevice({ code: replaced.code }, somewhere())),
      await refusalOf(enrolDevice({ code: nobodys.code }, somewhere())),
    ]
    const start = Date.now()
    setClock(() => start + 30 * 60_000 + 1_000)
    refused.push(await refusalOf(enrolDevice({ code: old.code }, somewhere())))
    expect(new Set(refused.map((one) => JSON.stringify(one))).size).toBe(1)
    expect(refused[0]).toMatchObject({
      kind: 'invalid',
      fields: { code: expect.stringContaining('30 minutes') },
    })
  })

  test('guessing codes is throttled by address', async () => {
    const from = somewhere()
    const kinds: string[] = []
    for (let i = 0; i < 6; i += 1)
      kinds.push((await refusalOf(enrolDevice({ code: 'K7QW-3M9X-TR4H' }, from))).kind)
    expect(kinds.slice(0, 5).every((kind) => kind === 'invalid')).toBe(true)
    expect(kinds.at(-1)).toBe('too many')
    // A good code from another address is not slowed by it.
    await enrolDevice({ code: (await make()).code }, somewhere())
  })

  test('a second tablet with a new code takes the place; the former is out, and what a PIN opened at it ends', async () => {
    const made = await make()
    const first = await enrolDevice({ code: made.code }, somewhere())
    const device = { id: made.device.id, name: '', cookie: cookieOf(first.setCookie) }
    const actor = await readDeviceActor(device.cookie)
    if (actor === null) throw new Error('not enrolled')
    const session = await createTestPinSession({ ...device, actor }, people.toaster.accountId)
    expect(await readSessionActor(session.cookie)).not.toBeNull()
    const { code } = await makeDeviceCode(people.administrator.actor, { id: made.device.id })
    expect(await readDeviceActor(device.cookie)).not.toBeNull()
    const second = await enrolDevice({ code }, somewhere())
    expect(await readDeviceActor(device.cookie)).toBeNull()
    expect(await readSessionActor(session.cookie)).toBeNull()
    expect(await readDeviceActor(cookieOf(second.setCookie))).toMatchObject({ deviceId: made.device.id })
  })

  test.each(['', 'emberstave_device=', 'emberstave_device=short', `emberstave_device=${'A'.repeat(43)}`])(
    'a cookie %j that is no device’s opens nothing',
    async (cookie) => expect(await readDeviceActor(cookie)).toBeNull(),
  )
})

describe('the particulars of a device', () => {
  test('a tablet at a hearth names it, another does not', () => {
    const parse = (value: object) => makeDeviceBody.safeParse({ name: 'T', ...value }).error?.issues[0]
    expect(parse({ kind: 'hearth' })).toMatchObject({ path: ['hearthId'] })
    expect(parse({ kind: 'room', hearthId })).toMatchObject({ path: ['hearthId'] })
    expect(parse({ kind: 'desk' })).toMatchObject({ path: ['kind'] })
    expect(parse({ kind: 'room', idleMinutes: 0 })).toMatchObject({ path: ['idleMinutes'] })
  })

  test('it is renamed and moved to another hearth, which counts from its next request on', async () => {
    const made = await make({ kind: 'hearth', hearthId })
    const { setCookie } = await enrolDevice({ code: made.code }, somewhere())
    const [{ revision } = { revision: 0 }] = (
      await listDevices(people.masterCooper.actor, { q: made.device.name, state: 'in use', limit: 5 })
    ).items
    const moved = await updateDevice(people.administrator.actor, {
      id: made.device.id,
      revision,
      name: `Moved ${made.device.id.slice(0, 6)}`,
      kind: 'hearth',
      hearthId: otherHearthId,
      temperatureUnit: 'F',
      idleMinutes: 5,
    })
    expect(moved).toMatchObject({ hearth: { number: 2 }, idleMinutes: 5, revision: revision + 1 })
    expect(await readDeviceActor(cookieOf(setCookie))).toMatchObject({
      name: moved.name,
      hearthNumber: 2,
      temperatureUnit: 'F',
      idleMinutes: 5,
    })
    const stale = updateDevice(people.administrator.actor, {
      id: made.device.id,
      revision,
      name: 'Too late',
      kind: 'room',
      hearthId: null,
      temperatureUnit: 'C',
      idleMinutes: 5,
    })
    expect(await refusalOf(stale)).toMatchObject({ kind: 'stale' })
  })

  test('two in use do not have one name, and a hearth that is none is named', async () => {
    const { device } = await make()
    expect(await refusalOf(make({ name: device.name.toUpperCase() }))).toMatchObject({
      kind: 'invalid',
      fields: { name: expect.any(String) },
    })
    expect(await refusalOf(make({ kind: 'hearth', hearthId: randomUUID() }))).toMatchObject({
      fields: { hearthId: 'There is no such hearth.' },
    })
    await revokeDevice(people.administrator.actor, { id: device.id })
    expect((await make({ name: device.name })).device.state).toBe('waiting')
  })

  test('made a wall screen, it has nobody signed in any more', async () => {
    const device = await createTestDevice(people)
    const session = await createTestPinSession(device, people.toaster.accountId)
    await updateDevice(people.administrator.actor, {
      id: device.id,
      revision: 1,
      name: device.name,
      kind: 'wall screen',
      hearthId: null,
      temperatureUnit: 'C',
      idleMinutes: 10,
    })
    expect(await readSessionActor(session.cookie)).toBeNull()
    expect(await readDeviceActor(device.cookie)).toMatchObject({ place: 'wall screen' })
  })
})

describe('revoking', () => {
  test('ends the device’s cookie and what a PIN opened at it with the next request, and is written down', async () => {
    const device = await createTestDevice(people)
    const session = await createTestPinSession(device, people.toaster.accountId)
    expect(await readSessionActor(session.cookie)).toMatchObject({ byPinAt: { deviceId: device.id } })
    const revoked = await revokeDevice(people.administrator.actor, { id: device.id })
    expect(revoked.state).toBe('revoked')
    expect(await readDeviceActor(device.cookie)).toBeNull()
    expect(await readSessionActor(session.cookie)).toBeNull()
    expect(await actionsOf(device.id)).toEqual(['device.revoked'])
    expect(await refusalOf(revokeDevice(people.administrator.actor, { id: device.id }))).toMatchObject({
      kind: 'conflict',
    })
  })

  test('is for good: the database itself gives nothing back and takes no session', async () => {
    const device = await createTestDevice(people)
    await revokeDevice(people.administrator.actor, { id: device.id })
    const em = await forkEm()
    await expect(
      queryRows(em, 'update devices set revoked_at = null, revoked_by = null where id = ?', [device.id]),
    ).rejects.toThrow(/revoked one is not changed/)
    await expect(queryRows(em, 'delete from devices where id = ?', [device.id])).rejects.toThrow(
      /permission denied|never deleted/,
    )
    await expect(createTestPinSession(device, people.toaster.accountId)).rejects.toThrow(/nobody signs in/)
  })
})

describe('who may', () => {
  test('an administrator makes and revokes, a master cooper reads, the others neither', async () => {
    const query = { state: 'all', limit: 50 } as const
    expect((await listDevices(people.masterCooper.actor, query)).items.length).toBeGreaterThan(3)
    for (const person of [people.chemist, people.toaster, people.customer]) {
      expect(await refusalOf(listDevices(person.actor, query))).toMatchObject({ kind: 'not allowed' })
    }
    const { device } = await make()
    for (const person of [people.masterCooper, people.chemist, people.toaster, people.customer]) {
      expect(await refusalOf(revokeDevice(person.actor, { id: device.id }))).toMatchObject({
        kind: 'not allowed',
      })
      expect(await refusalOf(makeDeviceCode(person.actor, { id: device.id }))).toMatchObject({
        kind: 'not allowed',
      })
    }
  })

  test('the list pages by name, filters by state and says who is there', async () => {
    const device = await createTestDevice(people)
    await createTestPinSession(device, people.toaster.accountId)
    const found = await listDevices(people.administrator.actor, { q: device.name, state: 'in use', limit: 5 })
    expect(found.items).toMatchObject([
      { id: device.id, state: 'enrolled', person: people.toaster.actor.name },
    ])
    const names: string[] = []
    let cursor: string | undefined
    do {
      const page = await listDevices(people.administrator.actor, {
        state: 'all',
        limit: 3,
        ...(cursor === undefined ? {} : { cursor }),
      })
      names.push(...page.items.map((one) => one.name.toLowerCase()))
      cursor = page.nextCursor ?? undefined
    } while (cursor !== undefined)
    expect(names.length).toBeGreaterThan(6)
    const revoked = await listDevices(people.administrator.actor, { state: 'revoked', limit: 50 })
    expect(revoked.items.every((one) => one.state === 'revoked')).toBe(true)
  })
})
