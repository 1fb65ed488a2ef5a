import { randomUUID } from 'node:crypto'
import fc from 'fast-check'
import { afterAll, afterEach, beforeAll, describe, expect, test } from 'vitest'
import { changePassword } from '@/lib/accounts/change-password'
import { checkNewPin } from '@/lib/accounts/check-new-pin'
import { closeAccount } from '@/lib/accounts/close-account'
import { getPin } from '@/lib/accounts/get-pin'
import { listSessions } from '@/lib/accounts/list-sessions'
import { removePin } from '@/lib/accounts/remove-pin'
import { setPin } from '@/lib/accounts/set-pin'
import { signIn } from '@/lib/accounts/sign-in'
import { updateAccount } from '@/lib/accounts/update-account'
import { updatePreferences } from '@/lib/accounts/update-preferences'
import { readSessionActor } from '@/lib/auth/read-session-actor'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { listPinPeople } from '@/lib/devices/list-pin-people'
import { signInByPin } from '@/lib/devices/sign-in-by-pin'
import { isAppError } from '@/lib/errors'
import { setClock } from '@/lib/runtime'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import type { TestDevice } from '@/tests/support/devices'
import { createTestDevice, createTestPinSession, giveTestPin } from '@/tests/support/devices'
import { refusalOf } from '@/tests/support/firing-room'
import type { TestPeople, TestPerson } from '@/tests/support/people'
import { createPeople, createPerson, testPassword } from '@/tests/support/people'

let database: TestDatabase
let people: TestPeople
let device: TestDevice

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
  device = await createTestDevice(people)
})

afterEach(() => setClock(null))

afterAll(async () => {
  await closeOrm()
  await database.drop()
})

const from = { address: '203.0.113.7', userAgent: 'test tablet' }
const PIN = '4173'
const wrong = '8205'

/** Somebody new with a PIN, so that counts of one rule do not disturb another. */
async function toasterWithPin(): Promise<TestPerson> {
  const person = await createPerson({ role: 'toaster', name: `Toaster ${randomUUID().slice(0, 6)}` })
  await giveTestPin(person.accountId, PIN)
  return person
}

const tryPin = (at: TestDevice, accountId: string, pin: string, cookie: string | null = at.cookie) =>
  signInByPin(at.actor, { accountId, pin }, from, cookie)

/** Both cookies of whoever signed in. */
const cookiesOf = (at: TestDevice, setCookie: string) => `${at.cookie}; ${setCookie.split(';')[0] ?? ''}`

describe('choosing a PIN', () => {
  test.each(['1111', '121212', '123123', '1234', '0123', '9876', '7890', '3210', '2580', '901234'])(
    '%s is refused with its reason',
    (pin) => {
      expect(() => checkNewPin(pin)).toThrow(/invalid/)
    },
  )

  test.each(['4173', '0915', '80316', '112358'])('%s is taken', (pin) => {
    expect(() => checkNewPin(pin)).not.toThrow()
  })

  test('nearly every four figures are taken, and every refusal names the field', () => {
    let refused = 0
    for (let n = 0; n < 10_000; n += 1) {
      try {
        checkNewPin(String(n).padStart(4, '0'))
      } catch (error) {
        if (!isAppError(error)) throw error
        expect(Object.keys(error.fields)).toEqual(['pin'])
        refused += 1
      }
    }
    // 100 repetitions of two figures, 20 runs, and the ten drawn on the pad.
    expect(refused).toBe(130)
  })

  test('law: a repetition of whatever figures is refused', () => {
    fc.assert(
      fc.property(fc.stringMatching(/^\d{1,3}$/), (part) => {
        const pin = part.repeat(6 / part.length)
        if (pin.length === 6) expect(() => checkNewPin(pin)).toThrow()
      }),
      { seed: 20270201, numRuns: 200 },
    )
  })

  test('it needs the password, is kept as argon2id, and may not come again', async () => {
    const person = await createPerson({ role: 'master cooper', name: 'Nell Pin' })
    const set = (pin: string, password = testPassword) => setPin(person.actor, { password, pin })
    expect(await getPin(person.actor)).toEqual({ setAt: null, isLocked: false })
    expect(await refusalOf(set(PIN, 'not my password'))).toMatchObject({
      fields: { password: expect.any(String) },
    })
    expect(await set(PIN)).toMatchObject({ setAt: expect.any(String), isLocked: false })
    expect(await refusalOf(set(PIN))).toMatchObject({ fields: { pin: expect.stringContaining('new') } })
    await set('6052')
    expect(await refusalOf(set(PIN))).toMatchObject({ fields: { pin: expect.any(String) } })
    const rows = await queryRows<{ pin_hash: string }>(
      await forkEm(),
      'select pin_hash from account_pins where account_id = ?',
      [person.accountId],
    )
    expect(rows).toHaveLength(2)
    expect(rows.every((row) => row.pin_hash.startsWith('$argon2id$'))).toBe(true)
  })

  test('is for those who may fire', async () => {
    for (const person of [people.administrator, people.customer]) {
      expect(await refusalOf(setPin(person.actor, { password: testPassword, pin: PIN }))).toMatchObject({
        kind: 'not allowed',
      })
    }
  })

  test('another PIN, and none, end what the former opened', async () => {
    const person = await toasterWithPin()
    const first = cookiesOf(device, (await tryPin(device, person.accountId, PIN)).setCookie)
    expect(await readSessionActor(first)).not.toBeNull()
    await setPin(person.actor, { password: testPassword, pin: '7046' })
    expect(await readSessionActor(first)).toBeNull()
    expect(await refusalOf(tryPin(device, person.accountId, PIN))).toMatchObject({ kind: 'invalid' })
    const second = cookiesOf(device, (await tryPin(device, person.accountId, '7046')).setCookie)
    await removePin(person.actor)
    expect(await readSessionActor(second)).toBeNull()
    expect(await refusalOf(tryPin(device, person.accountId, '7046'))).toMatchObject({ kind: 'invalid' })
  })
})

