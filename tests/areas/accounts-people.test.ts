import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, test } from 'vitest'
import { closeAccount } from '@/lib/accounts/close-account'
import { createCustomer } from '@/lib/accounts/create-customer'
import { listAccounts } from '@/lib/accounts/list-accounts'
import { listCustomers } from '@/lib/accounts/list-customers'
import { accountListQuery } from '@/lib/accounts/schema'
import { reopenAccount } from '@/lib/accounts/reopen-account'
import { updateAccount } from '@/lib/accounts/update-account'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { setClock } from '@/lib/runtime'
import { callRoute } from '@/tests/support/api'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import type { TestPeople } from '@/tests/support/people'
import { createPeople, createPerson, createTestSession, testPassword } from '@/tests/support/people'

let database: TestDatabase
let people: TestPeople

beforeAll(async () => {
  database = await createTestDatabase()
})

beforeEach(async () => {
  people ??= await createPeople(database)
})

afterEach(() => setClock(null))

afterAll(async () => {
  await closeOrm()
  await database.drop()
})

async function find(id: string) {
  const page = await listAccounts(people.administrator.actor, accountListQuery.parse({ limit: 200 }))
  const account = page.items.find((one) => one.id === id)
  if (account === undefined) throw new Error('not listed')
  return account
}

describe('a change of role', () => {
  test('counts from the next request on, with the same cookie', async () => {
    const person = await createPerson({ role: 'toaster', name: 'Rolf Turner' })
    const read = () => callRoute('GET', '/api/audit-entries', { cookie: person.cookie })
    expect((await read()).status).toBe(403)
    const changed = await updateAccount(people.administrator.actor, person.accountId, {
      revision: 1,
      name: 'Rolf Turner',
      role: 'master cooper',
    })
    expect(changed).toMatchObject({ role: 'master cooper', revision: 2 })
    expect((await read()).status).toBe(200)
    await updateAccount(people.administrator.actor, person.accountId, {
      revision: 2,
      name: 'Rolf Turner',
      role: 'toaster',
    })
    expect((await read()).status).toBe(403)
  })

  test('from staff to customer ends the person’s sessions', async () => {
    const person = await createPerson({ role: 'toaster', name: 'Petra Left' })
    await updateAccount(people.administrator.actor, person.accountId, {
      revision: 1,
      name: 'Petra Left',
      role: 'customer',
      customerId: people.customers.first.id,
    })
    expect((await callRoute('GET', '/api/me', { cookie: person.cookie })).status).toBe(401)
  })

  test('of a stale edit is refused with what is there now', async () => {
    const person = await createPerson({ role: 'toaster', name: 'Stella Late' })
    const edit = (name: string) =>
      callRoute('PUT', `/api/accounts/${person.accountId}`, {
        cookie: people.administrator.cookie,
        body: { revision: 1, name, role: 'toaster' },
      })
    expect((await edit('Stella First')).status).toBe(200)
    const second = await edit('Stella Second')
    expect(second.status).toBe(409)
    expect(second.json).toMatchObject({ current: { name: 'Stella First', revision: 2 } })
  })

  test('to customer needs a customer, and staff have none; the database holds it too', async () => {
    const put = (body: object) =>
      callRoute('PUT', `/api/accounts/${people.toaster.accountId}`, {
        cookie: people.administrator.cookie,
        body: { revision: 1, name: 'Tobin Ash', ...body },
      })
    expect((await put({ role: 'customer' })).json).toMatchObject({
      fields: { customerId: expect.any(String) },
    })
    expect((await put({ role: 'toaster', customerId: people.customers.first.id })).status).toBe(422)
    expect((await put({ role: 'customer', customerId: people.toaster.accountId })).status).toBe(422)
    await expect(
      queryRows(await forkEm(), `update accounts set role = 'customer' where id = ?`, [
        people.toaster.accountId,
      ]),
    ).rejects.toThrow(/accounts_customer_check/)
  })
})

describe('closing an account', () => {
  test('ends its sessions at once, refuses sign-in, and reopening gives both back', async () => {
    const person = await createPerson({ role: 'chemist', name: 'Clara Gone' })
    const other = await createTestSession(person.accountId)
    await closeAccount(people.administrator.actor, person.accountId, { revision: 1 })
    for (const cookie of [person.cookie, other.cookie]) {
      expect((await callRoute('GET', '/api/me', { cookie })).status).toBe(401)
    }
    const body = { email: person.email, password: testPassword }
    expect((await callRoute('POST', '/api/session', { body })).status).toBe(422)
    await reopenAccount(people.administrator.actor, person.accountId, { revision: 2 })
    expect((await callRoute('POST', '/api/session', { body })).status).toBe(204)
    expect((await callRoute('GET', '/api/me', { cookie: person.cookie })).status).toBe(401)
  })

  test('is refused for oneself', async () => {
    const me = people.administrator
    await expect(closeAccount(me.actor, me.accountId, { revision: 1 })).rejects.toMatchObject({
      kind: 'conflict',
    })
    expect((await find(me.accountId)).state).toBe('active')
  })

  test('or changing the role of the last administrator is refused, also when two do it to each other', async () => {
    const second = await createPerson({ role: 'administrator', name: 'Second Admin' })
    const first = people.administrator
    const results = await Promise.allSettled([
      closeAccount(first.actor, second.accountId, { revision: 1 }),
      closeAccount(second.actor, first.accountId, { revision: 1 }),
    ])
    expect(results.filter((result) => result.status === 'fulfilled')).toHaveLength(1)
    const em = await forkEm()
    await queryRows(em, `update accounts set state = 'active', revision = 1 where id = ?`, [first.accountId])
    await queryRows(em, `update accounts set state = 'closed' where id = ?`, [second.accountId])
    await expect(
      updateAccount(first.actor, first.accountId, { revision: 1, name: 'Ada Quill', role: 'toaster' }),
    ).rejects.toMatchObject({ kind: 'conflict', detail: expect.stringContaining('last administrator') })
    people = { ...people, administrator: { ...first, ...(await freshSession(first.accountId)) } }
  })
})

