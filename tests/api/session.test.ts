import { afterAll, afterEach, beforeAll, describe, expect, test } from 'vitest'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { setClock } from '@/lib/runtime'
import { callRoute } from '@/tests/support/api'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import type { TestPeople } from '@/tests/support/people'
import { createPeople, createTestSession, testPassword } from '@/tests/support/people'

let database: TestDatabase
let people: TestPeople

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
})

afterEach(() => setClock(null))

afterAll(async () => {
  await closeOrm()
  await database.drop()
})

function signIn(email: string, password: string, address = '198.51.100.7') {
  return callRoute('POST', '/api/session', {
    body: { email, password },
    headers: { 'x-forwarded-for': address },
  })
}

describe('a session', () => {
  test('begins with 204 and a cookie that scripts cannot read, and opens /api/me', async () => {
    const answer = await signIn(people.chemist.email.toUpperCase(), testPassword)
    expect(answer.status).toBe(204)
    expect(answer.headers.get('set-cookie')).toMatch(/HttpOnly; SameSite=Lax/)
    const me = await callRoute('GET', '/api/me', { cookie: answer.cookie ?? '' })
    expect(me.json).toMatchObject({ email: people.chemist.email, role: 'chemist', customer: null })
  })

  test('ends with sign-out at once, wherever its cookie was copied to', async () => {
    const { cookie } = await createTestSession(people.toaster.accountId)
    expect((await callRoute('GET', '/api/me', { cookie })).status).toBe(200)
    const ended = await callRoute('DELETE', '/api/session', { cookie })
    expect(ended.status).toBe(204)
    expect(ended.headers.get('set-cookie')).toMatch(/Max-Age=0/)
    expect((await callRoute('GET', '/api/me', { cookie })).status).toBe(401)
  })

  test('is not opened by a cookie with a broken seal', async () => {
    const cookie = `${people.toaster.cookie.slice(0, -6)}AAAAAA`
    expect((await callRoute('GET', '/api/me', { cookie })).status).toBe(401)
    expect((await callRoute('GET', '/api/me', { cookie: 'emberstave_session=%E0%A4%A' })).status).toBe(401)
  })

  test('ends after 12 h without use', async () => {
    const { cookie } = await createTestSession(people.toaster.accountId)
    const start = Date.now()
    setClock(() => start + 11.9 * 3600_000)
    expect((await callRoute('GET', '/api/me', { cookie })).status).toBe(200)
    setClock(() => start + 24.1 * 3600_000)
    expect((await callRoute('GET', '/api/me', { cookie })).status).toBe(401)
  })

  test('of the same browser that signs in again is replaced, not left open', async () => {
    const first = await signIn(people.chemist.email, testPassword)
    await callRoute('POST', '/api/session', {
      cookie: first.cookie ?? '',
      body: { email: people.chemist.email, password: testPassword },
    })
    expect((await callRoute('GET', '/api/me', { cookie: first.cookie ?? '' })).status).toBe(401)
  })
})

describe('a refused sign-in', () => {
  test('answers the same for an unknown e-mail, a wrong password, an invited and a closed account', async () => {
    const em = await forkEm()
    await queryRows(
      em,
      `insert into accounts (email, name, role, state, created_at, updated_at)
       values ('invited@example.test', 'I', 'toaster', 'invited', now(), now())`,
    )
    await queryRows(
      em,
      `insert into accounts (email, name, role, state, password_hash, created_at, updated_at)
       select 'closed@example.test', 'C', 'toaster', 'closed', password_hash, now(), now()
         from accounts where id = ?`,
      [people.toaster.accountId],
    )
    const answers = [
      await signIn('nobody@example.test', testPassword, '198.51.100.20'),
      await signIn(people.chemist.email, 'not the password', '198.51.100.21'),
      await signIn('invited@example.test', testPassword, '198.51.100.22'),
      await signIn('closed@example.test', testPassword, '198.51.100.23'),
    ]
    expect(new Set(answers.map((answer) => answer.text)).size).toBe(1)
    expect(new Set(answers.map((answer) => answer.status))).toEqual(new Set([422]))
    for (const answer of answers) expect(answer.cookie).toBeNull()
  })

  test('names no column, table or stack', async () => {
    const answer = await signIn('nobody@example.test', 'x', '198.51.100.24')
    expect(Object.keys(answer.json as object).sort()).toEqual(['detail', 'status', 'title', 'type'])
  })
})

describe('a write from elsewhere', () => {
  test('is refused by its origin', async () => {
    const answer = await callRoute('DELETE', '/api/session', {
      cookie: people.toaster.cookie,
      headers: { origin: 'https://elsewhere.example' },
    })
    expect(answer.status).toBe(403)
    expect((await callRoute('GET', '/api/me', { cookie: people.toaster.cookie })).status).toBe(200)
  })

  test('is refused by the browser’s own word', async () => {
    const answer = await callRoute('POST', '/api/session', {
      body: { email: people.toaster.email, password: testPassword },
      headers: { 'sec-fetch-site': 'cross-site' },
    })
    expect(answer.status).toBe(403)
  })
})

describe('bad input', () => {
  test('that is no JSON is 400, of another type 415, too large 413, with unknown fields 422', async () => {
    const call = (body: unknown, headers = {}) => callRoute('POST', '/api/session', { body, headers })
    expect((await call('{')).status).toBe(400)
    expect((await call('a=b', { 'content-type': 'application/x-www-form-urlencoded' })).status).toBe(415)
    expect((await call({ email: 'a@b.example', password: 'x'.repeat(9_000) })).status).toBe(413)
    const unknown = await call({ email: 'a@b.example', password: 'x', role: 'administrator' })
    expect(unknown.status).toBe(422)
    expect(unknown.json).toMatchObject({ fields: { role: expect.any(String) } })
    const empty = await call({})
    expect(empty.json).toMatchObject({
      fields: { email: 'Write your e-mail address.', password: 'Write your password.' },
    })
  })
})