describe('signing in by PIN', () => {
  test('opens a session of that device alone, and says so in the audit trail', async () => {
    const person = await toasterWithPin()
    const { setCookie, sessionId } = await tryPin(device, person.accountId, PIN)
    const actor = await readSessionActor(cookiesOf(device, setCookie))
    expect(actor).toMatchObject({ accountId: person.accountId, byPinAt: { deviceId: device.id } })
    const session = setCookie.split(';')[0] ?? ''
    const other = await createTestDevice(people)
    expect(await readSessionActor(session)).toBeNull()
    expect(await readSessionActor(`${session}; ${other.cookie}`)).toBeNull()
    const [entry] = await queryRows<{ detail: object }>(
      await forkEm(),
      `select detail from audit_entries where action = 'session.started' and subject_id = ? order by seq desc limit 1`,
      [person.accountId],
    )
    expect(entry?.detail).toMatchObject({ byPinAt: device.name, deviceId: device.id })
    const [row] = await queryRows<{ kind: string; hours: number }>(
      await forkEm(),
      `select kind, extract(epoch from expires_at - created_at) / 3600 as hours from sessions where id = ?`,
      [sessionId],
    )
    expect(row?.kind).toBe('device')
    expect(Number(row?.hours)).toBeLessThanOrEqual(12)
  })

  test('ends whoever was signed in at the device before', async () => {
    const [one, two] = [await toasterWithPin(), await toasterWithPin()]
    const first = cookiesOf(device, (await tryPin(device, one.accountId, PIN)).setCookie)
    const second = cookiesOf(device, (await tryPin(device, two.accountId, PIN, first)).setCookie)
    expect(await readSessionActor(first)).toBeNull()
    expect(await readSessionActor(second)).toMatchObject({ accountId: two.accountId })
  })

  test('a person without a PIN, one that is none, a closed account and a wrong PIN are told the same', async () => {
    const person = await toasterWithPin()
    const closed = await toasterWithPin()
    await closeAccount(people.administrator.actor, closed.accountId, { revision: 1 })
    const at = await createTestDevice(people)
    const answers = [
      await refusalOf(tryPin(at, person.accountId, wrong)),
      await refusalOf(tryPin(at, people.chemist.accountId, PIN)),
      await refusalOf(tryPin(at, closed.accountId, PIN)),
      await refusalOf(tryPin(at, randomUUID(), PIN)),
    ]
    expect(new Set(answers.map((answer) => JSON.stringify(answer))).size).toBe(1)
  })

  test('a role that may not fire has no PIN to use, though it had one', async () => {
    const person = await toasterWithPin()
    const cookie = cookiesOf(device, (await tryPin(device, person.accountId, PIN)).setCookie)
    await updateAccount(people.administrator.actor, person.accountId, {
      revision: 1,
      name: person.actor.name,
      role: 'administrator',
      customerId: null,
    })
    expect(await readSessionActor(cookie)).toBeNull()
    expect(await refusalOf(tryPin(device, person.accountId, PIN))).toMatchObject({ kind: 'invalid' })
    expect((await listPinPeople(device.actor)).items.some((one) => one.id === person.accountId)).toBe(false)
  })

  test('nobody signs in at a wall screen', async () => {
    const wall = await createTestDevice(people, 'wall screen')
    const person = await toasterWithPin()
    expect(await refusalOf(tryPin(wall, person.accountId, PIN))).toMatchObject({ kind: 'not allowed' })
    expect((await listPinPeople(wall.actor)).items).toEqual([])
  })

  test('the names are those with a PIN and a role that may fire', async () => {
    const person = await toasterWithPin()
    const { items } = await listPinPeople(device.actor)
    expect(items.find((one) => one.id === person.accountId)).toMatchObject({
      name: person.actor.name,
      isLocked: false,
    })
    for (const other of [people.chemist, people.administrator, people.customer]) {
      expect(items.some((one) => one.id === other.accountId)).toBe(false)
    }
  })
})

