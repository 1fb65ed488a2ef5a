import { describe, expect, it } from 'vitest'
import type { RecipeContent } from '@/lib/recipes/schema'
import { compensatedTempC } from '@/lib/science/thermocouple'
import type { DemoGateway } from '@/simulators/hearth/demo-file'
import { createHearth, type HearthReading } from '@/simulators/hearth/hearth'
import type { OwnFirings } from '@/simulators/hearth/own-firings'
import { hearthRecipeOf } from '@/simulators/hearth/recipe-of-content'
import { createRoom } from '@/simulators/hearth/room'
import {
  ServerRefusal,
  type ServerView,
  type ViewedFiring,
  type ViewedHearth,
  type ViewedReadings,
} from '@/simulators/hearth/server-view'

const START_MS = Date.parse('2026-02-02T08:00:00.000Z')
const FIRING_ID = '10000000-0000-4000-8000-000000000001'
const HEARTH_ID = '20000000-0000-4000-8000-000000000001'
const PERSON = 'Ada Quill'

const content: RecipeContent = {
  pieceKind: 'barrel',
  sizeAndShape: '225 l',
  thicknessMm: 27,
  leadPlace: { height: 'bilge', side: 'A', depthMm: 2, mounting: 'wedge' },
  preheat: { moistureMinPercent: 16, moistureMaxPercent: 24, waterTempC: 70, method: 'spray', minutes: 12 },
  bend: { minimumMinutes: 10, woodLimitC: 130 },
  planStartTempC: 60,
  stages: [
    {
      name: 'Warm',
      kind: 'ramp',
      targetTempC: 150,
      coalsTargetTempC: null,
      minutes: 12,
      bandC: 7,
      lid: 'off',
      cues: [],
    },
    {
      name: 'Hold',
      kind: 'hold',
      targetTempC: 150,
      coalsTargetTempC: null,
      minutes: 8,
      bandC: 6,
      lid: 'off',
      cues: [],
    },
    {
      name: 'Deepen',
      kind: 'ramp',
      targetTempC: 190,
      coalsTargetTempC: null,
      minutes: 10,
      bandC: 7,
      lid: 'on',
      cues: [],
    },
  ],
  doseTargetMinutes: null,
  doseToleranceLog10: 0.12,
  limits: { woodMaximumC: 215, climbMaximumCPerMin: 14, spreadC: 8 },
  restMinutes: 8,
  flavourIntent: '',
  notes: '',
}

const gateway: DemoGateway = {
  id: 'gateway-1',
  name: 'Gateway 1',
  token: 'token',
  hearths: [1],
  probes: (['lead', 'opposite', 'coals'] as const).map((role, i) => ({
    id: `30000000-0000-4000-8000-00000000000${i}`,
    hearth: 1,
    role,
    thermocoupleType: 'K' as const,
  })),
}

/** A firing that has toasted for `minutes`, with its stored readings, as the server would tell it. */
function storedFiring(minutes: number, stageMarks: { stagePosition: number; atMin: number }[]) {
  const past = createHearth({ seed: 3, recipe: hearthRecipeOf(content), startPhase: 'toasting' })
  const lead = { timeS: [0], tempC: [60] }
  const opposite = { timeS: [0], tempC: [60] }
  for (let timeS = 1; timeS <= minutes * 60; timeS += 1) {
    past.advance(1)
    if (timeS % 3 !== 0) continue
    lead.timeS.push(timeS)
    lead.tempC.push(past.woodTempC().lead)
    opposite.timeS.push(timeS)
    opposite.tempC.push(past.woodTempC().opposite)
  }
  const iso = (atMin: number) => new Date(START_MS + atMin * 60_000).toISOString()
  const firing: ViewedFiring = {
    id: FIRING_ID,
    state: 'toasting',
    revision: 1,
    recipeCopy: { recipeId: FIRING_ID, recipeName: 'Quay', versionId: FIRING_ID, versionNumber: 1, content },
    moisturePercent: 18,
    preheatAt: iso(-25),
    bendAt: iso(-12),
    toastAt: iso(0),
    restAt: null,
    marks: stageMarks.map(({ stagePosition, atMin }) => markOf('stage', iso(atMin), { stagePosition })),
  }
  const readings: ViewedReadings = {
    firingId: FIRING_ID,
    zeroAt: iso(0),
    isSealed: false,
    series: [
      { role: 'lead', probeId: FIRING_ID, name: 'A', readingCount: lead.timeS.length, ...lead },
      { role: 'opposite', probeId: FIRING_ID, name: 'B', readingCount: lead.timeS.length, ...opposite },
    ],
  }
  return { firing, readings, lastTempC: past.woodTempC().lead }
}

