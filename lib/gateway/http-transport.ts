import { INGEST_PATH } from './protocol'
import type { Transport } from './transport'
import { readOutcome, type SendOutcome } from './transport'

type HttpTransportOptions = {
  serverUrl: string
  /** A function is asked at each try, so that a new token needs no restart. */
  token: string | (() => string)
  timeoutMs?: number
  /** Replaced in tests. */
  request?: typeof fetch
}

/** `POST /api/ingest/readings` with the device token as Bearer. Always ready: the first failed request tells. */
export function createHttpTransport(options: HttpTransportOptions): Transport {
  const { serverUrl, token, timeoutMs = 10_000, request = fetch } = options
  const address = new URL(INGEST_PATH, serverUrl)
  return {
    name: 'http',
    isReady: () => true,
    send: async (message): Promise<SendOutcome> => {
      try {
        const response = await request(address, {
          method: 'POST',
          headers: {
            authorization: `Bearer ${typeof token === 'string' ? token : token()}`,
            'content-type': 'application/json',
          },
          body: JSON.stringify(message),
          signal: AbortSignal.timeout(timeoutMs),
        })
        return readResponse(response.status, response.statusText, await response.text())
      } catch (error) {
        return { kind: 'unreachable', detail: describe(error) }
      }
    },
    reconnect: () => {},
    close: () => Promise.resolve(),
  }
}

/** A proxy's page instead of a problem object still carries its status. */
function readResponse(status: number, statusText: string, text: string): SendOutcome {
  const outcome = readOutcome(parseJson(text))
  if (status < 400) return outcome
  if (outcome.kind === 'problem') return { kind: 'problem', problem: { ...outcome.problem, status } }
  return { kind: 'problem', problem: { status, title: statusText || `HTTP ${status}` } }
}

function parseJson(text: string): unknown {
  try {
    return JSON.parse(text)
  } catch {
    return null
  }
}

function describe(error: unknown): string {
  if (!(error instanceof Error)) return String(error)
  return error.cause instanceof Error ? error.cause.message || error.message : error.message
}
