import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { backoffMs } from '@/lib/gateway/backoff'
import { createHttpTransport } from '@/lib/gateway/http-transport'
import { ingestMessageSchema, type IngestMessage } from '@/lib/gateway/protocol'
import { createSender, type GatewayClock } from '@/lib/gateway/sender'
import { createSpool } from '@/lib/gateway/spool'
import type { SpoolFiles } from '@/lib/gateway/spool-files'
import { readOutcome, type SendOutcome, type Transport } from '@/lib/gateway/transport'

const SEED = 20260202
const BOOT = '00000000-0000-4000-8000-00000000000a'
const PROBE = '8f14e45f-ceea-467f-a1b2-0c5d6e7f8a9b'

function memoryFiles(): SpoolFiles {
  const store = new Map<string, Buffer>()
  const read = (name: string) => store.get(name) ?? Buffer.alloc(0)
  return {
    list: () => [...store.keys()],
    read,
    append: (name, bytes) => void store.set(name, Buffer.concat([read(name), bytes])),
    remove: (name) => void store.delete(name),
    flush: () => {},
  }
}

function drafts(count: number) {
  return Array.from({ length: count }, (_, i) => ({
    probeId: PROBE,
    at: new Date(1_790_000_000_000 + i * 200).toISOString(),
    emf: { microvolts: 4_000 + i, coldJunctionC: 23 },
  }))
}

/** A clock turned by hand: `run` lets everything happen that is due, and says how long was waited. */
function handClock() {
  let nowMs = 1_790_000_000_000
  const waiting = new Map<number, { atMs: number; then: () => void }>()
  let nextKey = 0
  const clock: GatewayClock = {
    nowMs: () => nowMs,
    wait: (durationMs, then) => {
      const key = (nextKey += 1)
      waiting.set(key, { atMs: nowMs + durationMs, then })
      return () => void waiting.delete(key)
    },
  }
  const settle = async () => {
    for (let i = 0; i < 20; i += 1) await Promise.resolve()
  }
  const run = async (until: () => boolean, mostWaits = 2_000) => {
    const waitedMs: number[] = []
    await settle()
    for (let i = 0; i < mostWaits && !until(); i += 1) {
      const due = [...waiting.entries()].sort((a, b) => a[1].atMs - b[1].atMs)[0]
      if (due === undefined) {
        await settle()
        continue
      }
      waiting.delete(due[0])
      waitedMs.push(due[1].atMs - nowMs)
      nowMs = due[1].atMs
      due[1].then()
      await settle()
    }
    return waitedMs
  }
  return { clock, run }
}

/** A server in memory that keeps what it is told and acknowledges without holes, as ENGINEERING.md says. */
function fakeServer() {
  const kept = new Set<number>()
  const arrivals: number[] = []
  const ackedSeq = () => {
    let acked = 0
    while (kept.has(acked + 1)) acked += 1
    return acked
  }
  const take = (message: IngestMessage): SendOutcome => {
    ingestMessageSchema.parse(message)
    for (const { seq } of message.readings) {
      kept.add(seq)
      arrivals.push(seq)
    }
    for (const { from, to } of message.lost ?? []) for (let seq = from; seq <= to; seq += 1) kept.add(seq)
    return { kind: 'answer', answer: { ackedSeq: ackedSeq(), refused: [] } }
  }
  return { kept, arrivals, ackedSeq, take }
}

function transportOf(
  send: (message: IngestMessage) => SendOutcome | Promise<SendOutcome>,
  isReady = true,
): Transport {
  return {
    name: 'fake',
    isReady: () => isReady,
    send: (message) => Promise.resolve(send(message)),
    reconnect: () => {},
    close: () => Promise.resolve(),
  }
}

type Trouble = 'none' | 'lost on the way' | 'answer lost' | 'server trouble'

