import { createServer, type Server as HttpServer } from 'node:http'
import type { AddressInfo } from 'node:net'
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { Server } from 'socket.io'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { createHttpTransport } from '@/lib/gateway/http-transport'
import {
  GATEWAY_NAMESPACE,
  INGEST_PATH,
  ingestMessageSchema,
  SEND_READINGS_EVENT,
} from '@/lib/gateway/protocol'
import { createSocketTransport } from '@/lib/gateway/socket-transport'
import type { DemoGateway } from '@/simulators/hearth/demo-file'
import { createFaultBoard } from '@/simulators/hearth/fault-board'
import { CLOCK_SKEW_MS, type GatewayFaultKind } from '@/simulators/hearth/faults'
import { startControl } from '@/simulators/hearth/control'
import type { HearthReading } from '@/simulators/hearth/hearth'
import { createSimulatedGateway } from '@/simulators/hearth/simulated-gateway'

const TOKEN = 'device-token'
const PROBE = '8f14e45f-ceea-467f-a1b2-0c5d6e7f8a9b'

function portOf(address: AddressInfo | string | null): number {
  if (typeof address !== 'object' || address === null) throw new Error('no port')
  return address.port
}

type Arrival = { way: 'socket' | 'http'; bootId: string; seqs: number[]; atMs: number[]; sentAtMs: number }

/** The server's side of the protocol over a real socket and real HTTP: keeps, acknowledges, refuses a wrong token. */
async function startFakeServer() {
  const kept = new Map<string, Set<number>>()
  const arrivals: Arrival[] = []
  const take = (way: 'socket' | 'http', payload: unknown) => {
    const message = ingestMessageSchema.parse(payload)
    const numbers = kept.get(message.bootId) ?? new Set<number>()
    kept.set(message.bootId, numbers)
    for (const { seq } of message.readings) numbers.add(seq)
    arrivals.push({
      way,
      bootId: message.bootId,
      seqs: message.readings.map((reading) => reading.seq),
      atMs: message.readings.map((reading) => Date.parse(reading.at)),
      sentAtMs: Date.parse(message.sentAt),
    })
    let ackedSeq = 0
    while (numbers.has(ackedSeq + 1)) ackedSeq += 1
    return { ackedSeq, refused: [] }
  }
  const http: HttpServer = createServer((request, response) => {
    let body = ''
    request.on('data', (chunk: Buffer) => (body += String(chunk)))
    request.on('end', () => {
      const isKnown = request.headers.authorization === `Bearer ${TOKEN}`
      const answer = isKnown
        ? take('http', JSON.parse(body))
        : { title: 'Not signed in', status: 401, detail: 'Unknown token.' }
      response.writeHead(isKnown && request.url === INGEST_PATH ? 200 : 401, {
        'content-type': 'application/json',
      })
      response.end(JSON.stringify(answer))
    })
  })
  const io = new Server(http)
  const namespace = io.of(GATEWAY_NAMESPACE)
  namespace.use((socket, next) => {
    if (socket.handshake.auth.token === TOKEN) return next()
    next(
      Object.assign(new Error('refused'), {
        data: { title: 'Not signed in', status: 401, detail: 'Unknown token.' },
      }),
    )
  })
  namespace.on('connection', (socket) => {
    socket.on(SEND_READINGS_EVENT, (payload: unknown, done: (answer: unknown) => void) =>
      done(take('socket', payload)),
    )
  })
  await new Promise<void>((resolve) => http.listen(0, '127.0.0.1', resolve))
  const port = portOf(http.address())
  return {
    url: `http://127.0.0.1:${port}`,
    kept,
    arrivals,
    dropSockets: () => namespace.disconnectSockets(true),
    close: () => io.close(),
  }
}

const message = {
  bootId: '00000000-0000-4000-8000-00000000000a',
  sentAt: '2026-02-01T10:00:00.000Z',
  readings: [],
}

