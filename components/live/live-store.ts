import type { Socket } from 'socket.io-client'
import { takeLiveSocket } from '@/components/live/shared-live-socket'

/** Something that follows the server over a socket while it is open. */
export type LiveClient<Snapshot> = {
  snapshot: () => Snapshot
  subscribe: (listener: () => void) => () => void
  close: () => void
}

export type LiveStore<Client, Snapshot> = {
  subscribe: (listener: () => void) => () => void
  snapshot: () => Snapshot
  /** The client while somebody listens, else null. */
  client: () => Client | null
}

/** A store for React: opens its client with the first listener, closes it with the last. */
export function createLiveStore<Snapshot, Client extends LiveClient<Snapshot>>(
  before: Snapshot,
  open: (socket: Socket) => Client,
): LiveStore<Client, Snapshot> {
  let held: { client: Client; release: () => void; listeners: number } | null = null
  return {
    subscribe: (listener) => {
      if (held === null) {
        const { socket, release } = takeLiveSocket()
        held = { client: open(socket), release, listeners: 0 }
      }
      const mine = held
      mine.listeners += 1
      const leave = mine.client.subscribe(listener)
      return () => {
        leave()
        mine.listeners -= 1
        if (mine.listeners > 0) return
        mine.client.close()
        mine.release()
        if (held === mine) held = null
      }
    },
    snapshot: () => held?.client.snapshot() ?? before,
    client: () => held?.client ?? null,
  }
}
