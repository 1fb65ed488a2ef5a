import { afterAll, afterEach, beforeAll, describe, expect, test } from 'vitest'
import { SMTPServer } from 'smtp-server'
import type { AddressInfo } from 'node:net'
import { createFirstAdministratorLink } from '@/lib/accounts/create-first-administrator-link'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { settleBackground } from '@/lib/mail/in-background'
import { setClock } from '@/lib/runtime'
import { callRoute } from '@/tests/support/api'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import { setTestEnvironment } from '@/tests/support/environment'
import type { TestPeople } from '@/tests/support/people'
import { createPeople, createPerson, testPassword } from '@/tests/support/people'

let database: TestDatabase
let people: TestPeople
let firstLink: string
const mails: { to: string; text: string }[] = []
let isRefusing = false

const mailServer = new SMTPServer({
  disabledCommands: ['AUTH', 'STARTTLS'],
  onRcptTo: (_address, _session, done) => done(isRefusing ? new Error('refused') : undefined),
  onData: (stream, session, done) => {
    const parts: Buffer[] = []
    stream.on('data', (part: Buffer) => parts.push(part))
    stream.on('end', () => {
      const to = session.envelope.rcptTo.map((address) => address.address).join(',')
      mails.push({ to, text: decodeQuotedPrintable(Buffer.concat(parts).toString('utf8')) })
      done()
    })
  },
})

/** Long lines travel folded, and "=" as "=3D". */
function decodeQuotedPrintable(text: string): string {
  return text.replaceAll(/=\r?\n/g, '').replaceAll(/=([0-9A-F]{2})/g, (_, code: string) => {
    return String.fromCharCode(parseInt(code, 16))
  })
}

beforeAll(async () => {
  await new Promise<void>((done) => mailServer.listen(0, '127.0.0.1', done))
  const { port } = mailServer.server.address() as AddressInfo
  process.env['SMTP_URL'] = `smtp://127.0.0.1:${port}`
  database = await createTestDatabase()
  setTestEnvironment(database)
  const link = await createFirstAdministratorLink()
  firstLink = link?.url ?? ''
})

afterEach(() => setClock(null))

afterAll(async () => {
  await settleBackground()
  await closeOrm()
  await database.drop()
  await new Promise<void>((done) => mailServer.close(done))
})

function tokenOf(text: string): string {
  return /#token=([\w-]+)/.exec(text)?.[1] ?? ''
}

const good = 'orchard ledger pumice 7'
const at = '/api/invitations/accept'

describe('the first administrator', () => {
  const make = (token: string, password: string = good) =>
    callRoute('POST', '/api/first-administrator', {
      body: { token, email: 'Ada@Example.test', name: 'Ada Quill', password },
    })

  test('is made by the printed link, once, and is signed in', async () => {
    expect((await make('not a token')).status).toBe(404)
    expect((await make(tokenOf(firstLink), 'Ada@Example.test')).status).toBe(422)
    const made = await make(tokenOf(firstLink))
    expect(made.status).toBe(204)
    const me = await callRoute('GET', '/api/me', { cookie: made.cookie ?? '' })
    expect(me.json).toMatchObject({ role: 'administrator', name: 'Ada Quill' })
    expect((await make(tokenOf(firstLink))).status).toBe(404)
    expect(await createFirstAdministratorLink()).toBeNull()
  })
})

