import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, test, vi } from 'vitest'
import * as argon2 from '@node-rs/argon2'
import { signIn } from '@/lib/accounts/sign-in'
import { countResetRequest, countSignInTry, forgetOldTries } from '@/lib/auth/throttle'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { isAppError } from '@/lib/errors'
import { setClock } from '@/lib/runtime'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import type { TestPeople } from '@/tests/support/people'
import { createPeople, testPassword } from '@/tests/support/people'

vi.mock('@node-rs/argon2', async (importOriginal) => {
  const original = await importOriginal<typeof argon2>()
  return { ...original, verify: vi.fn(original.verify), hash: vi.fn(original.hash) }
})

let database: TestDatabase
let people: TestPeople
let nowMs = Date.parse('2027-02-01T08:00:00Z')

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
})

beforeEach(async () => {
  nowMs += 7 * 24 * 3600_000
  setClock(() => nowMs)
  await queryRows(await forkEm(), 'delete from sign_in_throttles')
})

afterEach(() => setClock(null))

afterAll(async () => {
  await closeOrm()
  await database.drop()
})

const here = { address: '203.0.113.5', userAgent: 'test' }
const elsewhere = (last: number) => ({ address: `198.51.100.${last}`, userAgent: 'test' })

/** 'in', 'wrong', or the seconds to wait. */
async function tryIn(email: string, password: string, device = here): Promise<'in' | 'wrong' | number> {
  try {
    await signIn({ email, password }, device)
    return 'in'
  } catch (error) {
    if (!isAppError(error)) throw error
    return error.kind === 'too many' ? (error.retryAfterS ?? -1) : 'wrong'
  }
}

async function fail(times: number, email: string, device = here) {
  for (let time = 0; time < times; time += 1) expect(await tryIn(email, 'wrong', device)).toBe('wrong')
}

describe('after five failures of one account from one address', () => {
  test('the sixth waits 30 s, and each further failure doubles it up to 15 minutes', async () => {
    const { email } = people.toaster
    await fail(5, email)
    const waits: number[] = []
    for (let more = 0; more < 7; more += 1) {
      const wait = await tryIn(email, 'wrong')
      if (typeof wait !== 'number') throw new Error('not blocked')
      waits.push(wait)
      nowMs += wait * 1000
      expect(await tryIn(email, 'wrong')).toBe('wrong')
    }
    expect(waits).toEqual([30, 60, 120, 240, 480, 900, 900])
  })

  test('even the right password waits, and then succeeds and clears the count', async () => {
    const { email } = people.toaster
    await fail(5, email)
    expect(await tryIn(email, testPassword)).toBe(30)
    nowMs += 30_000
    expect(await tryIn(email, testPassword)).toBe('in')
    await fail(5, email)
  })

  test('letters’ case of the e-mail does not begin a new count', async () => {
    const { email } = people.toaster
    await fail(3, email)
    await fail(2, email.toUpperCase())
    expect(await tryIn(email, 'wrong')).toBe(30)
  })

  test('an unknown e-mail is counted in just the same way', async () => {
    await fail(5, 'nobody@example.test')
    expect(await tryIn('nobody@example.test', 'wrong')).toBe(30)
  })

  test('a quiet hour forgets the count', async () => {
    const { email } = people.toaster
    await fail(4, email)
    nowMs += 3601_000
    await fail(4, email)
  })

  test('many at once count as many: none slips through while another is being checked', async () => {
    const { email } = people.toaster
    const answers = await Promise.all(Array.from({ length: 9 }, () => tryIn(email, 'wrong')))
    expect(answers.filter((answer) => answer === 'wrong')).toHaveLength(5)
  })
})

describe('no colleague is locked out for long', () => {
  test('a stranger’s failures do not touch the person at an address where he signed in before', async () => {
    const { email } = people.chemist
    expect(await tryIn(email, testPassword)).toBe('in')
    for (let last = 1; last <= 10; last += 1) await fail(1, email, elsewhere(last))
    expect(await tryIn(email, testPassword, elsewhere(11))).toBeLessThanOrEqual(5)
    expect(await tryIn(email, testPassword)).toBe('in')
  })

  test('from a new address the account is slowed by 5 s at most, however many failed', async () => {
    const { email } = people.masterCooper
    for (let last = 1; last <= 30; last += 1) {
      await tryIn(email, 'wrong', elsewhere(last))
      nowMs += 5_000
    }
    await tryIn(email, 'wrong', elsewhere(31))
    const wait = await tryIn(email, testPassword, elsewhere(32))
    expect(wait).toBe(5)
    nowMs += 5_000
    expect(await tryIn(email, testPassword, elsewhere(32))).toBe('in')
  })

  test('a colleague at the same address as a forgetful one is slowed by 2 s at most', async () => {
    for (let one = 0; one < 40; one += 1) {
      await tryIn(`forgetful${one}@example.test`, 'wrong')
      nowMs += 2_000
    }
    await tryIn('forgetful@example.test', 'wrong')
    expect(await tryIn(people.customer.email, testPassword)).toBe(2)
    nowMs += 2_000
    expect(await tryIn(people.customer.email, testPassword)).toBe('in')
  })
})

describe('what takes time', () => {
  test('is the same for a known and an unknown e-mail: one argon2 verification each, by the same parameters', async () => {
    await tryIn(people.toaster.email, 'wrong')
    const verify = vi.mocked(argon2.verify)
    const runs: { verified: number; parameters: string | undefined; statements: number }[] = []
    for (const email of [people.administrator.email, 'nobody.at.all@example.test']) {
      verify.mockClear()
      const statements = await countStatements(() => tryIn(email, 'wrong', elsewhere(90)))
      const hashed = String(verify.mock.calls[0]?.[0])
      runs.push({ verified: verify.mock.calls.length, parameters: hashed.split('$')[3], statements })
    }
    expect(runs[0]?.verified).toBe(1)
    expect(runs[0]).toEqual(runs[1])
  })
})

async function countStatements(work: () => Promise<unknown>): Promise<number> {
  const { getOrm } = await import('@/lib/db/orm')
  const connection = (await getOrm()).em.getConnection()
  const spy = vi.spyOn(connection, 'execute')
  await work()
  const count = spy.mock.calls.length
  spy.mockRestore()
  return count
}

describe('requests for a reset mail', () => {
  test('are three an hour for one e-mail, known or not', async () => {
    for (const email of [people.toaster.email, 'nobody@example.test']) {
      for (let time = 0; time < 3; time += 1) await countResetRequest(email, `192.0.2.${time}`)
      await expect(countResetRequest(email, '192.0.2.9')).rejects.toMatchObject({ kind: 'too many' })
    }
    nowMs += 3601_000
    await countResetRequest(people.toaster.email, '192.0.2.1')
  })

  test('are twenty an hour from one address', async () => {
    for (let time = 0; time < 20; time += 1) await countResetRequest(`p${time}@example.test`, '192.0.2.77')
    await expect(countResetRequest('p20@example.test', '192.0.2.77')).rejects.toMatchObject({
      kind: 'too many',
      retryAfterS: 3600,
    })
  })
})

test('quiet counters leave the table', async () => {
  await countSignInTry('someone@example.test', '192.0.2.1')
  nowMs += 3 * 3600_000
  await forgetOldTries()
  const [row] = await queryRows<{ n: number }>(
    await forkEm(),
    'select count(*)::int as n from sign_in_throttles',
  )
  expect(row?.n).toBe(0)
})
