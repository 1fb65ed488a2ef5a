import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { issuedTokenSchema, tokenListSchema } from '@/lib/ingest/schema'
import { callRoute } from '@/tests/support/api'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
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

function send(token: string | null, body: unknown) {
  return callRoute('POST', '/api/ingest/readings', {
    body,
    headers: token === null ? {} : { authorization: `Bearer ${token}` },
  })
}

it('an administrator makes a token, the gateway uses it, and once revoked its next message is refused', async () => {
  const gateway = await createTestGateway()
  const probe = await createTestProbe(gateway.gatewayId, 1)
  const tokens = `/api/gateways/${gateway.gatewayId}/tokens`
  const { cookie } = people.administrator
  const made = await callRoute('POST', tokens, { cookie })
  expect(made.status).toBe(201)
  const { id, token } = issuedTokenSchema.parse(made.json)
  const at = new Date().toISOString()
  const message = {
    bootId: randomUUID(),
    sentAt: at,
    readings: [
      { seq: 1, probeId: probe.id, at, tempC: 20 },
      { seq: 2, probeId: randomUUID(), at, tempC: 20 },
    ],
  }
  const taken = await send(token, message)
  expect(taken.status).toBe(200)
  expect(taken.json).toEqual({ ackedSeq: 2, refused: [{ seq: 2, reason: 'no probe has this probeId' }] })
  const listed = tokenListSchema.parse((await callRoute('GET', tokens, { cookie })).json)
  const mine = listed.items.find((item) => item.id === id)
  expect(mine).toMatchObject({ createdBy: 'Ada Quill', revokedAt: null })
  expect(mine?.lastUsedAt).not.toBeNull()
  expect(JSON.stringify(listed)).not.toContain(token)
  expect((await callRoute('DELETE', `${tokens}/${id}`, { cookie })).status).toBe(204)
  expect((await send(token, message)).status).toBe(401)
  const audited = await queryRows<{ action: string; detail: string }>(
    await forkEm(),
    'select action, detail::text from audit_entries where subject_id = ? order by seq',
    [gateway.gatewayId],
  )
  expect(audited.map((entry) => entry.action)).toEqual(['gateway.token issued', 'gateway.token revoked'])
  expect(JSON.stringify(audited)).not.toContain(token)
})

it.each(['masterCooper', 'chemist', 'toaster', 'customer'] as const)('%s makes no tokens', async (who) => {
  const gateway = await createTestGateway()
  const answer = await callRoute('POST', `/api/gateways/${gateway.gatewayId}/tokens`, {
    cookie: people[who].cookie,
  })
  expect(answer.status).toBe(403)
})

it('a token of a gateway that is not there, or of another gateway, is not found', async () => {
  const { cookie } = people.administrator
  expect((await callRoute('POST', `/api/gateways/${randomUUID()}/tokens`, { cookie })).status).toBe(404)
  const [one, two] = [await createTestGateway(), await createTestGateway()]
  const path = `/api/gateways/${one.gatewayId}/tokens/${two.tokenId}`
  expect((await callRoute('DELETE', path, { cookie })).status).toBe(404)
})

it('who has no good token learns nothing about the message', async () => {
  for (const token of [null, 'emb_wrong', '']) {
    const answer = await send(token, '{ not even JSON')
    expect(answer.status).toBe(401)
    expect(answer.headers.get('content-type')).toBe('application/problem+json')
  }
})

it('a body that is no JSON, is too large or does not fit is a problem of its own kind', async () => {
  const { token } = await createTestGateway()
  expect((await send(token, '{')).status).toBe(400)
  expect((await send(token, { bootId: 'x' })).status).toBe(422)
  expect((await send(token, `"${' '.repeat(2 * 1024 * 1024)}"`)).status).toBe(413)
})
