import type { Socket } from 'socket.io-client'
import type { PointFeed } from '@/components/live/point-feed'
import { createPointFeed } from '@/components/live/point-feed'
import type { FiringChanged, FiringJoined, FiringReadings, FiringState, LivePoint } from '@/lib/live/events'

export type LiveProblem = { status: number; title: string; detail?: string }
export type StaveColumn = FiringJoined['staveColumns'][number]

/** How the line to the server is: `joining` until the first picture, `cut` while it is down. */
export type Connection =
  | { kind: 'joining' }
  | { kind: 'live' }
  | { kind: 'cut'; sinceMs: number }
  | { kind: 'refused'; problem: LiveProblem }
  | { kind: 'ended' }

export type LiveFiringSnapshot = {
  connection: Connection
  state: FiringState | null
  /** Client's instant at which the last word came from the server; its age is how old the picture is. */
  heardAtMs: number | null
  columns: readonly StaveColumn[]
  /** Counts up with every `firing:changed`; `lastChange` says what: fetch again what depends on it. */
  changes: number
  lastChange: FiringChanged | null
}

export type LiveFiringClient = {
  feeds: Record<LivePoint[1], PointFeed>
  /** The same object until something changes. */
  snapshot: () => LiveFiringSnapshot
  subscribe: (listener: () => void) => () => void
  close: () => void
}

export const firingBeforeJoin: LiveFiringSnapshot = {
  connection: { kind: 'joining' },
  state: null,
  heardAtMs: null,
  columns: [],
  changes: 0,
  lastChange: null,
}

/** What was known before, to be shown, dated, until the server answers; it then sends everything anew. */
export type BeforeJoin = {
  state: FiringState
  columns: readonly StaveColumn[]
  curves: Record<LivePoint[1], readonly (readonly [atMs: number, tempC: number | null])[]>
}

export function snapshotOf({ state, columns }: BeforeJoin): LiveFiringSnapshot {
  return { ...firingBeforeJoin, state, columns }
}

/** A stave column in the picture every so often; the server keeps them as far apart. */
const columnEveryS = 10
/** An answer is waited for so long, and twice as long with each try: a slow line must not outrun its answers. */
const rejoinAfterMs = 3_000
const rejoinAtMostMs = 30_000

/**
 * Follows one firing over a socket: joins, and after a cut joins again with the number of the last point that it
 * holds, so that it gets exactly what it missed. A point comes once: numbers already held are passed over.
 */
export function createLiveFiringClient(
  socket: Socket,
  firingId: string,
  nowMs: () => number = Date.now,
  before: BeforeJoin | null = null,
): LiveFiringClient {
  const feeds = { lead: createPointFeed(), opposite: createPointFeed(), coals: createPointFeed() }
  const listeners = new Set<() => void>()
  let snapshot = before === null ? firingBeforeJoin : snapshotOf(before)
  let epoch: string | null = null
  let lastIndex = -1
  let joinNumber = 0
  let isJoining = false
  let waitMs = rejoinAfterMs
  let retry: ReturnType<typeof setTimeout> | undefined
  let isClosed = false

  for (const role of before === null ? [] : (['lead', 'opposite', 'coals'] as const)) {
    for (const [atMs, tempC] of before?.curves[role] ?? []) feeds[role].put(atMs, tempC ?? NaN)
  }
  const change = (more: Partial<LiveFiringSnapshot>) => {
    snapshot = { ...snapshot, ...more }
    for (const listener of listeners) listener()
  }
  const take = (points: readonly LivePoint[]) => {
    for (const [index, role, atMs, tempC] of points) {
      if (index <= lastIndex) continue
      lastIndex = index
      feeds[role].put(atMs, tempC ?? NaN)
    }
  }
  const onJoined = (joined: FiringJoined) => {
    if (joined.isFresh) {
      for (const feed of Object.values(feeds)) feed.clear()
      lastIndex = -1
    }
    epoch = joined.epoch
    take(joined.points)
    change({
      connection: { kind: 'live' },
      state: joined.state,
      columns: joined.staveColumns,
      heardAtMs: nowMs(),
    })
  }
  const join = () => {
    clearTimeout(retry)
    joinNumber += 1
    const number = joinNumber
    const again = () => {
      if (!isClosed && number === joinNumber && socket.connected) join()
    }
    retry = setTimeout(again, waitMs)
    waitMs = Math.min(rejoinAtMostMs, 2 * waitMs)
    isJoining = true
    socket.emit('firing:join', { firingId, epoch, lastIndex }, (reply: FiringJoined | LiveProblem) => {
      // An answer to an earlier try, or after leaving, says nothing any more.
      if (isClosed || number !== joinNumber) return
      clearTimeout(retry)
      isJoining = false
      waitMs = rejoinAfterMs
      if ('points' in reply) onJoined(reply)
      else {
        change({ connection: { kind: 'refused', problem: reply } })
        if (reply.status >= 500) retry = setTimeout(again, rejoinAfterMs)
      }
    })
  }
  const onReadings = (message: FiringReadings) => {
    if (message.firingId !== firingId || message.epoch !== epoch) return
    const [first] = message.points
    // What comes before the answer to a join is in that answer.
    if (isJoining) return
    // A hole means that something was missed: ask for it instead of drawing over it.
    if (first !== undefined && first[0] > lastIndex + 1) join()
    else {
      take(message.points)
      change({ heardAtMs: nowMs() })
    }
  }
  const onState = (state: FiringState) => {
    if (state.firingId !== firingId) return
    if (state.epoch !== epoch) {
      if (epoch !== null && !isJoining) join()
      return
    }
    const column = state.stave
    const last = snapshot.columns.at(-1)
    const isNext = column !== null && column.atS >= (last?.atS ?? -Infinity) + columnEveryS
    const columns = isNext ? [...snapshot.columns, column] : snapshot.columns
    change({ state, columns, heardAtMs: nowMs() })
  }
  const onChanged = (message: FiringChanged) => {
    if (message.firingId === firingId) change({ changes: snapshot.changes + 1, lastChange: message })
  }
  const onDisconnect = () => {
    joinNumber += 1
    isJoining = false
    waitMs = rejoinAfterMs
    clearTimeout(retry)
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
  socket.on('firing:readings', onReadings)
  socket.on('firing:state', onState)
  socket.on('firing:changed', onChanged)
  socket.on('session:ended', onEnded)
  if (socket.connected) join()

  return {
    feeds,
    snapshot: () => snapshot,
    subscribe: (listener) => {
      listeners.add(listener)
      return () => listeners.delete(listener)
    },
    close: () => {
      isClosed = true
      clearTimeout(retry)
      socket.off('connect', join)
      socket.off('disconnect', onDisconnect)
      socket.off('connect_error', onRefused)
      socket.off('firing:readings', onReadings)
      socket.off('firing:state', onState)
      socket.off('firing:changed', onChanged)
      socket.off('session:ended', onEnded)
      if (socket.connected) socket.emit('firing:leave', { firingId }, () => {})
      listeners.clear()
    },
  }
}