describe('gateway over real sockets', () => {
  let server: Awaited<ReturnType<typeof startFakeServer>>
  let folder = ''
  const cleanUp: (() => Promise<unknown>)[] = []

  beforeEach(async () => {
    server = await startFakeServer()
    folder = mkdtempSync(join(tmpdir(), 'emberstave-gateway-'))
  })
  afterEach(async () => {
    for (const clean of cleanUp.splice(0)) await clean()
    await server.close()
    rmSync(folder, { recursive: true })
  })

  const demo: DemoGateway = {
    id: 'gateway-1',
    name: 'Gateway 1',
    token: TOKEN,
    hearths: [1],
    probes: [{ id: PROBE, hearth: 1, role: 'lead', thermocoupleType: 'K' }],
  }
  const readings = (count: number): HearthReading[] =>
    Array.from({ length: count }, (_, i) => ({
      probe: 'lead' as const,
      timeS: Date.now() / 1_000 + i / 1_000,
      emf: { microvolts: 4_000 + i, coldJunctionC: 23 },
    }))
  const startGateway = (token = TOKEN, said: string[] = []) => {
    const board = createFaultBoard(Date.now)
    const gateway = createSimulatedGateway({
      demo: { ...demo, token },
      serverUrl: server.url,
      spoolDir: folder,
      board,
      say: (sentence) => said.push(sentence),
    })
    cleanUp.push(gateway.stop)
    const begin = (kind: GatewayFaultKind, forS: number) =>
      board.begin({ hearth: 1, kind, forS, probe: 'lead' })
    return { gateway, begin, record: (count: number) => gateway.record(new Map([[1, readings(count)]])) }
  }
  const countKept = () => [...server.kept.values()].reduce((sum, numbers) => sum + numbers.size, 0)

  it('the socket carries messages once it is connected, and a dropped one comes back by itself or by HTTP', async () => {
    const { record } = startGateway()
    record(3)
    await vi.waitFor(() => expect(countKept()).toBe(3))
    await vi.waitFor(() => {
      record(1)
      expect(server.arrivals.at(-1)?.way).toBe('socket')
    })
    server.dropSockets()
    const before = countKept()
    record(4)
    await vi.waitFor(() => expect(countKept()).toBeGreaterThanOrEqual(before + 4))
  })

  it('a wrong token is refused on both ways with the same problem', async () => {
    const http = createHttpTransport({ serverUrl: server.url, token: 'wrong' })
    const socket = createSocketTransport({ serverUrl: server.url, token: 'wrong' })
    cleanUp.push(() => socket.close())
    const problem = { title: 'Not signed in', status: 401, detail: 'Unknown token.' }
    expect(await http.send(message)).toEqual({ kind: 'problem', problem })
    await vi.waitFor(() => expect(socket.isReady()).toBe(true))
    expect(await socket.send(message)).toEqual({ kind: 'problem', problem })
    const said: string[] = []
    const { record } = startGateway('wrong', said)
    record(2)
    await vi.waitFor(() => expect(said.join(' ')).toContain("refuses this gateway's token"))
    expect(countKept()).toBe(0)
  })

  it('a cut network loses nothing: what was read meanwhile comes afterwards, in order', async () => {
    const { record, begin } = startGateway()
    record(2)
    await vi.waitFor(() => expect(countKept()).toBe(2))
    begin('cut network', 0.6)
    record(5)
    await new Promise((resolve) => setTimeout(resolve, 200))
    expect(countKept()).toBe(2)
    await vi.waitFor(() => expect(countKept()).toBe(7), { timeout: 5_000 })
    expect(server.arrivals.flatMap(({ seqs }) => seqs)).toEqual([1, 2, 3, 4, 5, 6, 7])
  })

  it('a restart takes a new boot id, and sends the rest under the old one first', async () => {
    const { record, begin, gateway } = startGateway()
    record(1)
    await vi.waitFor(() => expect(countKept()).toBe(1))
    begin('cut network', 0.5)
    record(3)
    await gateway.restart()
    record(2)
    await vi.waitFor(() => expect(countKept()).toBe(6), { timeout: 5_000 })
    const boots = [...new Set(server.arrivals.map(({ bootId }) => bootId))]
    expect(boots).toHaveLength(2)
    expect(boots.map((bootId) => server.kept.get(bootId)?.size)).toEqual([4, 2])
  })

  it('doubled and reordered batches come as named, and everything arrives', async () => {
    const { record, begin } = startGateway()
    begin('doubled batches', 0.4)
    record(4)
    await vi.waitFor(() => expect(server.arrivals.length).toBeGreaterThanOrEqual(2))
    expect(server.arrivals[0]?.seqs).toEqual(server.arrivals[1]?.seqs)
    await new Promise((resolve) => setTimeout(resolve, 450))
    const already = server.arrivals.length
    begin('reordered batches', 5)
    record(6)
    await vi.waitFor(() => expect(countKept()).toBe(10))
    const seqs = server.arrivals.slice(already).flatMap((arrival) => arrival.seqs)
    expect(seqs).not.toEqual([...seqs].sort((a, b) => a - b))
    expect([...seqs].sort((a, b) => a - b)).toEqual([5, 6, 7, 8, 9, 10])
  })

  it('a skewed clock shifts the readings and the sending alike', async () => {
    const { record, begin } = startGateway()
    begin('clock skew', 10)
    record(1)
    await vi.waitFor(() => expect(countKept()).toBe(1))
    const [arrival] = server.arrivals
    for (const ms of [arrival?.sentAtMs ?? 0, arrival?.atMs[0] ?? 0]) {
      expect(Math.abs(ms - Date.now() - CLOCK_SKEW_MS)).toBeLessThan(5_000)
    }
  })
})

describe('faults on command', () => {
  it('are taken as JSON only, named when they do not fit, and listed while they last', async () => {
    let nowMs = 1_000_000
    const board = createFaultBoard(() => nowMs)
    const orders: string[] = []
    const control = await startControl(0, board, ({ kind }) => orders.push(kind))
    const url = `http://127.0.0.1:${portOf(control.address())}/faults`
    const post = (body: string, type = 'application/json') =>
      fetch(url, { method: 'POST', body, headers: { 'content-type': type } })
    try {
      const order = { hearth: 2, kind: 'open circuit', forS: 60 }
      expect((await post(JSON.stringify(order), 'text/plain')).status).toBe(415)
      const wrong = await post(JSON.stringify({ ...order, kind: 'gremlins' }))
      expect(wrong.status).toBe(422)
      expect(await wrong.text()).toContain('kind')
      expect((await post('{')).status).toBe(422)
      expect(orders).toEqual([])
      expect((await post(JSON.stringify(order))).status).toBe(200)
      expect(orders).toEqual(['open circuit'])
      expect(await (await fetch(url)).json()).toEqual([{ ...order, probe: 'lead', leftS: 60 }])
      const reading: HearthReading = {
        probe: 'lead',
        timeS: nowMs / 1_000 + 5,
        emf: { microvolts: 1, coldJunctionC: 20 },
      }
      expect(board.spoil(2, [reading])[0]?.flag).toBe('open')
      expect(board.spoil(1, [reading])[0]).toEqual(reading)
      nowMs += 61_000
      expect(await (await fetch(url)).json()).toEqual([])
    } finally {
      control.close()
    }
  })
})
