import { Client } from 'pg'
import type { Socket } from 'socket.io-client'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { keepConnected } from '@/components/live/keep-connected'
import { createLiveFiringClient } from '@/components/live/live-firing-client'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { ingestAnswerSchema } from '@/lib/gateway/protocol'
import { recheckMs } from '@/lib/live/attach-live'
import { roomStateSchema } from '@/lib/live/events'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import { createTestDevice, createTestPinSession } from '@/tests/support/devices'
import type { Fire } from '@/tests/support/fire'
import { makeFire } from '@/tests/support/fire'
import type { LiveServer } from '@/tests/support/live-server'
import { nextEvent, startLiveServer, until } from '@/tests/support/live-server'
import type { TestPeople, TestPerson } from '@/tests/support/people'
import { createPeople, createTestSession } from '@/tests/support/people'

let database: TestDatabase
let people: TestPeople
let server: LiveServer
let fire: Fire

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
  fire = await makeFire(people, Date.now() - 600_000)
  server = await startLiveServer()
})

afterAll(async () => {
  await server.stop()
  await closeIngestPool()
  await closeOrm()
  await database.drop()
})

function connect(socket: Socket): Promise<Socket> {
  return new Promise((resolve, reject) => {
    socket.once('connect', () => resolve(socket))
    socket.once('connect_error', reject)
    socket.connect()
  })
}

async function connectedViewer(person: TestPerson): Promise<Socket> {
  const { cookie } = await createTestSession(person.accountId)
  return connect(server.viewer(cookie))
}

function ask(socket: Socket, event: string, payload: unknown): Promise<Record<string, unknown>> {
  return socket.timeout(5_000).emitWithAck(event, payload)
}

it('a reading is acknowledged only after its commit', async () => {
  const gateway = server.gateway(fire.gateway.token)
  const locker = new Client({ connectionString: database.ownerUrl })
  await locker.connect()
  try {
    await locker.query('begin')
    // Nobody can write to the table until this transaction ends; what the gateway sends waits.
    await locker.query('lock table readings in share mode')
    let answer: unknown = null
    const sent = ask(gateway, 'readings:send', fire.message(fire.readings(-100, -90))).then(
      (got) => (answer = got),
    )
    await new Promise((resolve) => setTimeout(resolve, 700))
    expect(answer).toBeNull()
    await locker.query('commit')
    await sent
    expect(ingestAnswerSchema.parse(answer)).toEqual({ ackedSeq: 100, refused: [] })
    const rows = await queryRows<{ count: string }>(
      await forkEm(),
      'select count(*) from readings where probe_no in (?, ?)',
      [fire.lead.no, fire.opposite.no],
    )
    expect(Number(rows[0]?.count)).toBe(100)
  } finally {
    await locker.end()
  }
})

it('a wrong token is refused at the handshake, with the problem', async () => {
  const error = await nextEvent<Error & { data?: unknown }>(server.gateway('emb_wrong'), 'connect_error')
  expect(error.data).toMatchObject({ status: 401 })
})

it('a revoked token closes the socket with the next message, and by itself within 5 s', async () => {
  const other = await makeFire(people, Date.now() - 100_000)
  const [sending, silent] = [server.gateway(other.gateway.token), server.gateway(other.gateway.token)]
  await Promise.all([nextEvent(sending, 'connect'), nextEvent(silent, 'connect')])
  await queryRows(await forkEm(), 'update gateway_tokens set revoked_at = now() where id = ?', [
    other.gateway.tokenId,
  ])
  const answer = await ask(sending, 'readings:send', other.message(other.readings(0, 1)))
  expect(answer).toMatchObject({ status: 401 })
  await until(() => !sending.connected, 1_000)
  await until(() => !silent.connected, 5_000)
})

it('a malformed message is a problem, and the socket stays', async () => {
  const gateway = server.gateway(fire.gateway.token)
  expect(await ask(gateway, 'readings:send', { nonsense: true })).toMatchObject({ status: 422 })
  expect(gateway.connected).toBe(true)
})

