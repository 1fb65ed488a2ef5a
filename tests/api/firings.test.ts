import { randomUUID } from 'node:crypto'
import * as z from 'zod'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { PieceDto } from '@/lib/batches/schema'
import { closeOrm } from '@/lib/db/orm'
import {
  firingPageSchema,
  firingReadingsSchema,
  firingSchema,
  markSchema,
  scoreSchema,
} from '@/lib/firings/schema'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { sealFiring } from '@/lib/ingest/seal-firing'
import { scoreFiring } from '@/lib/firings/score-firing'
import { setClock } from '@/lib/runtime'
import { playFiring } from '@/simulators/scenarios/play-firing'
import type { SeedHearth } from '@/simulators/scenarios/seed-room'
import { callRoute } from '@/tests/support/api'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import { approvedVersion, batchOf, checkedRoom, dayMs, shortContent } from '@/tests/support/firing-room'
import type { TestPeople } from '@/tests/support/people'
import { createPeople } from '@/tests/support/people'

let database: TestDatabase
let people: TestPeople
let hearths: SeedHearth[]
let pieces: PieceDto[]
let finishedId: string

const problemSchema = z.object({
  type: z.string(),
  title: z.string(),
  status: z.number(),
  detail: z.string(),
  fields: z.record(z.string(), z.string()).optional(),
})

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
  hearths = await checkedRoom(people, 1)
  pieces = await batchOf(people, await approvedVersion(people, 'Surface', shortContent()), 6)
  const hearth = hearths[0]
  if (hearth === undefined) throw new Error('a hearth')
  const { firing } = await playFiring({
    pieceId: pieces[0]?.id ?? '',
    hearthId: hearth.id,
    toaster: people.toaster.actor,
    startAt: new Date(Date.now() - dayMs),
    content: shortContent(),
    gateway: hearth.gateway,
    probeIds: hearth.probeIds,
    engine: { seed: 5, moisturePercent: 20 },
  })
  setClock(null)
  finishedId = firing.id
}, 120_000)

afterAll(async () => {
  setClock(null)
  await closeIngestPool()
  await closeOrm()
  await database.drop()
})

const as = (body?: unknown) => ({ cookie: people.toaster.cookie, body })

function startBody(index: number) {
  return { pieceId: pieces[index]?.id, hearthId: hearths[0]?.id, isStartListDone: true }
}

async function start(index: number): Promise<string> {
  const answer = await callRoute('POST', '/api/firings', as(startBody(index)))
  expect(answer.status).toBe(201)
  return firingSchema.parse(answer.json).id
}

describe('a firing over HTTP', () => {
  it('is started, marked, moved on and finished, each answer as its schema says', async () => {
    const id = await start(1)
    const feed = { id: randomUUID(), kind: 'feed', at: new Date().toISOString() }
    const first = await callRoute('POST', `/api/firings/${id}/marks`, as(feed))
    expect(first.status).toBe(201)
    expect(markSchema.parse((await callRoute('POST', `/api/firings/${id}/marks`, as(feed))).json)).toEqual(
      first.json,
    )
    for (const phase of ['bending', 'toasting', 'resting']) {
      const mark = { id: randomUUID(), kind: 'phase', phase, at: new Date().toISOString() }
      expect((await callRoute('POST', `/api/firings/${id}/marks`, as(mark))).status).toBe(201)
    }
    const finished = await callRoute('POST', `/api/firings/${id}/finish`, as({ colour: 'amber' }))
    expect(firingSchema.parse(finished.json)).toMatchObject({ state: 'finished', colour: 'amber' })
    expect(finished.status).toBe(200)
  })

  it('is abandoned with a reason, and refused without one', async () => {
    const id = await start(2)
    const bare = await callRoute('POST', `/api/firings/${id}/abandon`, as({ reason: ' ' }))
    expect(problemSchema.parse(bare.json).fields).toHaveProperty('reason')
    expect(bare.headers.get('content-type')).toContain('application/problem+json')
    const done = await callRoute('POST', `/api/firings/${id}/abandon`, as({ reason: 'a stave broke' }))
    expect(firingSchema.parse(done.json)).toMatchObject({ state: 'abandoned', endReason: 'a stave broke' })
  })

  it('has its score once it is made; before, the answer says what it waits for', async () => {
    const path = `/api/firings/${finishedId}/score`
    const none = await callRoute('GET', path, as())
    expect([none.status, problemSchema.parse(none.json).detail]).toEqual([
      404,
      expect.stringContaining('gateway'),
    ])
    await sealFiring(finishedId)
    await scoreFiring({ kind: 'system', name: 'sealing' }, { id: finishedId })
    const made = await callRoute('GET', path, as())
    expect(scoreSchema.parse(made.json)).toMatchObject({ firingId: finishedId, ruleset: 1 })
  })

  it('gives its readings whole, thinned with their extremes, and cut to a time', async () => {
    const path = `/api/firings/${finishedId}/readings`
    const whole = firingReadingsSchema.parse((await callRoute('GET', path, as())).json)
    const thin = firingReadingsSchema.parse((await callRoute('GET', `${path}?points=100`, as())).json)
    const lead = whole.series[0]
    expect(whole.series.map((series) => series.role)).toEqual(['lead', 'opposite', 'coals'])
    expect(thin.series[0]?.timeS.length).toBeLessThanOrEqual(100)
    const highest = (temps: readonly (number | null)[] = []) => Math.max(...temps.map((temp) => temp ?? 0))
    expect(highest(thin.series[0]?.tempC)).toBe(highest(lead?.tempC))
    const from = new Date(Date.parse(whole.zeroAt) + 60_000).toISOString()
    const to = new Date(Date.parse(whole.zeroAt) + 90_000).toISOString()
    const cut = firingReadingsSchema.parse(
      (await callRoute('GET', `${path}?from=${from}&to=${to}`, as())).json,
    )
    expect(cut.series[0]?.timeS).toEqual(lead?.timeS.filter((timeS) => timeS >= 60 && timeS <= 90))
    const bad = await callRoute('GET', `${path}?points=3`, as())
    expect(bad.status).toBe(422)
  })

  it('gives every reading as CSV, one line each, with a name for the file', async () => {
    const answer = await callRoute('GET', `/api/firings/${finishedId}/readings.csv`, as())
    expect(answer.headers.get('content-type')).toContain('text/csv')
    expect(answer.headers.get('content-disposition')).toContain(`${pieces[0]?.serial}-readings.csv`)
    const whole = firingReadingsSchema.parse(
      (await callRoute('GET', `/api/firings/${finishedId}/readings`, as())).json,
    )
    const count = whole.series.reduce((sum, series) => sum + series.readingCount, 0)
    const lines = answer.text.trim().split('\r\n')
    expect(lines).toHaveLength(count + 1)
    expect(lines[0]).toContain('probe,role,at_utc')
  })
})

