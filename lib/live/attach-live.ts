import type { Server, Socket } from 'socket.io'
import type * as z from 'zod'
import type { DeviceActor, PersonActor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { readDeviceActor, readDeviceById } from '@/lib/auth/read-device-actor'
import { readActorOfSession, readSessionActor } from '@/lib/auth/read-session-actor'
import { env } from '@/lib/env'
import { AppError } from '@/lib/errors'
import type { Problem } from '@/lib/http/problem'
import { toProblem } from '@/lib/http/problem'
import { parseInput } from '@/lib/http/route'
import { events, joinFiringSchema, leaveFiringSchema } from '@/lib/live/events'
import type { Hub } from '@/lib/live/hub'
import type { HubOutput } from '@/lib/live/hub-state'
import { log } from '@/lib/log'

/** How often each viewer is looked at again: sign-out, a change of role and revoking end a socket within 5 s. */
export const recheckMs = 2_500

const overviewRoom = 'room'
const roomOf = (firingId: string) => `firing:${firingId}`

type ViewerActor = PersonActor | DeviceActor
type Viewer = { actor: ViewerActor }

/** The rooms of the namespace for people, as the hub speaks to them. */
export function liveOutput(io: Server): HubOutput {
  const live = io.of('/live')
  return {
    toFiring: (firingId, event, payload) => void live.to(roomOf(firingId)).emit(event, payload),
    toRoom: (event, payload) => void live.to(overviewRoom).emit(event, payload),
  }
}

/** Opens the namespace `/live`: own origin, session or device cookie, rooms by permission. Answers how to stop. */
export function attachLive(io: Server, hub: Hub): () => void {
  const live = io.of('/live')
  const viewers = new Map<Socket, Viewer>()
  // A socket that goes before it is connected leaves nothing behind.
  const admitted = new WeakMap<Socket, ViewerActor>()
  live.use((socket, next) => {
    admit(socket).then(
      (actor) => {
        admitted.set(socket, actor)
        next()
      },
      (error: unknown) => next(refusal(error)),
    )
  })
  live.on('connection', (socket) => {
    const actor = admitted.get(socket)
    if (actor !== undefined) viewers.set(socket, { actor })
    socket.on('disconnect', () => viewers.delete(socket))
    serve(socket, viewers, hub)
  })
  return startRechecking(viewers)
}

/**
 * An enrolled device is let in as itself, whoever is signed in at it: the picture does not end when people change.
 * @throws AppError 'not allowed' for another site's page or a role that may not follow, 'not signed in'
 */
async function admit(socket: Socket): Promise<ViewerActor> {
  const { origin, cookie } = socket.handshake.headers
  const own = new URL(env().APP_ORIGIN).origin
  if (origin !== undefined && origin !== own) {
    throw new AppError('not allowed', `Live pictures are for pages of ${own} only.`)
  }
  const actor = (await readDeviceActor(cookie)) ?? (await readSessionActor(cookie))
  if (actor === null) throw new AppError('not signed in', 'Your session has ended. Sign in and try again.')
  requirePermission(actor, 'firings:follow')
  return actor
}

/** What a refused client finds as its connect error: the problem as `data`. */
function refusal(error: unknown): Error {
  const problem = toProblem(error)
  return Object.assign(new Error(problem.title), { data: problem })
}

function serve(socket: Socket, viewers: Map<Socket, Viewer>, hub: Hub): void {
  const answer = <T>(schema: z.ZodType<T> | null, work: (input: T) => Promise<object> | object) => {
    return async (input: unknown, reply: unknown) => {
      const acknowledge = typeof reply === 'function' ? reply : typeof input === 'function' ? input : () => {}
      acknowledge(await outcomeOf(socket, viewers, schema, input, work))
    }
  }
  socket.on(
    events.firingJoin,
    answer(joinFiringSchema, (input) => hub.join(input, () => void socket.join(roomOf(input.firingId)))),
  )
  socket.on(
    events.firingLeave,
    answer(leaveFiringSchema, async (input) => {
      await socket.leave(roomOf(input.firingId))
      return {}
    }),
  )
  socket.on(
    events.roomJoin,
    answer<unknown>(null, async () => {
      await socket.join(overviewRoom)
      return hub.roomState()
    }),
  )
}

/** Authorises, parses, works; whatever goes wrong becomes a problem in the acknowledgement. */
async function outcomeOf<T>(
  socket: Socket,
  viewers: Map<Socket, Viewer>,
  schema: z.ZodType<T> | null,
  input: unknown,
  work: (input: T) => Promise<object> | object,
): Promise<object | Problem> {
  try {
    const viewer = viewers.get(socket)
    if (viewer === undefined)
      throw new AppError('not signed in', 'Your session has ended. Sign in and try again.')
    requirePermission(viewer.actor, 'firings:follow')
    return await work(schema === null ? untouched<T>(input) : parseInput(schema, input))
  } catch (error) {
    return toProblem(error)
  }
}

/** The parsed boundary of an event that takes nothing. */
function untouched<T>(input: unknown): T {
  return input as T
}

function keyOf(actor: ViewerActor): string {
  return actor.kind === 'device' ? `device ${actor.deviceId}` : `session ${actor.sessionId}`
}

async function readAgain(actor: ViewerActor): Promise<ViewerActor | null> {
  return actor.kind === 'device' ? readDeviceById(actor.deviceId) : readActorOfSession(actor.sessionId)
}

function isSameRole(before: ViewerActor, after: ViewerActor): boolean {
  if (before.kind === 'device' || after.kind === 'device') return before.kind === after.kind
  return before.role === after.role && before.customerId === after.customerId
}

/** Reads every viewer again; who has ended, was revoked, changed role or lost the permission loses the sockets. */
function startRechecking(viewers: Map<Socket, Viewer>): () => void {
  let isRunning = false
  const recheck = async () => {
    const byKey = new Map<string, [Socket, Viewer][]>()
    for (const entry of viewers) {
      const key = keyOf(entry[1].actor)
      byKey.set(key, [...(byKey.get(key) ?? []), entry])
    }
    for (const entries of byKey.values()) {
      const [first] = entries
      const actor = first === undefined ? null : await readAgain(first[1].actor)
      for (const [socket, viewer] of entries) {
        if (actor !== null && isSameRole(viewer.actor, actor)) {
          viewer.actor = actor
          continue
        }
        viewers.delete(socket)
        socket.emit(events.sessionEnded, {})
        socket.disconnect()
      }
    }
  }
  const timer = setInterval(() => {
    if (isRunning) return
    isRunning = true
    recheck()
      // While the database is silent nothing is committed either, so nothing new is shown to anybody.
      .catch((error: unknown) => log().warn({ err: error }, 'sessions of viewers could not be read again'))
      .finally(() => (isRunning = false))
  }, recheckMs)
  timer.unref()
  return () => clearInterval(timer)
}