describe('sender', () => {
  it('delivers every reading at least once, first arrivals in order, whatever the network does', async () => {
    await fc.assert(
      fc.asyncProperty(
        fc.array(fc.constantFrom<Trouble>('none', 'lost on the way', 'answer lost', 'server trouble'), {
          maxLength: 40,
        }),
        fc.integer({ min: 1, max: 60 }),
        fc.integer({ min: 1, max: 9 }),
        async (troubles, count, maxReadings) => {
          const server = fakeServer()
          const { clock, run } = handClock()
          const spool = createSpool({ files: memoryFiles(), bootId: BOOT, segmentBytes: 300 })
          spool.append(drafts(count))
          const pending = [...troubles]
          const transport = transportOf((message) => {
            const trouble = pending.shift() ?? 'none'
            if (trouble === 'lost on the way') return { kind: 'unreachable', detail: 'cut' }
            if (trouble === 'server trouble')
              return { kind: 'problem', problem: { status: 503, title: 'Unavailable' } }
            const outcome = server.take(message)
            return trouble === 'answer lost' ? { kind: 'unreachable', detail: 'timeout' } : outcome
          })
          const sender = createSender({
            spool,
            transports: [transport],
            clock,
            random: () => 0.5,
            maxReadings,
          })
          sender.wake()
          await run(() => spool.peek(1) === null)
          const firstArrivals = [...new Set(server.arrivals)]
          expect(firstArrivals).toEqual(Array.from({ length: count }, (_, i) => i + 1))
          expect(spool.status().waiting).toBe(0)
          await sender.stop()
        },
      ),
      { seed: SEED, numRuns: 150 },
    )
  })

  it('sends nothing again that was acknowledged', async () => {
    const server = fakeServer()
    const { clock, run } = handClock()
    const spool = createSpool({ files: memoryFiles(), bootId: BOOT })
    spool.append(drafts(30))
    const sender = createSender({ spool, transports: [transportOf(server.take)], clock, maxReadings: 7 })
    sender.wake()
    await run(() => spool.peek(1) === null)
    expect(server.arrivals).toEqual(Array.from({ length: 30 }, (_, i) => i + 1))
    expect(sender.state()).toBe('idle')
    spool.append(drafts(1))
    sender.wake()
    await run(() => spool.peek(1) === null)
    expect(server.arrivals.at(-1)).toBe(31)
    await sender.stop()
  })

  it('waits longer after each failure, with jitter, and not above the cap', async () => {
    for (let attempt = 0; attempt < 40; attempt += 1) {
      const low = backoffMs(attempt, () => 0)
      const high = backoffMs(attempt, () => 0.999_999)
      expect(low).toBe(Math.min(2_000, 500 * 2 ** attempt) / 2)
      expect(high).toBeLessThanOrEqual(2 * low)
    }
    const { clock, run } = handClock()
    const spool = createSpool({ files: memoryFiles(), bootId: BOOT })
    spool.append(drafts(1))
    let tries = 0
    const transport = transportOf(() => {
      tries += 1
      return { kind: 'unreachable', detail: 'cut' }
    })
    const sender = createSender({ spool, transports: [transport], clock, random: () => 1 })
    sender.wake()
    const waits = await run(() => tries === 9)
    expect(waits.map(Math.round)).toEqual([500, 1_000, 2_000, 2_000, 2_000, 2_000, 2_000, 2_000])
    await sender.stop()
  })

  it('a way that opens ends the wait after a failure, and no other wait', async () => {
    const { clock, run } = handClock()
    const spool = createSpool({ files: memoryFiles(), bootId: BOOT })
    spool.append(drafts(1))
    const server = fakeServer()
    let isCut = true
    let open = () => {}
    let tries = 0
    const transport: Transport = {
      ...transportOf((message) => {
        tries += 1
        return isCut ? { kind: 'unreachable', detail: 'cut' } : server.take(message)
      }),
      onOpened: (then) => {
        open = then
      },
    }
    const sender = createSender({ spool, transports: [transport], clock, random: () => 1 })
    open()
    expect(tries).toBe(0)
    sender.wake()
    await run(() => tries === 5)
    isCut = false
    open()
    await run(() => spool.peek(1) === null)
    expect(tries).toBe(6)
    expect(server.arrivals).toEqual([1])
    open()
    await sender.stop()
    expect(tries).toBe(6)
  })

  it('with a token that is refused it says so once, keeps everything, tries slowly, and goes on when it is good', async () => {
    const server = fakeServer()
    const { clock, run } = handClock()
    const spool = createSpool({ files: memoryFiles(), bootId: BOOT })
    spool.append(drafts(5))
    const said: string[] = []
    let tries = 0
    const transport = transportOf((message) => {
      tries += 1
      if (tries <= 4)
        return { kind: 'problem', problem: { status: 401, title: 'Sign in', detail: 'Unknown token.' } }
      return server.take(message)
    })
    const sender = createSender({
      spool,
      transports: [transport],
      clock,
      random: () => 0,
      onTrouble: (sentence) => said.push(sentence),
      onRecovered: (sentence) => said.push(sentence),
    })
    sender.wake()
    const first = await run(() => tries === 4)
    expect(sender.state()).toBe('token refused')
    expect(first).toEqual([60_000, 60_000, 60_000])
    expect(spool.status().waiting).toBe(5)
    sender.wake()
    expect(tries).toBe(4)
    await run(() => spool.peek(1) === null)
    expect(said).toHaveLength(2)
    expect(said[0]).toContain('refuses this gateway')
    expect(said[0]).toContain('Unknown token.')
    expect(said[1]).toBe('The server takes readings again.')
    await sender.stop()
  })

  it('names refused readings and does not send them again once they are acknowledged', async () => {
    const { clock, run } = handClock()
    const spool = createSpool({ files: memoryFiles(), bootId: BOOT })
    spool.append(drafts(3))
    const refused: unknown[] = []
    let sent = 0
    const transport = transportOf(() => {
      sent += 1
      return { kind: 'answer', answer: { ackedSeq: 3, refused: [{ seq: 2, reason: 'unknown probe' }] } }
    })
    const sender = createSender({
      spool,
      transports: [transport],
      clock,
      onRefused: (bootId, list) => refused.push([bootId, list]),
    })
    sender.wake()
    await run(() => spool.peek(1) === null)
    expect(refused).toEqual([[BOOT, [{ seq: 2, reason: 'unknown probe' }]]])
    expect(sent).toBe(1)
    await sender.stop()
  })

  it('makes a message smaller that the server finds too large', async () => {
    const server = fakeServer()
    const { clock, run } = handClock()
    const spool = createSpool({ files: memoryFiles(), bootId: BOOT })
    spool.append(drafts(100))
    const transport = transportOf((message) =>
      message.readings.length > 12
        ? { kind: 'problem', problem: { status: 413, title: 'Too large' } }
        : server.take(message),
    )
    const sender = createSender({ spool, transports: [transport], clock, random: () => 0 })
    sender.wake()
    await run(() => spool.peek(1) === null)
    expect([...new Set(server.arrivals)]).toHaveLength(100)
    await sender.stop()
  })

  it('throws nothing away that the server will not take as a whole, and tries slowly', async () => {
    const { clock, run } = handClock()
    const spool = createSpool({ files: memoryFiles(), bootId: BOOT })
    spool.append(drafts(2))
    let tries = 0
    const transport = transportOf(() => {
      tries += 1
      return {
        kind: 'problem',
        problem: { status: 422, title: 'Does not fit', detail: 'sentAt is in the future' },
      }
    })
    const sender = createSender({ spool, transports: [transport], clock, random: () => 0 })
    sender.wake()
    expect(await run(() => tries === 3)).toEqual([60_000, 60_000])
    expect(sender.state()).toBe('message refused')
    expect(spool.status().waiting).toBe(2)
    await sender.stop()
  })

  it('does not spin when the server acknowledges no further', async () => {
    const { clock, run } = handClock()
    const spool = createSpool({ files: memoryFiles(), bootId: BOOT })
    spool.append(drafts(4))
    let tries = 0
    const transport = transportOf(() => {
      tries += 1
      return { kind: 'answer', answer: { ackedSeq: 2, refused: [] } }
    })
    const sender = createSender({ spool, transports: [transport], clock, random: () => 1 })
    sender.wake()
    const waits = await run(() => tries === 4)
    expect(waits).toEqual([500, 1_000])
    expect(spool.status().waiting).toBe(2)
    await sender.stop()
  })

  it('goes on with a server that was restored from before: what is gone is declared lost', async () => {
    const old = fakeServer()
    const restored = fakeServer()
    const { clock, run } = handClock()
    const spool = createSpool({ files: memoryFiles(), bootId: BOOT, segmentBytes: 300 })
    let server = old
    const sender = createSender({
      spool,
      transports: [transportOf((message) => server.take(message))],
      clock,
    })
    for (let i = 0; i < 6; i += 1) {
      spool.append(drafts(10))
      sender.wake()
      await run(() => spool.peek(1) === null)
    }
    server = restored
    spool.append(drafts(5))
    sender.wake()
    await run(() => spool.peek(1) === null)
    expect(restored.ackedSeq()).toBe(65)
    expect(spool.status().waiting).toBe(0)
    await sender.stop()
  })

  it('says how it stands at most every 10 s, whatever the clock does', async () => {
    const server = fakeServer()
    const { clock, run } = handClock()
    let skewMs = 0
    const spool = createSpool({ files: memoryFiles(), bootId: BOOT })
    const messages: IngestMessage[] = []
    const sender = createSender({
      spool,
      transports: [transportOf((message) => (messages.push(message), server.take(message)))],
      clock: { ...clock, nowMs: () => clock.nowMs() + skewMs },
      program: { version: '1.2.3', uptimeS: () => 61.9 },
      maxReadings: 2,
    })
    const statusesAfter = async (stepMs: number) => {
      skewMs += stepMs
      const before = messages.length
      spool.append(drafts(4))
      sender.wake()
      await run(() => spool.peek(1) === null)
      return messages.slice(before).map((message) => message.status !== undefined)
    }
    expect(await statusesAfter(0)).toEqual([true, false])
    expect(await statusesAfter(9_999)).toEqual([false, false])
    expect(await statusesAfter(1)).toEqual([true, false])
    expect(await statusesAfter(-3_600_000)).toEqual([true, false])
    expect(messages[0]?.status).toEqual({
      spooledReadings: 4,
      spooledBytes: 4 * 48 + 16,
      oldestUnsentAt: '2026-09-21T14:13:20.000Z',
      programVersion: '1.2.3',
      uptimeS: 61,
    })
    await sender.stop()
  })

  it('a server from before statuses still gets every reading', async () => {
    const server = fakeServer()
    const { clock, run } = handClock()
    const spool = createSpool({ files: memoryFiles(), bootId: BOOT })
    spool.append(drafts(3))
    const transport = transportOf((message) =>
      message.status === undefined
        ? server.take(message)
        : { kind: 'problem', problem: { status: 422, title: 'Does not fit', detail: 'status is unknown' } },
    )
    const sender = createSender({
      spool,
      transports: [transport],
      clock,
      program: { version: '1.2.3', uptimeS: () => 1 },
    })
    sender.wake()
    expect(await run(() => spool.peek(1) === null)).toEqual([])
    expect(server.kept.size).toBe(3)
    await sender.stop()
  })

  it('takes the next way at once when the first is not ready or gives no word', async () => {
    const server = fakeServer()
    const { clock, run } = handClock()
    const spool = createSpool({ files: memoryFiles(), bootId: BOOT })
    spool.append(drafts(3))
    const notReady = transportOf(() => {
      throw new Error('must not be used')
    }, false)
    const silent = transportOf(() => ({ kind: 'unreachable', detail: 'timeout' }))
    const sender = createSender({ spool, transports: [notReady, silent, transportOf(server.take)], clock })
    sender.wake()
    expect(await run(() => spool.peek(1) === null)).toEqual([])
    expect(server.kept.size).toBe(3)
    await sender.stop()
  })

  it('sends nothing after it was stopped', async () => {
    const server = fakeServer()
    const { clock } = handClock()
    const spool = createSpool({ files: memoryFiles(), bootId: BOOT })
    const sender = createSender({ spool, transports: [transportOf(server.take)], clock })
    await sender.stop()
    spool.append(drafts(3))
    sender.wake()
    await Promise.resolve()
    expect(server.kept.size).toBe(0)
    expect(sender.state()).toBe('stopped')
  })
})