describe('an invitation', () => {
  beforeAll(async () => {
    people = await createPeople(database)
  })

  const invite = (body: object) =>
    callRoute('POST', '/api/accounts', { cookie: people.administrator.cookie, body })

  test('is mailed, greets its person, and is spent by choosing a password', async () => {
    const invited = await invite({ email: 'ines@example.test', name: 'Ines Vale', role: 'chemist' })
    expect(invited.status).toBe(201)
    expect(invited.json).toMatchObject({ isMailSent: true, link: null, account: { state: 'invited' } })
    const mail = mails.find((one) => one.to === 'ines@example.test')
    expect(mail?.text).toContain('Test Yard Cooperage')
    const token = tokenOf(mail?.text ?? '')
    expect(invited.text).not.toContain(token)
    const seen = await callRoute('POST', '/api/account-links/inspect', { body: { token } })
    expect(seen.json).toMatchObject({ purpose: 'invitation', name: 'Ines Vale' })
    expect((await callRoute('POST', at, { body: { token, password: 'password1234' } })).status).toBe(422)
    const accepted = await callRoute('POST', at, { body: { token, password: good, name: 'Inês Vale' } })
    expect(accepted.status).toBe(204)
    expect((await callRoute('GET', '/api/me', { cookie: accepted.cookie ?? '' })).json).toMatchObject({
      name: 'Inês Vale',
      role: 'chemist',
    })
    expect((await callRoute('POST', at, { body: { token, password: good } })).status).toBe(404)
  })

  test('is stored as a hash only', async () => {
    const rows = await queryRows<{ token_sha256: string }>(
      await forkEm(),
      'select token_sha256 from account_links',
    )
    for (const mail of mails) {
      const token = tokenOf(mail.text)
      for (const row of rows) expect(row.token_sha256).not.toContain(token)
    }
  })

  test('runs out after 3 days; a new one ends the older', async () => {
    const invited = await invite({ email: 'otto@example.test', name: 'Otto Late', role: 'toaster' })
    const id = (invited.json as { account: { id: string } }).account.id
    const first = tokenOf(mails.at(-1)?.text ?? '')
    const again = await callRoute('POST', `/api/accounts/${id}/invitation`, {
      cookie: people.administrator.cookie,
    })
    expect(again.json).toMatchObject({ isMailSent: true })
    const second = tokenOf(mails.at(-1)?.text ?? '')
    expect((await callRoute('POST', at, { body: { token: first, password: good } })).status).toBe(404)
    const start = Date.now()
    setClock(() => start + 3 * 24 * 3600_000 + 1000)
    expect((await callRoute('POST', at, { body: { token: second, password: good } })).status).toBe(404)
  })

  test('of two who accept at once, one gets in', async () => {
    await invite({ email: 'twice@example.test', name: 'Twice Asked', role: 'toaster' })
    const token = tokenOf(mails.at(-1)?.text ?? '')
    const answers = await Promise.all(
      [1, 2, 3].map(() => callRoute('POST', at, { body: { token, password: good } })),
    )
    expect(answers.map((answer) => answer.status).sort()).toEqual([204, 404, 404])
  })

  test('that cannot be mailed keeps the account and gives the link to the administrator', async () => {
    isRefusing = true
    const invited = await invite({ email: 'nomail@example.test', name: 'No Mail', role: 'toaster' })
    isRefusing = false
    expect(invited.status).toBe(201)
    expect(invited.json).toMatchObject({ isMailSent: false })
    const token = tokenOf((invited.json as { link: string }).link)
    expect((await callRoute('POST', at, { body: { token, password: good } })).status).toBe(204)
  })

  test('of an e-mail that has an account names the field', async () => {
    const answer = await invite({ email: 'INES@example.test', name: 'Ines', role: 'toaster' })
    expect(answer.json).toMatchObject({ status: 422, fields: { email: expect.any(String) } })
  })

  test('of a customer’s person needs the customer', async () => {
    const body = { email: 'v@example.test', name: 'V', role: 'customer' }
    expect((await invite(body)).json).toMatchObject({ fields: { customerId: expect.any(String) } })
    const invited = await invite({ ...body, customerId: people.customers.second.id })
    expect(invited.json).toMatchObject({ account: { customer: { name: 'Ferry Lane Cellars' } } })
  })
})

describe('a password reset', () => {
  const ask = (email: string) => callRoute('POST', '/api/password-resets', { body: { email } })

  test('answers the same for an unknown e-mail, and mails the known one only', async () => {
    const person = await createPerson({ role: 'toaster', name: 'Fay Forgot' })
    const before = mails.length
    const answers = [await ask(person.email.toUpperCase()), await ask('unknown@example.test')]
    await settleBackground()
    expect(new Set(answers.map((answer) => `${answer.status} ${answer.text}`)).size).toBe(1)
    expect(mails.slice(before).map((mail) => mail.to)).toEqual([person.email])
  })

  test('serves once within the hour and ends every session', async () => {
    const person = await createPerson({ role: 'toaster', name: 'Hal Hour' })
    await ask(person.email)
    await settleBackground()
    const token = tokenOf(mails.at(-1)?.text ?? '')
    const complete = (password: string) =>
      callRoute('POST', '/api/password-resets/complete', { body: { token, password } })
    const start = Date.now()
    setClock(() => start + 3601_000)
    expect((await complete(good)).status).toBe(404)
    setClock(null)
    expect((await complete('hal hour hal hour')).status).toBe(422)
    expect((await complete(good)).status).toBe(204)
    expect((await complete(good)).status).toBe(404)
    expect((await callRoute('GET', '/api/me', { cookie: person.cookie })).status).toBe(401)
    const sign = (password: string) =>
      callRoute('POST', '/api/session', { body: { email: person.email, password } })
    expect((await sign(testPassword)).status).toBe(422)
    expect((await sign(good)).status).toBe(204)
    await settleBackground()
    expect(mails.at(-1)?.text).toMatch(/was changed on/)
  })

  test('link does not accept an invitation, nor the reverse', async () => {
    const person = await createPerson({ role: 'toaster', name: 'Cross Wise' })
    await ask(person.email)
    await settleBackground()
    const token = tokenOf(mails.at(-1)?.text ?? '')
    expect((await callRoute('POST', at, { body: { token, password: good } })).status).toBe(404)
  })
})