async function freshSession(accountId: string) {
  return createTestSession(accountId)
}

describe('the account table', () => {
  test('pages by name without a hole or a double, and searches name, e-mail and customer', async () => {
    const seen: string[] = []
    let cursor: string | undefined
    do {
      const page = await listAccounts(
        people.administrator.actor,
        accountListQuery.parse({ limit: 2, cursor }),
      )
      seen.push(...page.items.map((item) => item.id))
      cursor = page.nextCursor ?? undefined
    } while (cursor !== undefined)
    const [{ n } = { n: -1 }] = await queryRows<{ n: number }>(
      await forkEm(),
      'select count(*)::int as n from accounts',
    )
    expect(seen).toHaveLength(n)
    expect(new Set(seen).size).toBe(n)
    const found = await listAccounts(
      people.administrator.actor,
      accountListQuery.parse({ q: 'ferry LANE', role: 'customer' }),
    )
    expect(found.items.map((item) => item.name)).toEqual(['Felix Ferry'])
  })

  test('shows no password hash and no token', async () => {
    const answer = await callRoute('GET', '/api/accounts', { cookie: people.toaster.cookie })
    expect(answer.text).not.toMatch(/argon2|hash|token/i)
  })

  test('treats % and _ in a search as letters', async () => {
    const found = await listAccounts(people.administrator.actor, accountListQuery.parse({ q: '%' }))
    expect(found.items).toEqual([])
  })
})

describe('one’s own account', () => {
  test('takes another unit and name, and nothing else', async () => {
    const { cookie } = people.chemist
    const put = (body: object) => callRoute('PUT', '/api/me', { cookie, body })
    expect((await put({ temperatureUnit: 'F' })).json).toMatchObject({
      temperatureUnit: 'F',
      name: 'Cora Lind',
    })
    expect((await put({ role: 'administrator' })).status).toBe(422)
    expect((await put({ name: '  ' })).json).toMatchObject({ fields: { name: 'Write a name.' } })
  })

  test('changes its password by the present one; the other sessions end, this one stays', async () => {
    const person = await createPerson({ role: 'toaster', name: 'Nora Key' })
    const other = await createTestSession(person.accountId)
    const change = (currentPassword: string, newPassword: string) =>
      callRoute('PUT', '/api/me/password', { cookie: person.cookie, body: { currentPassword, newPassword } })
    expect((await change('wrong', 'gravel lantern moss 9')).json).toMatchObject({
      fields: { currentPassword: expect.any(String) },
    })
    expect((await change(testPassword, 'short')).json).toMatchObject({
      fields: { newPassword: expect.stringContaining('12') },
    })
    expect((await change(testPassword, testPassword)).status).toBe(422)
    expect((await change(testPassword, 'gravel lantern moss 9')).status).toBe(204)
    expect((await callRoute('GET', '/api/me', { cookie: person.cookie })).status).toBe(200)
    expect((await callRoute('GET', '/api/me', { cookie: other.cookie })).status).toBe(401)
    const sign = (password: string) =>
      callRoute('POST', '/api/session', { body: { email: person.email, password } })
    expect((await sign(testPassword)).status).toBe(422)
    expect((await sign('gravel lantern moss 9')).status).toBe(204)
  })

  test('lists its sessions and ends one of them, but none of another’s', async () => {
    const person = await createPerson({ role: 'toaster', name: 'Sam Several' })
    const other = await createTestSession(person.accountId)
    const listed = await callRoute('GET', '/api/me/sessions', { cookie: person.cookie })
    expect(listed.json).toMatchObject({
      items: [
        { id: person.sessionId, isThisOne: true },
        { id: other.sessionId, isThisOne: false },
      ],
    })
    const end = (id: string) => callRoute('DELETE', `/api/me/sessions/${id}`, { cookie: person.cookie })
    expect((await end(people.chemist.sessionId)).status).toBe(404)
    expect((await end(other.sessionId)).status).toBe(204)
    expect((await callRoute('GET', '/api/me', { cookie: other.cookie })).status).toBe(401)
    expect((await callRoute('GET', '/api/me', { cookie: people.chemist.cookie })).status).toBe(200)
  })
})

describe('customers', () => {
  test('are added by the master cooper, once a name, letters’ case aside', async () => {
    const { actor } = people.masterCooper
    await createCustomer(actor, { name: 'Long Acre Vintners', contactEmail: null })
    await expect(createCustomer(actor, { name: 'long acre vintners' })).rejects.toMatchObject({
      fields: { name: expect.any(String) },
    })
    const page = await listCustomers(people.toaster.actor, { limit: 50, q: 'ACRE' })
    expect(page.items.map((customer) => customer.name)).toEqual(['Long Acre Vintners'])
    await expect(listCustomers(people.customer.actor, { limit: 50 })).rejects.toMatchObject({
      kind: 'not allowed',
    })
  })
})
