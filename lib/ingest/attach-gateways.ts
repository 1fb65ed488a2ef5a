import type { Namespace, Server, Socket } from 'socket.io'
import { GATEWAY_NAMESPACE } from '@/lib/gateway/protocol'
import { toProblem } from '@/lib/http/problem'
import { storeReadings } from '@/lib/ingest/store-readings'
import { verifyDeviceToken } from '@/lib/ingest/verify-device-token'
import { isAppError } from '@/lib/errors'
import { events } from '@/lib/live/events'
import { hubDoor } from '@/lib/live/hub-door'
import { log } from '@/lib/log'
import { now, nowMs } from '@/lib/runtime'

/** How often the token of a gateway that is silent is looked at again. */
const recheckMs = 2_500

export type Gateways = {
  /** Takes no more messages and lets those under way finish; a gateway hears nothing and sends again. */
  stop: () => Promise<void>
}

/** Opens the namespace `/gateway`: the device token at the handshake and again with each message. */
export function attachGateways(io: Server): Gateways {
  const gateways = io.of(GATEWAY_NAMESPACE)
  const underWay = new Set<Promise<void>>()
  const known = new WeakMap<Socket, string>()
  let isStopping = false
  gateways.use((socket, next) => {
    verifyDeviceToken(tokenOf(socket)).then(
      ({ gatewayId }) => {
        known.set(socket, gatewayId)
        next()
      },
      (error: unknown) => {
        const problem = toProblem(error)
        next(Object.assign(new Error(problem.title), { data: problem }))
      },
    )
  })
  gateways.on('connection', (socket) => {
    socket.on(events.readingsSend, (message: unknown, reply: unknown) => {
      if (isStopping || typeof reply !== 'function') return
      // It spoke, even if nothing can be stored just now.
      const gatewayId = known.get(socket)
      if (gatewayId !== undefined) hubDoor().current?.gatewayHeard(gatewayId, nowMs(), null)
      const work: Promise<void> = receive(socket, message, (answer) => reply(answer)).finally(() => {
        underWay.delete(work)
      })
      underWay.add(work)
    })
  })
  const stopRechecking = startRechecking(gateways)
  return {
    stop: async () => {
      isStopping = true
      stopRechecking()
      await Promise.all(underWay)
    },
  }
}

function tokenOf(socket: Socket): string | null {
  const token: unknown = socket.handshake.auth['token']
  return typeof token === 'string' ? token : null
}

async function receive(socket: Socket, message: unknown, reply: (answer: object) => void): Promise<void> {
  const receivedAt = now()
  try {
    const gateway = await verifyDeviceToken(tokenOf(socket))
    reply(await storeReadings(gateway, message, receivedAt))
  } catch (error) {
    reply(toProblem(error))
    if (isTokenRefusal(error)) socket.disconnect(true)
  }
}

function isTokenRefusal(error: unknown): boolean {
  return isAppError(error) && error.kind === 'not signed in'
}

function startRechecking(gateways: Namespace): () => void {
  const recheck = async (socket: Socket) => {
    try {
      await verifyDeviceToken(tokenOf(socket))
    } catch (error) {
      if (isTokenRefusal(error)) socket.disconnect(true)
      else log().warn({ err: error }, 'the token of a gateway could not be read again')
    }
  }
  const timer = setInterval(() => {
    for (const socket of gateways.sockets.values()) void recheck(socket)
  }, recheckMs)
  timer.unref()
  return () => clearInterval(timer)
}
