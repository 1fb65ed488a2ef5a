import { afterAll, beforeAll, expect, it } from 'vitest'
import { closeOrm } from '@/lib/db/orm'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { storeReadings } from '@/lib/ingest/store-readings'
import type { Hub } from '@/lib/live/hub'
import { createHub } from '@/lib/live/hub'
import { hubDoor } from '@/lib/live/hub-door'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import type { Fire } from '@/tests/support/fire'
import { makeFire } from '@/tests/support/fire'
import type { TestPeople } from '@/tests/support/people'
import { createPeople } from '@/tests/support/people'

/*
 * PostgreSQL commits, and goes before it can say so: the rows are there, the server takes them for not stored, and the
 * gateway sends them again. The repeat was dropped without a word to the live hub, so that viewers and the live dose
 * lacked those readings until the next restart.
 */

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

async function shownPoints(hub: Hub, fire: Fire): Promise<number> {
  hub.tick()
  const joined = await hub.join({ firingId: fire.firing.id, epoch: null, lastIndex: -1 }, () => {})
  return joined.points.length
}

it('rows that were committed without the server hearing of it reach the hub with the repeat, once', async () => {
  const fire = await makeFire(people, Math.floor(Date.now() / 1000) * 1000 - 60_000)
  const hub = createHub({ toFiring: () => {}, toRoom: () => {} }, { isSelfWound: false })
  await hub.start()
  try {
    await fire.send(fire.readings(0, 1))
    expect(await shownPoints(hub, fire)).toBe(10)
    const second = fire.readings(1, 2)
    // As the connection's end between commit and answer leaves it: stored, and nobody told.
    const door = hubDoor().current
    hubDoor().current = null
    await storeReadings(fire.gateway, fire.message(second))
    hubDoor().current = door
    expect(await shownPoints(hub, fire)).toBe(10)
    // The answer never came, so the gateway sends the same again, with what it has read since.
    await fire.send([...second, ...fire.readings(2, 3)])
    expect(await shownPoints(hub, fire)).toBe(30)
    await fire.send([...second, ...fire.readings(2, 3)])
    expect(await shownPoints(hub, fire)).toBe(30)
  } finally {
    hub.stop()
  }
})