it.each(['administrator', 'masterCooper', 'chemist', 'toaster'] as const)('%s may follow', async (who) => {
  const socket = await connectedViewer(people[who])
  const answer = await ask(socket, 'firing:join', { firingId: fire.firing.id })
  expect(answer).toMatchObject({ firingId: fire.firing.id, isFresh: true })
  expect(roomStateSchema.parse(await ask(socket, 'room:join', {})).firings.length).toBeGreaterThan(0)
})

it.each([
  ['a customer', () => people.customer.cookie, {}, 403],
  ['another customer', () => people.secondCustomer.cookie, {}, 403],
  ['nobody', () => null, {}, 401],
  ['a forged cookie', () => 'emberstave_session=Fe26.2*nonsense', {}, 401],
  ["another site's page", () => people.toaster.cookie, { origin: 'https://elsewhere.example' }, 403],
])('%s may not even connect', async (_who, cookie, options, status) => {
  const socket = server.viewer(cookie(), options)
  const refused = nextEvent<Error & { data?: unknown }>(socket, 'connect_error')
  socket.connect()
  expect((await refused).data).toMatchObject({ status })
  socket.close()
})

it.each([
  ['an unknown firing', { firingId: 'b3a0f6c2-5b0e-4a52-9a41-3f1f3fd0a111' }, 404],
  ['no id', {}, 422],
  ['a field too many', { firingId: 'b3a0f6c2-5b0e-4a52-9a41-3f1f3fd0a111', x: 1 }, 422],
])('joining %s is a problem', async (_what, payload, status) => {
  const socket = await connectedViewer(people.toaster)
  expect(await ask(socket, 'firing:join', payload)).toMatchObject({ status })
})

it('signing out and a change of role end the socket within 5 s; another session of the account stays', async () => {
  const first = await createTestSession(people.chemist.accountId)
  const socket = await connect(server.viewer(first.cookie))
  const other = await connectedViewer(people.masterCooper)
  const changing = await connectedViewer(people.secondMasterCooper)
  const ended = nextEvent(socket, 'session:ended', 5_000)
  const changed = nextEvent(changing, 'session:ended', 5_000)
  const em = await forkEm()
  await queryRows(em, 'update sessions set ended_at = now() where id = ?', [first.sessionId])
  await queryRows(em, "update accounts set role = 'chemist' where id = ?", [
    people.secondMasterCooper.accountId,
  ])
  await Promise.all([ended, changed])
  await until(() => !socket.connected && !changing.connected, 1_000)
  expect(other.connected).toBe(true)
})

it('an enrolled device follows with nobody signed in, and goes on while people change at it', async () => {
  const device = await createTestDevice(people)
  const alone = await connect(server.viewer(device.cookie))
  expect(await ask(alone, 'firing:join', { firingId: fire.firing.id })).toMatchObject({ isFresh: true })
  const session = await createTestPinSession(device, people.toaster.accountId)
  const marking = await connect(server.viewer(session.cookie))
  await queryRows(await forkEm(), 'update sessions set ended_at = now() where id = ?', [session.sessionId])
  await new Promise((resolve) => setTimeout(resolve, 2 * recheckMs + 500))
  expect([alone.connected, marking.connected]).toEqual([true, true])
})

it('a revoked device loses its sockets within 5 s, and cannot come back', async () => {
  const device = await createTestDevice(people)
  const session = await createTestPinSession(device, people.toaster.accountId)
  const sockets = [await connect(server.viewer(device.cookie)), await connect(server.viewer(session.cookie))]
  const ended = sockets.map((socket) => nextEvent(socket, 'session:ended', 5_000))
  await queryRows(
    await forkEm(),
    'update devices set revoked_at = now(), revoked_by = created_by where id = ?',
    [device.id],
  )
  await Promise.all(ended)
  await until(() => sockets.every((socket) => !socket.connected), 1_000)
  for (const cookie of [device.cookie, session.cookie]) {
    const socket = server.viewer(cookie)
    const refused = nextEvent<Error & { data?: unknown }>(socket, 'connect_error')
    socket.connect()
    expect((await refused).data).toMatchObject({ status: 401 })
    socket.close()
  }
})

