import type { Socket } from 'socket.io-client'
import { io } from 'socket.io-client'
import { keepConnected } from '@/components/live/keep-connected'
import type { LiveFiringClient } from '@/components/live/live-firing-client'
import { createLiveFiringClient } from '@/components/live/live-firing-client'
import type { LivePoint } from '@/lib/live/events'
import { events, firingJoinedSchema, firingReadingsSchema, firingStateSchema } from '@/lib/live/events'

/** What a viewer held when the server last said how the firing stands. */
export type Seen = { firingId: string; epoch: string; doseMinutes: number; leadAtMs: Float64Array }

/** Counted on the wire, by the stream's epoch and numbers. */
export type WireCounts = { gaps: number; doubles: number; resumes: number; freshStarts: number }

/** A tablet at the fire: the console's own live client on a socket of its own, and a notebook of what came over it. */
export type Viewer = {
  readonly counts: WireCounts
  follow: (firingId: string) => void
  firingId: () => string
  /** Instants of the wood's lead probe that the picture holds, rising. */
  leadAtMs: () => Float64Array
  isJoined: () => boolean
  lastSeen: () => Seen | null
  close: () => void
}

type ViewerOptions = { url: string; origin: string; cookie: string; firingId: string }

export function openViewer({ url, origin, cookie, firingId }: ViewerOptions): Viewer {
  const socket = io(`${url}/live`, {
    forceNew: true,
    transports: ['websocket'],
    reconnectionDelay: 250,
    reconnectionDelayMax: 2_000,
    extraHeaders: { origin, cookie },
  })
  const stopKeeping = keepConnected(socket)
  const wire = watchWire(socket)
  let followed = firingId
  let client: LiveFiringClient = createLiveFiringClient(socket, followed)
  let seen: Seen | null = null
  // After the client's own listener, so that its picture holds what came before.
  const listen = () => {
    socket.off(events.firingState, note)
    socket.on(events.firingState, note)
  }
  const note = (payload: unknown) => {
    const state = firingStateSchema.safeParse(payload)
    if (!state.success || state.data.firingId !== followed || state.data.epoch !== wire.epoch()) return
    seen = {
      firingId: followed,
      epoch: state.data.epoch,
      doseMinutes: state.data.dose.minutes,
      leadAtMs: client.feeds.lead.atMs().slice(),
    }
  }
  listen()
  return {
    counts: wire.counts,
    follow: (next) => {
      client.close()
      followed = next
      seen = null
      wire.forget()
      client = createLiveFiringClient(socket, next)
      listen()
    },
    firingId: () => followed,
    leadAtMs: () => client.feeds.lead.atMs(),
    isJoined: () => client.snapshot().connection.kind === 'live',
    lastSeen: () => seen,
    close: () => {
      client.close()
      stopKeeping()
      socket.close()
    },
  }
}

/**
 * Counts on the wire: a message of readings must begin with the number after the last, and the answer to a join with
 * the number after the one that was named (0 in a new epoch). What comes while an answer is awaited belongs to it.
 */
function watchWire(socket: Socket) {
  const counts: WireCounts = { gaps: 0, doubles: 0, resumes: 0, freshStarts: 0 }
  let epoch: string | null = null
  let last = -1
  let joinNumber = 0
  let isJoining = false

  const take = (points: readonly LivePoint[]) => {
    for (const [index] of points) {
      if (index > last + 1) counts.gaps += 1
      if (index <= last) counts.doubles += 1
      last = Math.max(last, index)
    }
  }
  const onJoined = (reply: unknown, number: number) => {
    // An answer to an earlier try is passed over, as the console's client does.
    if (number !== joinNumber) return
    isJoining = false
    const joined = firingJoinedSchema.safeParse(reply)
    if (!joined.success) return
    if (joined.data.isFresh) last = -1
    if (joined.data.isFresh) counts.freshStarts += 1
    else counts.resumes += 1
    epoch = joined.data.epoch
    take(joined.data.points)
  }
  const emit = socket.emit.bind(socket)
  socket.emit = (event: string, ...args: unknown[]) => {
    const reply = args.at(-1)
    if (event !== events.firingJoin || typeof reply !== 'function') return emit(event, ...args)
    joinNumber += 1
    const number = joinNumber
    isJoining = true
    return emit(event, ...args.slice(0, -1), (answer: unknown) => {
      onJoined(answer, number)
      reply(answer)
    })
  }
  socket.on('disconnect', () => {
    joinNumber += 1
    isJoining = false
  })
  socket.on(events.firingReadings, (payload: unknown) => {
    const message = firingReadingsSchema.safeParse(payload)
    if (message.success && message.data.epoch === epoch && !isJoining) take(message.data.points)
  })
  return {
    counts,
    epoch: () => epoch,
    forget: () => {
      epoch = null
      last = -1
    },
  }
}
