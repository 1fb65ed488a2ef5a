import { createServer } from 'node:http'
import type { AddressInfo } from 'node:net'
import { Server } from 'socket.io'
import type { Socket } from 'socket.io-client'
import { io } from 'socket.io-client'
import { attachGateways } from '@/lib/ingest/attach-gateways'
import { attachLive, liveOutput } from '@/lib/live/attach-live'
import type { Hub } from '@/lib/live/hub'
import { createHub } from '@/lib/live/hub'
import { testOrigin } from '@/tests/support/environment'

export type LiveServer = {
  url: string
  hub: Hub
  io: Server
  /** A viewer's socket with a session cookie; not connected until it is told to. */
  viewer: (cookie: string | null, options?: { origin?: string }) => Socket
  gateway: (token: string) => Socket
  stop: () => Promise<void>
}

/** A socket server with the live hub and both namespaces, as server.ts makes it, without pages. */
export async function startLiveServer(): Promise<LiveServer> {
  const httpServer = createServer()
  const server = new Server(httpServer, { maxHttpBufferSize: 2 * 1024 * 1024 })
  const hub = createHub(liveOutput(server))
  const stopLive = attachLive(server, hub)
  const gateways = attachGateways(server)
  await hub.start()
  await new Promise<void>((resolve) => httpServer.listen(0, '127.0.0.1', resolve))
  const url = `http://127.0.0.1:${portOf(httpServer.address())}`
  const clients: Socket[] = []
  const client = (socket: Socket) => {
    clients.push(socket)
    return socket
  }
  return {
    url,
    hub,
    io: server,
    viewer: (cookie, options = {}) =>
      client(
        io(`${url}/live`, {
          autoConnect: false,
          forceNew: true,
          transports: ['websocket'],
          reconnectionDelay: 20,
          reconnectionDelayMax: 50,
          extraHeaders: {
            origin: options.origin ?? testOrigin,
            ...(cookie === null ? {} : { cookie }),
          },
        }),
      ),
    gateway: (token) =>
      client(
        io(`${url}/gateway`, {
          forceNew: true,
          transports: ['websocket'],
          reconnection: false,
          auth: { token },
        }),
      ),
    stop: async () => {
      for (const socket of clients) socket.close()
      await gateways.stop()
      stopLive()
      hub.stop()
      await server.close()
    },
  }
}

function portOf(address: AddressInfo | string | null): number {
  if (address === null || typeof address === 'string') throw new Error('the test server has no port')
  return address.port
}

/** Settles with the first payload of an event; rejects after `withinMs`. */
export function nextEvent<T>(socket: Socket, event: string, withinMs = 8_000): Promise<T> {
  return new Promise((resolve, reject) => {
    const timer = setTimeout(() => reject(new Error(`no ${event} within ${withinMs} ms`)), withinMs)
    socket.once(event, (payload: T) => {
      clearTimeout(timer)
      resolve(payload)
    })
  })
}

/** Waits until something holds; looks every 20 ms. */
export async function until(what: () => boolean | Promise<boolean>, withinMs = 8_000): Promise<void> {
  for (const startedAt = Date.now(); !(await what());) {
    if (Date.now() - startedAt > withinMs) throw new Error(`it did not come to hold within ${withinMs} ms`)
    await new Promise((resolve) => setTimeout(resolve, 20))
  }
}