it('a PIN’s session beside no device’s cookie does not even connect', async () => {
  const { sessionCookie } = await createTestPinSession(
    await createTestDevice(people),
    people.toaster.accountId,
  )
  const socket = server.viewer(sessionCookie)
  const refused = nextEvent<Error & { data?: unknown }>(socket, 'connect_error')
  socket.connect()
  expect((await refused).data).toMatchObject({ status: 401 })
  socket.close()
})

it('two viewers of one firing agree on every point and on the state', async () => {
  const [one, two] = await Promise.all([connectedViewer(people.toaster), connectedViewer(people.chemist)])
  const clients = [one, two].map((socket) => createLiveFiringClient(socket, fire.firing.id))
  await until(() => clients.every((client) => client.snapshot().connection.kind === 'live'))
  await fire.send(fire.readings(-90, -60))
  await until(() => clients.every((client) => client.feeds.lead.length === 200))
  const [first, second] = clients
  expect(first?.feeds.lead.atMs()).toEqual(second?.feeds.lead.atMs())
  expect(first?.feeds.lead.tempC()).toEqual(second?.feeds.lead.tempC())
  await until(() => first?.snapshot().state?.atMs === second?.snapshot().state?.atMs)
  expect(first?.snapshot().state).toEqual(second?.snapshot().state)
  for (const client of clients) client.close()
})

it('a viewer who is cut again and again has every point once, and none twice', async () => {
  const mine = await makeFire(people, Date.now() - 300_000)
  await server.hub.reconcile()
  const { cookie } = await createTestSession(people.toaster.accountId)
  const socket = server.viewer(cookie)
  let indices: number[] = []
  const note = (points: readonly [number, ...unknown[]][]) => indices.push(...points.map(([index]) => index))
  // What comes over the wire, before the client looks at it: the server itself sends nothing twice in one epoch.
  socket.on('firing:readings', (message: { points: [number, ...unknown[]][] }) => note(message.points))
  const client = createLiveFiringClient(socket, mine.firing.id)
  const leave = keepConnected(socket)
  await connect(socket)
  await until(() => client.snapshot().connection.kind === 'live')
  let state = 11
  const random = () => (state = (state * 48_271) % 2_147_483_647) / 2_147_483_647
  for (let s = 0; s < 60; s += 1) {
    // Every now and then a second comes late, after the one that follows it.
    const isSwapped = s % 7 === 3
    if (isSwapped) await mine.send(mine.readings(s + 1, s + 2))
    await mine.send(mine.readings(s, s + 1))
    if (random() < 0.3) socket.io.engine.close()
    if (random() < 0.5) await new Promise((resolve) => setTimeout(resolve, random() * 150))
  }
  await mine.send(mine.readings(60, 61))
  const whole = 61 * 5
  await until(() => client.feeds.lead.length === whole && client.feeds.opposite.length === whole, 20_000)
  // The clock offset of the first batch moves all instants alike.
  const startMs = client.feeds.lead.atMs()[0] ?? 0
  expect(Math.abs(startMs - mine.toastMs)).toBeLessThan(1_000)
  const expected = Array.from({ length: whole }, (_, tick) => startMs + tick * 200)
  expect(Array.from(client.feeds.lead.atMs())).toEqual(expected)
  expect(Array.from(client.feeds.opposite.atMs())).toEqual(expected)
  indices = indices.sort((a, b) => a - b)
  expect(new Set(indices).size).toBe(indices.length)
  leave()
  client.close()
}, 60_000)

it('a client that lost its place asks again instead of drawing over a hole', async () => {
  const socket = await connectedViewer(people.toaster)
  const client = createLiveFiringClient(socket, fire.firing.id)
  await until(() => client.snapshot().connection.kind === 'live')
  const before = client.feeds.lead.length
  const silent = [...socket.listeners('firing:readings')]
  for (const listener of silent) socket.off('firing:readings', listener)
  await fire.send(fire.readings(-60, -50))
  await new Promise((resolve) => setTimeout(resolve, 500))
  expect(client.feeds.lead.length).toBe(before)
  for (const listener of silent) socket.on('firing:readings', listener)
  await fire.send(fire.readings(-50, -45))
  await until(() => client.feeds.lead.length === before + 75)
  client.close()
})
