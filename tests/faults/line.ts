import type { AddressInfo, Socket } from 'node:net'
import { connect, createServer } from 'node:net'

/**
 * How a line carries: as it should; with a delay; not at all though the connections stand (a cable pulled for a
 * moment: TCP sends again what was held); with the server's answers lost; or cut, new connections refused.
 */
export type LineState =
  { kind: 'open' } | { kind: 'slow'; delayMs: number } | { kind: 'held' } | { kind: 'deaf' } | { kind: 'cut' }

/** A stretch of network between clients and the server that can be put out of order. */
export type Line = {
  url: string
  put: (state: LineState) => void
  close: () => Promise<void>
}

type Pair = { client: Socket; upstream: Socket; isDeaf: boolean }

/** Passes on what comes to a port of its own to `port`, and back. */
export async function openLine(port: number): Promise<Line> {
  const pairs = new Set<Pair>()
  let state: LineState = { kind: 'open' }

  const forget = (pair: Pair) => {
    pairs.delete(pair)
    pair.client.destroy()
    pair.upstream.destroy()
  }
  const server = createServer((client) => {
    client.on('error', () => {})
    if (state.kind === 'cut') {
      client.destroy()
      return
    }
    const upstream = connect(port, '127.0.0.1')
    const pair: Pair = { client, upstream, isDeaf: state.kind === 'deaf' }
    pairs.add(pair)
    upstream.on('error', () => forget(pair))
    for (const socket of [client, upstream]) {
      socket.setNoDelay(true)
      socket.on('close', () => forget(pair))
    }
    carry(client, upstream, () => true)
    carry(upstream, client, () => !pair.isDeaf)
    if (state.kind === 'held') hold(pair)
  })
  const carry = (from: Socket, to: Socket, isCarried: () => boolean) => {
    const waiting: { part: Buffer; dueMs: number }[] = []
    let timer: NodeJS.Timeout | null = null
    // One after the other whatever the delay becomes: a line never lets one part overtake another.
    const pass = () => {
      timer = null
      for (let next = waiting[0]; next !== undefined; next = waiting[0]) {
        const waitMs = next.dueMs - performance.now()
        if (waitMs > 0.5) {
          timer = setTimeout(pass, waitMs)
          return
        }
        waiting.shift()
        if (!to.destroyed) to.write(next.part)
      }
    }
    from.on('data', (part: Buffer) => {
      if (!isCarried()) return
      waiting.push({ part, dueMs: performance.now() + (state.kind === 'slow' ? state.delayMs : 0) })
      if (timer === null) pass()
    })
  }
  const hold = ({ client, upstream }: Pair) => {
    client.pause()
    upstream.pause()
  }
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve))
  return {
    url: `http://127.0.0.1:${portOf(server.address())}`,
    put: (next) => {
      state = next
      for (const pair of [...pairs]) {
        if (next.kind === 'cut' || (pair.isDeaf && next.kind !== 'deaf')) forget(pair)
        else if (next.kind === 'held') hold(pair)
        else {
          pair.isDeaf = next.kind === 'deaf'
          pair.client.resume()
          pair.upstream.resume()
        }
      }
    },
    close: async () => {
      for (const pair of [...pairs]) forget(pair)
      await new Promise<void>((resolve) => server.close(() => resolve()))
    },
  }
}

function portOf(address: AddressInfo | string | null): number {
  if (address === null || typeof address === 'string') throw new Error('the line has no port')
  return address.port
}
