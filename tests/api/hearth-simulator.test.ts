import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, test } from 'vitest'
import * as z from 'zod'
import { closeOrm } from '@/lib/db/orm'
import { createGateway } from '@/lib/gateway/gateway'
import { createHttpTransport } from '@/lib/gateway/http-transport'
import { openSpoolFolder } from '@/lib/gateway/spool-files'
import { setClock } from '@/lib/runtime'
import type { DemoGateway } from '@/simulators/hearth/demo-file'
import { openOwnFirings } from '@/simulators/hearth/own-firings'
import { createRoom } from '@/simulators/hearth/room'
import { createServerView } from '@/simulators/hearth/server-view'
import { callRoute } from '@/tests/support/api'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import type { TestPeople } from '@/tests/support/people'
import { createPeople, testPassword } from '@/tests/support/people'
import { sampleContent } from '@/tests/support/recipe-content'

/* The simulator against the real routes and a real database; only the wire between them is left out. */

let database: TestDatabase
let people: TestPeople
let folder = ''

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
  folder = mkdtempSync(join(tmpdir(), 'emberstave-room-'))
})

afterAll(async () => {
  setClock(null)
  await closeOrm()
  await database.drop()
  rmSync(folder, { recursive: true })
})

/** As `fetch`, answered by the route handlers of this process. */
const request: typeof fetch = async (input, init) => {
  const asked = new Request(input, init)
  const { pathname, search } = new URL(asked.url)
  const body = await asked.text()
  const answer = await callRoute(asked.method, pathname + search, {
    headers: Object.fromEntries(asked.headers),
    ...(body === '' ? {} : { body }),
  })
  const hasBody = answer.text !== ''
  return new Response(hasBody ? answer.text : null, { status: answer.status, headers: answer.headers })
}

const idOf = z.looseObject({ id: z.string() })

async function post(cookie: string, path: string, body: unknown): Promise<unknown> {
  const answer = await callRoute('POST', path, { cookie, body })
  expect([200, 201, 204], `${path}: ${answer.text}`).toContain(answer.status)
  return answer.json
}

/** A hearth with three checked probes on one gateway, water in date, and a batch of two waiting barrels. */
async function equipRoom(): Promise<DemoGateway> {
  const { administrator, masterCooper, secondMasterCooper, chemist } = people
  const hearth = idOf.parse(await post(administrator.cookie, '/api/hearths', { number: 1, name: 'Window' }))
  const gateway = idOf.parse(await post(administrator.cookie, '/api/gateways', { name: 'Box 1' }))
  const issued = await post(administrator.cookie, `/api/gateways/${gateway.id}/tokens`, {})
  const { token } = z.looseObject({ token: z.string() }).parse(issued)
  const probes: DemoGateway['probes'] = []
  const dueAt = new Date(Date.now() + 90 * 86_400_000).toISOString()
  for (const [channel, role] of (['lead', 'opposite', 'coals'] as const).entries()) {
    const isCoals = role === 'coals'
    const probe = idOf.parse(
      await post(administrator.cookie, '/api/probes', {
        name: `Probe ${channel}`,
        gatewayId: gateway.id,
        channel,
        thermocoupleType: 'K',
        iecClass: 1,
        hearthId: hearth.id,
        usualRole: role,
        height: isCoals ? 'coals' : 'bilge',
        side: role === 'opposite' ? 'B' : 'A',
        depthMm: isCoals ? 0 : 2,
        mounting: isCoals ? 'hung' : 'wedge',
      }),
    )
    for (const check of [
      { kind: 'ice', measuredTempC: 0 },
      { kind: 'block', referenceTempC: 205, measuredTempC: 205 },
    ])
      await post(administrator.cookie, `/api/probes/${probe.id}/checks`, {
        ...check,
        uncertaintyC: 0.3,
        dueAt,
      })
    probes.push({ id: probe.id, hearth: 1, role, thermocoupleType: 'K' })
  }
  await post(administrator.cookie, '/api/water-checks', {
    source: 'Main',
    tcaNgPerL: 0.5,
    freeChlorineMgPerL: 0,
    dueAt,
  })
  const { preheat, bend, stages } = sampleContent()
  const content = sampleContent({
    preheat: { ...preheat, minutes: 2 },
    bend: { ...bend, minimumMinutes: 3 },
    stages: stages.map((stage, i) => ({ ...stage, minutes: [9, 4, 6][i] ?? 6, cues: [] })),
    restMinutes: 2,
  })
  const recipe = await post(chemist.cookie, '/api/recipes', { name: 'Quay medium', content })
  const { latestVersion } = z.looseObject({ latestVersion: idOf }).parse(recipe)
  await post(chemist.cookie, `/api/recipe-versions/${latestVersion.id}/send-for-review`, {})
  await post(secondMasterCooper.cookie, `/api/recipe-versions/${latestVersion.id}/approve`, {
    password: testPassword,
  })
  await post(masterCooper.cookie, '/api/batches', {
    customerId: people.customers.first.id,
    recipeVersionId: latestVersion.id,
    pieceCount: 2,
    woodLot: 'Lot 7',
  })
  return { id: gateway.id, name: 'Box 1', token, hearths: [1], probes }
}

