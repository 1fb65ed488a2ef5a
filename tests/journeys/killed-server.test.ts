import { io } from 'socket.io-client'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import * as z from 'zod'
import { closeOrm } from '@/lib/db/orm'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import type { FiringJoined } from '@/lib/live/events'
import { events, firingJoinedSchema } from '@/lib/live/events'
import { seedDemo } from '@/simulators/scenarios/demo'
import { demoPassword, demoPeople } from '@/simulators/scenarios/seed-people'
import type { StartedApp } from '@/tests/support/started-app'
import { startApp } from '@/tests/support/started-app'

/* A firing outlives its server: the dose of a live firing is the same after a kill -9 and a restart. */

let app: StartedApp
let cookie = ''
let firingId = ''

beforeAll(async () => {
  app = await startApp(async () => {
    await seedDemo({ hearthCount: 2, liveToastMinutes: [20], historyDays: 10 }, () => {})
    await closeIngestPool()
    await closeOrm()
  })
  const answer = await fetch(`${app.origin}/api/session`, {
    method: 'POST',
    headers: { 'content-type': 'application/json' },
    body: JSON.stringify({ email: demoPeople.masterCooper.email, password: demoPassword }),
  })
  cookie = (answer.headers.get('set-cookie') ?? '').split(';')[0] ?? ''
  const live = await fetch(`${app.origin}/api/firings?state=live`, { headers: { cookie } })
  firingId =
    z.object({ items: z.array(z.object({ id: z.uuid() })) }).parse(await live.json()).items[0]?.id ?? ''
})

afterAll(async () => {
  await app.stop()
})

/** What a viewer who comes now is told of the firing. */
async function join(): Promise<FiringJoined> {
  const socket = io(`${app.origin}/live`, { transports: ['websocket'], extraHeaders: { cookie } })
  try {
    const answer: unknown = await socket.timeout(15_000).emitWithAck(events.firingJoin, { firingId })
    return firingJoinedSchema.parse(answer)
  } finally {
    socket.disconnect()
  }
}

describe('a server killed in a firing', () => {
  it('comes back with the same points and the same dose, to 1e-9', async () => {
    const before = await join()
    expect(before.points.length).toBeGreaterThan(2_000)
    expect(before.state.dose.minutes).toBeGreaterThan(0)
    const readyMs = await app.restart('SIGKILL')
    process.stdout.write(`  ready ${Math.round(readyMs)} ms after the kill\n`)
    const after = await join()
    expect(after.epoch).not.toBe(before.epoch)
    expect(after.isFresh).toBe(true)
    expect(after.points.length).toBe(before.points.length)
    const ratio = after.state.dose.minutes / before.state.dose.minutes
    expect(Math.abs(ratio - 1)).toBeLessThan(1e-9)
  })

  it('a stop by SIGTERM is as harmless', async () => {
    const before = await join()
    await app.restart('SIGTERM')
    const after = await join()
    expect(after.state.dose.minutes).toBe(before.state.dose.minutes)
  })
})
