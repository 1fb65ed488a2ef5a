import { fork } from 'node:child_process'
import { randomUUID } from 'node:crypto'
import { createServer } from 'node:http'
import { performance } from 'node:perf_hooks'
import { fileURLToPath } from 'node:url'
import { Server } from 'socket.io'
import * as z from 'zod'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { liveOutput } from '@/lib/live/attach-live'
import type { LivePoint } from '@/lib/live/events'
import { events } from '@/lib/live/events'
import type { HubOutput } from '@/lib/live/hub-state'
import { makeFire } from '@/tests/support/fire'
import { startLiveServer } from '@/tests/support/live-server'
import { createTestSession } from '@/tests/support/people'
import type { TestPeople } from '@/tests/support/people'
import type { Figure } from '@/tests/bench/figure'
import { quantile } from '@/tests/bench/figure'

/** What the program with the clients is told. */
export type FanOutClients = {
  url: string
  clients: number
  firingIds: string[]
  cookie: string
}

/** What it tells: all have joined, or how late each message was. */
const reportSchema = z.union([z.literal('joined'), z.object({ delaysMs: z.array(z.number()) })])

const clientsProgram = fileURLToPath(new URL('./fan-out-clients.ts', import.meta.url))
const firingCount = 8
const hz = 5
/** The two sides take turns of a second each. */
const turns = 16
/** The first turn of each warms it up. */
const warmTurns = 2

type Side = { url: string; output: HubOutput; firingIds: string[]; cookie: string; stop: () => Promise<void> }

/**
 * Fan-out of the live namespace (sessions, permissions, rooms, and the hub at work on the same firings) against a
 * socket server that does nothing else. The same messages to as many clients in a process of their own: eight
 * firings at five messages a second each, the clients spread over them. The two are up together and take turns of a
 * second, so that the machine's moods meet both.
 */
export async function benchFanOut(people: TestPeople): Promise<Figure[]> {
  const figures: Figure[] = []
  for (const clients of [50, 1_000]) {
    const [bare, ours] = await measure([await startBare(), await startOurs(people)], clients)
    const bareP95 = quantile(bare, 0.95)
    const oursP95 = quantile(ours, 0.95)
    const what = `fan-out to ${clients} clients at 5 Hz, p95`
    figures.push(
      { what, value: oursP95, unit: 'ms', target: clients === 1_000 ? '≤ 100' : '' },
      { what: `${what}, bare socket server`, value: bareP95, unit: 'ms', target: '' },
      { what: `${what} ÷ bare`, value: oursP95 / bareP95, unit: '×', target: '≤ 1.3' },
    )
  }
  return figures
}

async function startBare(): Promise<Side> {
  const httpServer = createServer()
  const io = new Server(httpServer)
  io.of('/live').on('connection', (socket) => {
    socket.on(events.firingJoin, async (request: { firingId: string }, reply: (answer: object) => void) => {
      await socket.join(`firing:${request.firingId}`)
      reply({})
    })
  })
  await new Promise<void>((resolve) => httpServer.listen(0, '127.0.0.1', resolve))
  const address = httpServer.address()
  return {
    url: `http://127.0.0.1:${typeof address === 'object' && address !== null ? address.port : 0}`,
    output: liveOutput(io),
    firingIds: Array.from({ length: firingCount }, () => randomUUID()),
    cookie: '',
    stop: () => io.close(),
  }
}

async function startOurs(people: TestPeople): Promise<Side> {
  // One after another: each takes the next number of a hearth.
  const fires: Awaited<ReturnType<typeof makeFire>>[] = []
  for (let i = 0; i < firingCount; i += 1) fires.push(await makeFire(people, Date.now() - 60_000))
  const server = await startLiveServer()
  const { cookie } = await createTestSession(people.toaster.accountId)
  return {
    url: server.url,
    output: liveOutput(server.io),
    firingIds: fires.map((fire) => fire.firing.id),
    cookie,
    stop: async () => {
      await server.stop()
      await closeIngestPool()
    },
  }
}

type Listening = { joined: Promise<void>; finish: () => Promise<number[]> }

/** Clients of one side, in a process of their own. */
function listen(side: Side, clients: number): Listening {
  const told: FanOutClients = { url: side.url, clients, firingIds: side.firingIds, cookie: side.cookie }
  const child = fork(clientsProgram, [JSON.stringify(told)], { execArgv: ['--import', 'tsx'] })
  let tellJoined: () => void = () => {}
  let tellDelays: (delaysMs: number[]) => void = () => {}
  let fail: (error: Error) => void = () => {}
  const joined = new Promise<void>((resolve, reject) => {
    tellJoined = resolve
    fail = reject
  })
  const delays = new Promise<number[]>((resolve) => (tellDelays = resolve))
  child.on('exit', (code) => fail(new Error(`the clients ended early with ${code}`)))
  child.on('message', (message: unknown) => {
    const report = reportSchema.parse(message)
    if (report === 'joined') tellJoined()
    else tellDelays(report.delaysMs)
  })
  return {
    joined,
    finish: async () => {
      child.send('finish')
      return delays
    },
  }
}

/** How late each message was at each client of either side, ms. */
async function measure([bare, ours]: [Side, Side], clients: number): Promise<[number[], number[]]> {
  const listening: [Listening, Listening] = [listen(bare, clients), listen(ours, clients)]
  await Promise.all(listening.map((one) => one.joined))
  for (let turn = 0; turn < turns; turn += 1) {
    await sendForASecond(turn % 2 === 0 ? bare : ours, turn >= warmTurns)
  }
  // What is still under way arrives.
  await new Promise((resolve) => setTimeout(resolve, 1_000))
  const delays: [number[], number[]] = [await listening[0].finish(), await listening[1].finish()]
  await ours.stop()
  await bare.stop()
  return delays
}

async function sendForASecond(side: Side, isCounted: boolean): Promise<void> {
  for (let tick = 0; tick < hz; tick += 1) {
    for (const firingId of side.firingIds) {
      side.output.toFiring(firingId, events.firingReadings, makeMessage(firingId, tick, isCounted))
    }
    await new Promise((resolve) => setTimeout(resolve, 1000 / hz))
  }
}

const roles = ['lead', 'opposite', 'coals'] as const

/** One firing's message of one tick, with the instant of its sending. */
function makeMessage(firingId: string, tick: number, isCounted: boolean): object {
  const points = roles.map((role, i): LivePoint => [tick * 3 + i, role, Date.now(), 180 + Math.sin(tick + i)])
  const sentAtMs = performance.timeOrigin + performance.now()
  return { firingId, epoch: 'bench', points, ...(isCounted && { sentAtMs }) }
}
