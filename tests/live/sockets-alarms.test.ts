import { randomUUID } from 'node:crypto'
import type { Socket } from 'socket.io-client'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { insertAlarmMove } from '@/lib/alarms/insert-alarm-move'
import { closeOrm, forkEm } from '@/lib/db/orm'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { firingStateSchema } from '@/lib/live/events'
import type { FiringState } from '@/lib/live/events'
import { notifyAlarmsChanged } from '@/lib/live/notify'
import { callRoute } from '@/tests/support/api'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import type { Fire } from '@/tests/support/fire'
import { makeFire } from '@/tests/support/fire'
import type { LiveServer } from '@/tests/support/live-server'
import { startLiveServer, until } from '@/tests/support/live-server'
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

/** A viewer of the fire; `states` holds what it was told. */
async function viewer(person: TestPerson): Promise<{ socket: Socket; states: FiringState[] }> {
  const { cookie } = await createTestSession(person.accountId)
  const socket = server.viewer(cookie)
  const states: FiringState[] = []
  socket.on('firing:state', (state: unknown) => states.push(firingStateSchema.parse(state)))
  await new Promise<void>((resolve, reject) => {
    socket.once('connect', () => resolve())
    socket.once('connect_error', reject)
    socket.connect()
  })
  await socket.timeout(5_000).emitWithAck('firing:join', { firingId: fire.firing.id })
  return { socket, states }
}

it('an alarm goes to every viewer with what may be done, and Seen on one screen is seen on the other', async () => {
  const [first, second] = [await viewer(people.toaster), await viewer(people.administrator)]
  const occurrenceId = randomUUID()
  await insertAlarmMove(await forkEm(), {
    firingId: fire.firing.id,
    kind: 'spread',
    subject: '',
    occurrenceId,
    from: 'normal',
    to: 'unacknowledged',
    atMs: Date.now(),
    words: 'The sides are over 15 °C apart. Turn the barrel, spread the fire.',
    value: 18,
    limit: 15,
    reason: null,
    accountId: null,
    shelvedUntilMs: null,
  })
  notifyAlarmsChanged(fire.firing.id)
  const heldBy = ({ states }: { states: FiringState[] }) =>
    states.at(-1)?.alarms.find((alarm) => alarm.id === occurrenceId)
  await until(() => heldBy(first) !== undefined && heldBy(second) !== undefined)
  expect(heldBy(first)).toMatchObject({ kind: 'spread', level: 'amber', mayAcknowledge: true })
  const answer = await callRoute('POST', `/api/alarms/${occurrenceId}/acknowledge`, {
    cookie: people.toaster.cookie,
  })
  expect(answer.status).toBe(200)
  await until(() => heldBy(second)?.state === 'acknowledged', 2_000)
  expect(heldBy(second)?.mayAcknowledge).toBe(false)
})

it('an alarm adds less than 400 bytes to a state', () => {
  const alarm: FiringState['alarms'][number] = {
    id: randomUUID(),
    kind: 'gateway lost',
    words:
      'No word from the gateway. Look at the barrel, then at Gateway hearths 1, 2, 3, its power and cable.',
    level: 'amber',
    sinceMs: Date.now(),
    state: 'returned unacknowledged',
    mayAcknowledge: true,
    shelvedUntilMs: null,
  }
  expect(JSON.stringify(alarm).length).toBeLessThan(400)
})
