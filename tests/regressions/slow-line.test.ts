import { io } from 'socket.io-client'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { createLiveFiringClient } from '@/components/live/live-firing-client'
import { closeOrm } from '@/lib/db/orm'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import type { Line } from '@/tests/faults/line'
import { openLine } from '@/tests/faults/line'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import { testOrigin } from '@/tests/support/environment'
import { makeFire } from '@/tests/support/fire'
import type { LiveServer } from '@/tests/support/live-server'
import { startLiveServer } from '@/tests/support/live-server'
import type { TestPeople } from '@/tests/support/people'
import { createPeople } from '@/tests/support/people'
import { until } from '@/tests/support/until'

/*
 * On a line whose way there and back takes longer than the client's patience, each answer to a join came after the
 * next join had gone out, and was passed over: the tablet never got its picture.
 */

let database: TestDatabase
let people: TestPeople
let server: LiveServer
let line: Line

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
  server = await startLiveServer()
  line = await openLine(Number(new URL(server.url).port))
})

afterAll(async () => {
  await line.close()
  await server.stop()
  await closeIngestPool()
  await closeOrm()
  await database.drop()
})

it('a tablet on a line of 3.4 s there and back gets its picture, and goes on without asking again', async () => {
  const fire = await makeFire(people, Math.floor(Date.now() / 1000) * 1000 - 30_000)
  await fire.send(fire.readings(0, 20))
  const socket = io(`${line.url}/live`, {
    forceNew: true,
    transports: ['websocket'],
    autoConnect: false,
    extraHeaders: { origin: testOrigin, cookie: people.toaster.cookie },
  })
  let joins = 0
  socket.onAnyOutgoing(() => (joins += 1))
  const client = createLiveFiringClient(socket, fire.firing.id)
  try {
    socket.connect()
    await until(() => socket.connected)
    line.put({ kind: 'slow', delayMs: 1_700 })
    // Whatever was under way is asked again over the slow line.
    socket.disconnect().connect()
    await until(() => client.snapshot().connection.kind === 'live', 25_000)
    const joinsBefore = joins
    await fire.send(fire.readings(20, 25))
    await until(() => client.feeds.lead.length === 125, 15_000)
    expect(joins).toBe(joinsBefore)
  } finally {
    client.close()
    socket.close()
  }
}, 60_000)
