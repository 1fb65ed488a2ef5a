import { randomUUID } from 'node:crypto'
import type { PersonActor, Role } from '@/lib/auth/actor'
import { hashPassword } from '@/lib/auth/password'
import { sealSessionCookie, sessionCookieName } from '@/lib/auth/session-cookie'
import { forkEm, queryRows } from '@/lib/db/orm'
import { now } from '@/lib/runtime'
import { defaultSiteRules } from '@/lib/science/site-rules'
import type { TestDatabase } from '@/tests/support/database'
import { setTestEnvironment } from '@/tests/support/environment'

export type TestPerson = {
  accountId: string
  sessionId: string
  email: string
  password: string
  /** A Cookie header of a live session. */
  cookie: string
  /** For calling verbs directly. */
  actor: PersonActor
}

export type TestCustomer = { id: string; name: string }

export type TestPeople = {
  administrator: TestPerson
  masterCooper: TestPerson
  /** A second master cooper, since nobody approves a version of his own. */
  secondMasterCooper: TestPerson
  chemist: TestPerson
  toaster: TestPerson
  customer: TestPerson
  secondCustomer: TestPerson
  customers: { first: TestCustomer; second: TestCustomer }
}

export const testPassword = 'resin lantern gravel 41'

/**
 * One signed-in person of each role (two customers, two master coopers), both customers, and version 1 of the site's
 * settings with the product's default rules. Also points this process at the database.
 */
export async function createPeople(database: Pick<TestDatabase, 'databaseUrl'>): Promise<TestPeople> {
  setTestEnvironment(database)
  const passwordHash = await hashPassword(testPassword)
  await createTestSite()
  const first = await createTestCustomer('Upper Terrace Winery')
  const second = await createTestCustomer('Ferry Lane Cellars')
  const make = (role: Role, name: string, customerId: string | null = null) =>
    createPerson({ role, name, customerId, passwordHash })
  return {
    administrator: await make('administrator', 'Ada Quill'),
    masterCooper: await make('master cooper', 'Mattis Bole'),
    secondMasterCooper: await make('master cooper', 'Sunniva Croft'),
    chemist: await make('chemist', 'Cora Lind'),
    toaster: await make('toaster', 'Tobin Ash'),
    customer: await make('customer', 'Vera Upton', first.id),
    secondCustomer: await make('customer', 'Felix Ferry', second.id),
    customers: { first, second },
  }
}

async function createTestSite(): Promise<void> {
  await queryRows(
    await forkEm(),
    `insert into site_settings (version, name, serial_prefix, time_zone, rules, is_demo, created_at)
     values (1, 'Test Yard Cooperage', 'TST', 'Europe/Paris', ?::jsonb, false, ?)
     on conflict do nothing`,
    [JSON.stringify(defaultSiteRules), now()],
  )
}

export async function createTestCustomer(name: string): Promise<TestCustomer> {
  const id = randomUUID()
  await queryRows(await forkEm(), 'insert into customers (id, name, created_at) values (?, ?, ?)', [
    id,
    name,
    now(),
  ])
  return { id, name }
}

/** Another account with a live session; each e-mail is new. */
export async function createPerson(person: {
  role: Role
  name: string
  customerId?: string | null
  passwordHash?: string
}): Promise<TestPerson> {
  const accountId = randomUUID()
  const customerId = person.customerId ?? null
  const email = `${person.name.toLowerCase().replaceAll(/[^a-z]+/g, '.')}.${accountId.slice(0, 6)}@example.test`
  await queryRows(
    await forkEm(),
    `insert into accounts (id, email, name, role, customer_id, password_hash, state, created_at, updated_at)
     values (?, ?, ?, ?, ?, ?, 'active', ?, ?)`,
    [
      accountId,
      email,
      person.name,
      person.role,
      customerId,
      person.passwordHash ?? (await hashPassword(testPassword)),
      now(),
      now(),
    ],
  )
  const { sessionId, cookie } = await createTestSession(accountId)
  const actor: PersonActor = {
    kind: 'person',
    accountId,
    sessionId,
    name: person.name,
    role: person.role,
    customerId,
    temperatureUnit: 'C',
  }
  return { accountId, sessionId, email, password: testPassword, cookie, actor }
}

/** One more live session of an account, as another device would have it. */
export async function createTestSession(accountId: string): Promise<{ sessionId: string; cookie: string }> {
  const sessionId = randomUUID()
  const at = now()
  await queryRows(
    await forkEm(),
    `insert into sessions (id, account_id, created_at, last_seen_at, expires_at) values (?, ?, ?, ?, ?)`,
    [sessionId, accountId, at, at, new Date(at.getTime() + 7 * 24 * 3600 * 1000)],
  )
  const header = await sealSessionCookie(sessionId)
  const cookie = header.split(';')[0] ?? ''
  if (!cookie.startsWith(`${sessionCookieName}=`)) throw new Error('The session cookie has another name')
  return { sessionId, cookie }
}