describe('the list of firings', () => {
  it('pages by cursor, newest start first, and filters', async () => {
    const first = firingPageSchema.parse((await callRoute('GET', '/api/firings?limit=2', as())).json)
    const rest = firingPageSchema.parse(
      (await callRoute('GET', `/api/firings?limit=100&cursor=${first.nextCursor}`, as())).json,
    )
    const ids = [...first.items, ...rest.items].map((firing) => firing.id)
    expect(new Set(ids).size).toBe(ids.length)
    const abandoned = firingPageSchema.parse(
      (await callRoute('GET', '/api/firings?state=abandoned', as())).json,
    )
    expect(abandoned.items.map((firing) => firing.state)).toEqual(['abandoned'])
    expect((await callRoute('GET', '/api/firings?state=burnt', as())).status).toBe(422)
  })
})

describe('a request that does not fit', () => {
  it.each([
    ['an unknown field', { ...{ pieceId: randomUUID(), hearthId: randomUUID() }, colour: 'red' }, 422],
    ['no body', undefined, 422],
    ['text that is no JSON', '{"pieceId":', 400],
  ])('%s is refused with a problem and starts nothing', async (_what, body, status) => {
    const answer = await callRoute('POST', '/api/firings', as(body))
    expect([answer.status, answer.headers.get('content-type')]).toEqual([
      status,
      expect.stringContaining('application/problem+json'),
    ])
  })

  it('of an unknown firing, of one without a session and of a customer is told apart', async () => {
    const path = `/api/firings/${randomUUID()}`
    expect((await callRoute('GET', path, as())).status).toBe(404)
    expect((await callRoute('GET', path)).status).toBe(401)
    expect(
      (await callRoute('GET', `/api/firings/${finishedId}`, { cookie: people.customer.cookie })).status,
    ).toBe(403)
    expect((await callRoute('GET', '/api/firings/nonsense', as())).status).toBe(404)
  })

  it('from another origin or with another content type writes nothing', async () => {
    const body = JSON.stringify(startBody(4))
    const foreign = { origin: 'https://elsewhere.example', 'sec-fetch-site': 'cross-site' }
    expect((await callRoute('POST', '/api/firings', { ...as(body), headers: foreign })).status).toBe(403)
    const plain = { 'content-type': 'text/plain' }
    expect((await callRoute('POST', '/api/firings', { ...as(body), headers: plain })).status).toBe(415)
    const queued = firingPageSchema.parse((await callRoute('GET', '/api/firings?state=queued', as())).json)
    expect(queued.items.map((firing) => firing.piece.id)).toContain(pieces[4]?.id)
  })
})
