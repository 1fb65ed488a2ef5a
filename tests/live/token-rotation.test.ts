import type { Socket } from 'socket.io-client'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { rotateGatewayToken } from '@/lib/ingest/rotate-gateway-token'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import { makeFire } from '@/tests/support/fire'
import type { LiveServer } from '@/tests/support/live-server'
import { nextEvent, startLiveServer, until } from '@/tests/support/live-server'
import type { TestPeople } from '@/tests/support/people'
import { createPeople } from '@/tests/support/people'

let database: TestDatabase
let people: TestPeople
let server: LiveServer

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
  server = await startLiveServer()
})

afterAll(async () => {
  await server.stop()
  await closeIngestPool()
  await closeOrm()
  await database.drop()
})

function ask(socket: Socket, message: unknown): Promise<Record<string, unknown>> {
  return socket.timeout(5_000).emitWithAck('readings:send', message)
}

it('a rotated token’s open socket stays until the new token speaks, and is closed within 5 s of it', async () => {
  const fire = await makeFire(people, Date.now() - 100_000)
  const { gatewayId, tokenId, token } = fire.gateway
  const old = server.gateway(token)
  await nextEvent(old, 'connect')
  const made = await rotateGatewayToken(people.administrator.actor, { gatewayId, tokenId })
  expect(await ask(old, fire.message(fire.readings(0, 1)))).toMatchObject({ ackedSeq: expect.any(Number) })
  await new Promise((resolve) => setTimeout(resolve, 3_000))
  expect(old.connected).toBe(true)
  const next = server.gateway(made.token)
  await nextEvent(next, 'connect')
  await until(() => !old.connected, 5_000)
  expect(await ask(next, fire.message(fire.readings(1, 2)))).toMatchObject({ ackedSeq: expect.any(Number) })
})

it('a token whose replacement never spoke closes its open socket when its day is over', async () => {
  const fire = await makeFire(people, Date.now() - 100_000)
  const socket = server.gateway(fire.gateway.token)
  await nextEvent(socket, 'connect')
  await queryRows(await forkEm(), `update gateway_tokens set expires_at = now() where id = ?`, [
    fire.gateway.tokenId,
  ])
  await until(() => !socket.connected, 5_000)
})
