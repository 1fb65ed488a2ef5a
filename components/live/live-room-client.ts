import type { Socket } from 'socket.io-client'
import type { Connection, LiveProblem } from '@/components/live/live-firing-client'
import type { FiringChanged, RoomState } from '@/lib/live/events'

export type LiveRoomSnapshot = {
  connection: Connection
  room: RoomState | null
  /** Client's instant at which the last word came from the server. */
  heardAtMs: number | null
  /** Counts up when a firing starts, ends or changes its phase. */
  changes: number
  lastChange: FiringChanged | null
}

export type LiveRoomClient = {
  snapshot: () => LiveRoomSnapshot
  subscribe: (listener: () => void) => () => void
  close: () => void
}

export const roomBeforeJoin: LiveRoomSnapshot = {
  connection: { kind: 'joining' },
  room: null,
  heardAtMs: null,
  changes: 0,
  lastChange: null,
}

/** Follows all live firings in their short form, once a second; after a cut the newest state is enough. */
export function createLiveRoomClient(socket: Socket, nowMs: () => number = Date.now): LiveRoomClient {
  const listeners = new Set<() => void>()
  let isClosed = false
  let snapshot = roomBeforeJoin
  const change = (more: Partial<LiveRoomSnapshot>) => {
    snapshot = { ...snapshot, ...more }
    for (const listener of listeners) listener()
  }
  const onRoom = (room: RoomState) => change({ connection: { kind: 'live' }, room, heardAtMs: nowMs() })
  const join = () => {
    socket.emit('room:join', {}, (reply: RoomState | LiveProblem) => {
      if (isClosed) return
      if ('firings' in reply) onRoom(reply)
      else change({ connection: { kind: 'refused', problem: reply } })
    })
  }
  const onChanged = (message: FiringChanged) => {
    change({ changes: snapshot.changes + 1, lastChange: message })
  }
  const onDisconnect = () => {
    if (snapshot.connection.kind !== 'ended') change({ connection: { kind: 'cut', sinceMs: nowMs() } })
  }
  const onRefused = (error: { data?: LiveProblem; message: string }) => {
    if (error.data !== undefined) change({ connection: { kind: 'refused', problem: error.data } })
    else if (snapshot.connection.kind === 'live') onDisconnect()
  }
  const onEnded = () => change({ connection: { kind: 'ended' } })
  socket.on('connect', join)
  socket.on('disconnect', onDisconnect)
  socket.on('connect_error', onRefused)
  socket.on('room:state', onRoom)
  socket.on('room:changed', onChanged)
  socket.on('session:ended', onEnded)
  if (socket.connected) join()
  return {
    snapshot: () => snapshot,
    subscribe: (listener) => {
      listeners.add(listener)
      return () => listeners.delete(listener)
    },
    close: () => {
      isClosed = true
      socket.off('connect', join)
      socket.off('disconnect', onDisconnect)
      socket.off('connect_error', onRefused)
      socket.off('room:state', onRoom)
      socket.off('room:changed', onChanged)
      socket.off('session:ended', onEnded)
      listeners.clear()
    },
  }
}