let markNumber = 0
function markOf(
  kind: ViewedFiring['marks'][number]['kind'],
  at: string,
  more: object = {},
): ViewedFiring['marks'][number] {
  markNumber += 1
  return {
    id: `40000000-0000-4000-8000-${String(markNumber).padStart(12, '0')}`,
    kind,
    at,
    recordedAt: at,
    by: PERSON,
    phase: null,
    stagePosition: null,
    call: null,
    words: '',
    step: null,
    answer: null,
    replacesId: null,
    isInForce: true,
    ...more,
  }
}

/** A server in memory with one hearth. */
function fakeServer(stored: { firing: ViewedFiring; readings: ViewedReadings } | null) {
  let firing = stored?.firing ?? null
  const calls: string[] = []
  const problems: { next: ServerRefusal | null } = { next: null }
  const hearth = (): ViewedHearth => ({
    id: HEARTH_ID,
    number: 1,
    name: '',
    isActive: true,
    live:
      firing === null ||
      firing.state === 'finished' ||
      firing.state === 'abandoned' ||
      firing.state === 'queued'
        ? null
        : {
            firingId: firing.id,
            state: firing.state,
            serial: 'SML-0001',
            recipeName: 'Quay',
            versionNumber: 1,
            toasterName: PERSON,
          },
    probes: [],
  })
  const need = () => {
    if (firing === null) throw new ServerRefusal(404, 'There is no such firing.')
    return firing
  }
  const view: ServerView = {
    listHearths: () => Promise.resolve([hearth()]),
    getFiring: () => Promise.resolve(structuredClone(need())),
    getReadings: () =>
      Promise.resolve(
        stored?.readings ?? {
          firingId: FIRING_ID,
          zeroAt: new Date(START_MS).toISOString(),
          isSealed: false,
          series: [],
        },
      ),
    addMark: (_id, mark, id = '') => {
      if (problems.next !== null) {
        const problem = problems.next
        problems.next = null
        return Promise.reject(problem)
      }
      calls.push(
        mark.kind === 'phase'
          ? `phase ${mark.phase}`
          : mark.kind === 'stage'
            ? `stage ${mark.stagePosition}`
            : mark.kind,
      )
      const at = mark.at.toISOString()
      const kept = {
        ...markOf(mark.kind, at, { phase: mark.phase ?? null, stagePosition: mark.stagePosition ?? null }),
        id,
      }
      const state = mark.kind === 'phase' && mark.phase !== undefined ? mark.phase : need().state
      const column = state === 'resting' ? { restAt: at } : state === 'toasting' ? { toastAt: at } : {}
      firing = { ...need(), state, marks: [...need().marks, kept], ...(mark.kind === 'phase' ? column : {}) }
      return Promise.resolve(id)
    },
    finishFiring: () => {
      calls.push('finish')
      firing = { ...need(), state: 'finished' }
      return Promise.resolve()
    },
    abandonFiring: (_id, reason) => {
      calls.push(`abandon: ${reason}`)
      firing = { ...need(), state: 'abandoned' }
      return Promise.resolve()
    },
    listWaitingPieceIds: () => Promise.resolve(['piece-1']),
    startFiring: (pieceId) => {
      calls.push(`start ${pieceId}`)
      return Promise.resolve('started')
    },
  }
  const change = (next: Partial<ViewedFiring>) => {
    firing = { ...need(), ...next }
  }
  return { view, calls, change, problems, state: () => firing?.state ?? null }
}