describe('the hearth simulator against the real routes', () => {
  test('tends a firing of its own to the end, with a curve as planned, and starts the next rose', async () => {
    const demo = await equipRoom()
    const startMs = Date.now()
    let nowMs = startMs
    setClock(() => nowMs)
    const view = createServerView({
      serverUrl: 'http://127.0.0.1',
      email: people.toaster.email,
      password: testPassword,
      request,
    })
    const own = openOwnFirings(join(folder, 'own.json'), startMs + 1_000)
    const said: string[] = []
    const room = createRoom({ view, own, gateways: [demo], say: (one) => said.push(one), pauseMs: 60_000 })
    const files = openSpoolFolder(join(folder, 'spool'))
    const refused: unknown[] = []
    const gateway = createGateway({
      files,
      transports: [createHttpTransport({ serverUrl: 'http://127.0.0.1', token: demo.token, request })],
      clock: {
        nowMs: () => nowMs,
        wait: (durationMs, then) => {
          const timer = setTimeout(then, durationMs)
          return () => clearTimeout(timer)
        },
      },
      onRefused: (_bootId, list) => refused.push(...list),
      onTrouble: (one) => said.push(one),
    })
    const untilSent = async () => {
      for (let i = 0; i < 500 && gateway.status().waiting > 0; i += 1) {
        await new Promise((resolve) => setTimeout(resolve, 5))
      }
    }
    const [hearth] = await view.listHearths()
    const [pieceId] = await view.listWaitingPieceIds()
    const firingId = await view.startFiring(pieceId ?? '', hearth?.id ?? '', 19)

    // 36 min of the room in seconds, one reading a second; the server's clock goes along.
    for (let s = 0; s < 36 * 60; s += 1, nowMs += 1_000) {
      const at = new Date(nowMs).toISOString()
      const drafts = [...room.tick(nowMs).values()].flat().map(({ probe, emf }) => ({
        probeId: demo.probes.find((one) => one.role === probe)?.id ?? '',
        at,
        emf,
      }))
      gateway.record(drafts)
      if (s % 40 !== 0) continue
      await room.look(nowMs)
      await untilSent()
    }
    await untilSent()
    await gateway.stop()
    files.close()

    expect(refused).toEqual([])
    expect(gateway.status().waiting).toBe(0)
    const firing = await view.getFiring(firingId)
    expect(firing.state, said.join('\n')).toBe('finished')
    const marks = firing.marks.filter((mark) => mark.kind === 'phase' || mark.kind === 'stage')
    expect(marks.map((mark) => mark.phase ?? `stage ${mark.stagePosition}`)).toEqual(
      expect.arrayContaining(['bending', 'toasting', 'stage 1', 'stage 2', 'resting']),
    )
    const readings = await view.getReadings(firingId, 2_000)
    const lead = readings.series.find((series) => series.role === 'lead')
    const tempAt = (atS: number) => lead?.tempC[lead.timeS.findIndex((timeS) => timeS >= atS)] ?? NaN
    expect(Math.abs(tempAt(0) - 60)).toBeLessThan(12)
    expect(Math.abs(tempAt(9 * 60) - 150)).toBeLessThan(20)
    expect(Math.abs(tempAt(18 * 60) - 184)).toBeLessThan(10)
    const [after] = await view.listHearths()
    expect(after?.live?.state, said.join('\n')).toBeDefined()
    expect(after?.live?.firingId).not.toBe(firingId)
  }, 120_000)
})
