import { io, type Socket } from 'socket.io-client'
import { GATEWAY_NAMESPACE, ingestProblemSchema, SEND_READINGS_EVENT, type IngestProblem } from './protocol'
import { readOutcome, type SendOutcome, type Transport } from './transport'

type SocketTransportOptions = {
  serverUrl: string
  /** A function is asked at each try, so that a new token needs no restart. */
  token: string | (() => string)
  timeoutMs?: number
}

const CONNECT_AGAIN_MS = 15_000

/**
 * The socket namespace `/gateway`: event `readings:send`, whose acknowledgement carries the answer. The client
 * library connects again by itself after a loss; after the server has closed the socket or refused the token,
 * `reconnect` does.
 */
export function createSocketTransport(options: SocketTransportOptions): Transport {
  const { serverUrl, token, timeoutMs = 10_000 } = options
  const socket = io(new URL(GATEWAY_NAMESPACE, serverUrl).href, {
    auth: (give) => give({ token: typeof token === 'string' ? token : token() }),
    transports: ['websocket'],
    reconnectionDelay: 500,
    // A fire waits for nobody: the server is looked for every second or two.
    reconnectionDelayMax: 1_500,
    randomizationFactor: 0.3,
    timeout: timeoutMs,
    forceNew: true,
  })
  let refusal: IngestProblem | null = null
  let retry: NodeJS.Timeout | undefined
  const connectLater = () => {
    // The library leaves a socket alone that the server has closed or refused.
    clearTimeout(retry)
    if (!socket.active) retry = setTimeout(() => socket.connect(), CONNECT_AGAIN_MS)
  }
  socket.on('disconnect', connectLater)
  socket.on('connect', () => {
    refusal = null
  })
  socket.on('connect_error', (error) => {
    const problem = ingestProblemSchema.safeParse('data' in error ? error.data : null)
    refusal = problem.success ? problem.data : null
    connectLater()
  })
  return {
    name: 'socket',
    isReady: () => socket.connected || refusal !== null,
    send: (message) => {
      if (refusal !== null) return Promise.resolve({ kind: 'problem', problem: refusal })
      return emitReadings(socket, message, timeoutMs)
    },
    reconnect: () => {
      refusal = null
      if (!socket.connected && !socket.active) socket.connect()
    },
    onOpened: (then) => void socket.on('connect', then),
    close: () => {
      socket.off('disconnect', connectLater)
      clearTimeout(retry)
      socket.close()
      return Promise.resolve()
    },
  }
}

async function emitReadings(socket: Socket, message: unknown, timeoutMs: number): Promise<SendOutcome> {
  if (!socket.connected) return { kind: 'unreachable', detail: 'the socket is not connected' }
  try {
    const reply: unknown = await socket.timeout(timeoutMs).emitWithAck(SEND_READINGS_EVENT, message)
    return readOutcome(reply)
  } catch (error) {
    return { kind: 'unreachable', detail: error instanceof Error ? error.message : String(error) }
  }
}