describe('HTTP transport', () => {
  const message: IngestMessage = { bootId: BOOT, sentAt: '2026-02-01T10:00:00.000Z', readings: [] }

  it('posts with the device token and reads the answer', async () => {
    const seen: { url: string; authorization: string | null; body: unknown }[] = []
    const transport = createHttpTransport({
      serverUrl: 'http://127.0.0.1:3000',
      token: 'secret',
      request: async (input, init) => {
        const request = new Request(input, init)
        seen.push({
          url: request.url,
          authorization: request.headers.get('authorization'),
          body: await request.json(),
        })
        return Response.json({ ackedSeq: 4, refused: [] })
      },
    })
    expect(await transport.send(message)).toEqual({ kind: 'answer', answer: { ackedSeq: 4, refused: [] } })
    expect(seen).toEqual([
      { url: 'http://127.0.0.1:3000/api/ingest/readings', authorization: 'Bearer secret', body: message },
    ])
  })

  it('a problem object, a bare status and a lost connection are told apart', async () => {
    const sendTo = (respond: () => Promise<Response>) =>
      createHttpTransport({ serverUrl: 'http://127.0.0.1:3000', token: 't', request: respond }).send(message)
    const problem = { type: 'about:blank', title: 'Not signed in', status: 401, detail: 'Unknown token.' }
    expect(await sendTo(() => Promise.resolve(Response.json(problem, { status: 401 })))).toEqual({
      kind: 'problem',
      problem,
    })
    const page = new Response('<html>', { status: 502, statusText: 'Bad Gateway' })
    expect(await sendTo(() => Promise.resolve(page))).toEqual({
      kind: 'problem',
      problem: { status: 502, title: 'Bad Gateway' },
    })
    const refused = new TypeError('fetch failed', { cause: new Error('connect ECONNREFUSED') })
    expect(await sendTo(() => Promise.reject(refused))).toEqual({
      kind: 'unreachable',
      detail: 'connect ECONNREFUSED',
    })
  })

  it('an answer in no known shape acknowledges nothing', () => {
    expect(readOutcome({ ok: true }).kind).toBe('unreachable')
    expect(readOutcome(null).kind).toBe('unreachable')
    expect(readOutcome({ ackedSeq: -1, refused: [] }).kind).toBe('unreachable')
  })
})
