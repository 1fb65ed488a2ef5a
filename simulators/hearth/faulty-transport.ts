import type { IngestMessage } from '@/lib/gateway/protocol'
import type { SendOutcome, Transport } from '@/lib/gateway/transport'
import type { GatewayFaultKind } from './faults'

/** A way to the server on which the faults of a network can be put. */
export function createFaultyTransport(
  inner: Transport,
  isActive: (kind: GatewayFaultKind) => boolean,
): Transport {
  return {
    ...inner,
    isReady: () => !isActive('cut network') && inner.isReady(),
    send: (message) => {
      if (isActive('cut network'))
        return Promise.resolve<SendOutcome>({ kind: 'unreachable', detail: 'cut by command' })
      if (isActive('doubled batches')) return sendTwice(inner, message)
      if (isActive('reordered batches')) return sendReordered(inner, message)
      return inner.send(message)
    },
  }
}

async function sendTwice(inner: Transport, message: IngestMessage): Promise<SendOutcome> {
  await inner.send(message)
  return inner.send(message)
}

/** The later half first, each half backwards: everything comes, nothing in its order. */
async function sendReordered(inner: Transport, message: IngestMessage): Promise<SendOutcome> {
  const backwards = [...message.readings].reverse()
  const half = Math.ceil(backwards.length / 2)
  const { lost: _lost, ...withoutLosses } = message
  await inner.send({ ...withoutLosses, readings: backwards.slice(0, half) })
  return inner.send({ ...message, readings: backwards.slice(half) })
}