function ownership(isOwn: boolean): OwnFirings {
  const hearths: number[] = []
  return {
    isOwn: () => isOwn,
    addFiring: (_id, hearth) => void hearths.push(hearth),
    keptHearths: () => hearths,
  }
}

function leadTempC(readings: Map<number, HearthReading[]>): number {
  const lead = readings.get(1)?.find((reading) => reading.probe === 'lead')
  if (lead === undefined) return NaN
  return compensatedTempC('K', lead.emf.microvolts / 1_000, lead.emf.coldJunctionC)
}

/** Five ticks a second, a look every 10 s; the clock is ours. */
async function play(room: ReturnType<typeof createRoom>, fromMs: number, seconds: number) {
  const temps: number[] = []
  for (let s = 0; s < seconds; s += 1) {
    const nowMs = fromMs + s * 1_000
    if (s % 10 === 0) await room.look(nowMs)
    for (let tick = 0; tick < 5; tick += 1) temps.push(leadTempC(room.tick(nowMs + tick * 200)))
  }
  return temps.filter((tempC) => !Number.isNaN(tempC))
}

describe('simulated room', () => {
  it('carries an own firing on from its last stored reading without a jump, at five readings a second', async () => {
    const stored = storedFiring(15, [{ stagePosition: 1, atMin: 12 }])
    const server = fakeServer(stored)
    const room = createRoom({ view: server.view, own: ownership(true), gateways: [gateway], say: () => {} })
    const nowMs = START_MS + 15 * 60_000 + 8_000
    const temps = await play(room, nowMs, 30)
    expect(temps.length).toBeGreaterThanOrEqual(148)
    expect(Math.abs((temps[0] ?? NaN) - stored.lastTempC)).toBeLessThan(2)
    for (let i = 1; i < temps.length; i += 1)
      expect(Math.abs((temps[i] ?? 0) - (temps[i - 1] ?? 0))).toBeLessThan(1.2)
  })

  it('marks stages, rest and finish of its own firing in order, then starts the next rose after a pause', async () => {
    const server = fakeServer(storedFiring(18, [{ stagePosition: 1, atMin: 12 }]))
    const room = createRoom({
      view: server.view,
      own: ownership(true),
      gateways: [gateway],
      say: () => {},
      pauseMs: 60_000,
    })
    await play(room, START_MS + 18 * 60_000 + 5_000, 26 * 60)
    const told = server.calls.filter((call) => /stage|phase|finish|start/.test(call))
    expect(told.slice(0, 4)).toEqual(['stage 2', 'phase resting', 'finish', 'start piece-1'])
    expect(server.calls).toContain('lid on')
  })

  it('tries a mark again that the server did not answer, and lets a refusal stand', async () => {
    const server = fakeServer(storedFiring(19.8, [{ stagePosition: 1, atMin: 12 }]))
    server.problems.next = new ServerRefusal(0, 'no answer')
    const said: string[] = []
    const room = createRoom({
      view: server.view,
      own: ownership(true),
      gateways: [gateway],
      say: (one) => said.push(one),
    })
    let nowMs = START_MS + 19.8 * 60_000
    for (let s = 0; s < 120; s += 1, nowMs += 1_000) {
      room.tick(nowMs)
      if (s % 10 === 0)
        await room.look(nowMs).catch((error: unknown) => expect(String(error)).toContain('no answer'))
    }
    expect(server.calls.filter((call) => call === 'stage 2')).toHaveLength(1)
    server.problems.next = new ServerRefusal(409, 'This firing is resting already.')
    await play(room, nowMs, 13 * 60)
    expect(said.some((one) => one.includes('resting already') || one.includes('409'))).toBe(true)
  })

  it('gives a firing that a person started its readings and nothing else', async () => {
    const server = fakeServer(storedFiring(11, []))
    const room = createRoom({ view: server.view, own: ownership(false), gateways: [gateway], say: () => {} })
    const temps = await play(room, START_MS + 11 * 60_000, 25 * 60)
    expect(temps.length).toBeGreaterThan(7_000)
    expect(server.calls).toEqual([])
    expect(server.state()).toBe('toasting')
    // Nobody ended the first stage, so the fire is kept at its end temperature.
    expect(Math.abs((temps.at(-1) ?? NaN) - 150)).toBeLessThan(10)
  })

  it('what a person marks reaches the fire: a later stage, a mist, the rest', async () => {
    const server = fakeServer(storedFiring(13, []))
    const room = createRoom({ view: server.view, own: ownership(false), gateways: [gateway], say: () => {} })
    let nowMs = START_MS + 13 * 60_000
    const before = await play(room, nowMs, 60)
    nowMs += 60_000
    server.change({ marks: [markOf('mist', new Date(nowMs).toISOString())] })
    const misted = await play(room, nowMs, 30)
    expect(Math.min(...misted)).toBeLessThan((before.at(-1) ?? NaN) - 2)
    nowMs += 30_000
    const at = new Date(nowMs).toISOString()
    server.change({
      marks: [markOf('stage', at, { stagePosition: 1 }), markOf('stage', at, { stagePosition: 2 })],
    })
    const climbing = await play(room, nowMs, 9 * 60)
    expect(climbing.at(-1)).toBeGreaterThan((before.at(-1) ?? NaN) + 15)
    nowMs += 9 * 60_000
    server.change({ state: 'resting', restAt: new Date(nowMs).toISOString() })
    const resting = await play(room, nowMs, 4 * 60)
    expect(resting.at(-1)).toBeLessThan((climbing.at(-1) ?? NaN) - 20)
  })

  it('gives an own firing up that nobody read for longer than any score allows', async () => {
    const server = fakeServer(storedFiring(10, []))
    const room = createRoom({ view: server.view, own: ownership(true), gateways: [gateway], say: () => {} })
    await room.look(START_MS + 10 * 60_000 + 11 * 60_000)
    expect(server.calls).toHaveLength(1)
    expect(server.calls[0]).toContain('abandon: ')
  })

  it('an empty hearth gives one reading a second and starts nothing when it was never kept', async () => {
    const server = fakeServer(null)
    const room = createRoom({
      view: server.view,
      own: ownership(true),
      gateways: [gateway],
      say: () => {},
      pauseMs: 5_000,
    })
    const temps = await play(room, START_MS, 60)
    expect(temps.length).toBeGreaterThanOrEqual(58)
    expect(temps.length).toBeLessThanOrEqual(62)
    expect(server.calls).toEqual([])
  })

  // Once it read a hearth as cold until the server had been asked, and went on from those readings.
  it('says nothing of a hearth before the server was asked what stands there', async () => {
    const stored = storedFiring(15, [{ stagePosition: 1, atMin: 12 }])
    const server = fakeServer(stored)
    const room = createRoom({ view: server.view, own: ownership(true), gateways: [gateway], say: () => {} })
    const nowMs = START_MS + 15 * 60_000 + 30_000
    for (let tick = 0; tick < 20; tick += 1) expect(room.tick(nowMs + tick * 200).size).toBe(0)
    await room.look(nowMs + 4_000)
    const readings = room.tick(nowMs + 4_200).get(1) ?? []
    const leads = readings.filter((reading) => reading.probe === 'lead')
    // The half minute in which nobody asked comes late, a reading a second, as from a gateway's spool.
    expect(leads.length).toBeGreaterThanOrEqual(32)
    expect(leads[0]?.timeS).toBeLessThan(START_MS / 1_000 + 15 * 60 + 5)
    for (const lead of leads) {
      const tempC = compensatedTempC('K', lead.emf.microvolts / 1_000, lead.emf.coldJunctionC)
      expect(Math.abs(tempC - stored.lastTempC)).toBeLessThan(12)
    }
  })
})
