import type { IngestMessage } from '@/lib/gateway/protocol'
import type { Transport } from '@/lib/gateway/transport'
import type { GatewayLogWriter } from '@/tests/faults/gateway-log'

/** Writes down what goes over a way and what comes back, before the sender hears of it. */
export function recordedTransport(
  inner: Transport,
  log: GatewayLogWriter,
  atMsOf: (bootId: string, seq: number) => number | undefined,
): Transport {
  return {
    ...inner,
    send: async (message) => {
      log.sent(message, atMsOf)
      const outcome = await inner.send(message)
      if (outcome.kind === 'answer') log.answered(message.bootId, outcome.answer)
      return outcome
    },
  }
}

export type LateTransport = Transport & {
  withhold: () => void
  /** Lets what was withheld arrive, the newest first, after the sender has given it up. */
  letArrive: () => Promise<void>
}

const mostWithheld = 12

/** A way on which messages stay somewhere for a while and come after all, behind their own repeats. */
export function createLateTransport(inner: Transport): LateTransport {
  let withheld: IngestMessage[] | null = null
  return {
    ...inner,
    send: async (message) => {
      if (withheld === null) return inner.send(message)
      if (withheld.length < mostWithheld) withheld.push(message)
      return { kind: 'unreachable', detail: 'the message is on its way' }
    },
    withhold: () => {
      withheld ??= []
    },
    letArrive: async () => {
      const late = withheld ?? []
      withheld = null
      for (const message of late.toReversed()) await inner.send(message)
    },
  }
}
