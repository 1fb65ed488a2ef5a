import type { Socket } from 'socket.io-client'
import { io } from 'socket.io-client'
import { keepConnected } from '@/components/live/keep-connected'

type Shared = { socket: Socket; users: number }
let shared: Shared | null = null

/** The page's one socket to `/live`; the last user that lets go closes it. */
export function takeLiveSocket(): { socket: Socket; release: () => void } {
  shared ??= {
    socket: io('/live', {
      transports: ['websocket', 'polling'],
      reconnectionDelay: 250,
      reconnectionDelayMax: 2_000,
      withCredentials: true,
    }),
    users: 0,
  }
  const taken = shared
  if (taken.users === 0) keepConnected(taken.socket)
  taken.users += 1
  let isHeld = true
  return {
    socket: taken.socket,
    release: () => {
      if (!isHeld) return
      isHeld = false
      taken.users -= 1
      if (taken.users > 0) return
      taken.socket.close()
      if (shared === taken) shared = null
    },
  }
}