describe('guessing', () => {
  test('is throttled for a person at a device: the sixth try waits', async () => {
    const at = await createTestDevice(people)
    const person = await toasterWithPin()
    for (let i = 0; i < 5; i += 1) {
      expect(await refusalOf(tryPin(at, person.accountId, wrong))).toMatchObject({ kind: 'invalid' })
    }
    expect(await refusalOf(tryPin(at, person.accountId, PIN))).toMatchObject({ kind: 'too many' })
    const start = Date.now()
    setClock(() => start + 31_000)
    await tryPin(at, person.accountId, PIN)
  })

  test('going through the names is throttled for the device, and not for another', async () => {
    const at = await createTestDevice(people)
    const crowd = await Promise.all(Array.from({ length: 6 }, () => toasterWithPin()))
    const kinds: string[] = []
    for (const person of crowd) {
      for (let i = 0; i < 2; i += 1) kinds.push((await refusalOf(tryPin(at, person.accountId, wrong))).kind)
    }
    expect(kinds.slice(0, 10)).toEqual(Array.from({ length: 10 }, () => 'invalid'))
    expect(kinds.at(-1)).toBe('too many')
    const [last] = crowd
    await tryPin(await createTestDevice(people), last?.accountId ?? '', PIN)
  })

  test('ten wrong in a row, at whatever devices and however slowly, lock the PIN until the password', async () => {
    const person = await toasterWithPin()
    let at = 0
    const start = Date.now()
    setClock(() => start + at)
    for (let i = 0; i < 10; i += 1) {
      at += 2 * 3600_000
      const refused = await refusalOf(tryPin(await createTestDevice(people), person.accountId, wrong))
      expect(refused.kind).toBe(i < 9 ? 'invalid' : 'too many')
    }
    at += 24 * 3600_000
    const fresh = await createTestDevice(people)
    expect(await refusalOf(tryPin(fresh, person.accountId, PIN))).toMatchObject({
      kind: 'too many',
      detail: expect.stringContaining('password'),
    })
    expect((await listPinPeople(fresh.actor)).items.find((one) => one.id === person.accountId)).toMatchObject(
      { isLocked: true },
    )
    const [noted] = await queryRows(
      await forkEm(),
      `select 1 from audit_entries where action = 'account.pin locked' and subject_id = ?`,
      [person.accountId],
    )
    expect(noted).toBeDefined()
    await signIn({ email: person.email, password: testPassword }, { ...from, address: '203.0.113.90' })
    await tryPin(fresh, person.accountId, PIN)
  })

  test('many at once gain nothing: no more are looked at than one after another', async () => {
    const at = await createTestDevice(people)
    const person = await toasterWithPin()
    const kinds = await Promise.all(
      Array.from({ length: 12 }, async () => (await refusalOf(tryPin(at, person.accountId, wrong))).kind),
    )
    expect(kinds.filter((kind) => kind === 'invalid')).toHaveLength(5)
  })
})

describe('a session by PIN', () => {
  test('changes nothing of an account', async () => {
    const person = await toasterWithPin()
    const { cookie } = await createTestPinSession(device, person.accountId)
    const actor = await readSessionActor(cookie)
    if (actor === null) throw new Error('no session')
    const refused = [
      await refusalOf(
        changePassword(actor, { currentPassword: testPassword, newPassword: 'river stone lamp 7' }),
      ),
      await refusalOf(updatePreferences(actor, { temperatureUnit: 'F' })),
      await refusalOf(setPin(actor, { password: testPassword, pin: '7046' })),
      await refusalOf(removePin(actor)),
      await refusalOf(listSessions(actor)),
    ]
    for (const one of refused) {
      expect(one).toMatchObject({ kind: 'not allowed', detail: expect.stringContaining('password') })
    }
  })

  test('ends when its device was not heard for its minutes and the grace of a cut network', async () => {
    const person = await toasterWithPin()
    const { cookie, sessionId } = await createTestPinSession(device, person.accountId)
    await queryRows(
      await forkEm(),
      `update sessions set expires_at = created_at + interval '12 hours' where id = ?`,
      [sessionId],
    )
    const start = Date.now()
    setClock(() => start + 125 * 60_000)
    expect(await readSessionActor(cookie)).not.toBeNull()
    setClock(() => start + 125 * 60_000 + 131 * 60_000)
    expect(await readSessionActor(cookie)).toBeNull()
  })

  test('is never longer than a shift, by the database itself', async () => {
    const at = await createTestDevice(people)
    const person = await toasterWithPin()
    const { sessionId } = await createTestPinSession(at, person.accountId)
    await expect(
      queryRows(
        await forkEm(),
        `update sessions set expires_at = created_at + interval '13 hours' where id = ?`,
        [sessionId],
      ),
    ).rejects.toThrow(/sessions_device_lifetime/)
  })
})
