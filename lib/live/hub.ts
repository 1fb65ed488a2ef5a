import { forkEm, queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { convertReading } from '@/lib/ingest/convert-reading'
import type { ProbeAssignment } from '@/lib/ingest/firing-probes'
import { readHot } from '@/lib/ingest/read-hot'
import type { FiringJoined, FiringState, RoomFiring, RoomState } from '@/lib/live/events'
import { events } from '@/lib/live/events'
import type { FiringFacts } from '@/lib/live/firing-facts'
import { readFiringFacts, readLiveStamps } from '@/lib/live/firing-facts'
import type { CommittedRows } from '@/lib/live/hub-door'
import { hubDoor } from '@/lib/live/hub-door'
import type { LiveFiring } from '@/lib/live/live-firing'
import { createLiveFiring } from '@/lib/live/live-firing'
import { log } from '@/lib/log'
import { nowMs } from '@/lib/runtime'

/** Where the hub speaks to: the rooms of a socket server, or a test's notebook. */
export type HubOutput = {
  toFiring: (firingId: string, event: string, payload: object) => void
  toRoom: (event: string, payload: object) => void
}

export type JoinRequest = { firingId: string; epoch: string | null; lastIndex: number }

export type Hub = {
  /** Loads the live firings, takes committed rows from then on, and ticks. Settles after the first whole load. */
  start: () => Promise<void>
  stop: () => void
  /** One tick now; `start` does it every 200 ms. */
  tick: () => void
  /** Looks in the database for what has changed; `start` does it every few seconds. */
  reconcile: () => Promise<void>
  /** Settles when nothing is being read. */
  settled: () => Promise<void>
  /** What a viewer lacks. `enter` is called at the right moment: what it joins from then on comes by events. */
  join: (request: JoinRequest, enter: () => void) => Promise<FiringJoined>
  roomState: () => RoomState
}

const tickMs = 200
const stateMs = 1_000
const reconcileMs = 5_000
const retryMs = 1_000
/** An ended firing stays for those who look at it, and for its score to be announced. */
const keepEndedMs = 10 * 60_000

type Held = {
  live: LiveFiring
  stamp: string
  /** Number of the newest point that viewers were sent. */
  emittedIndex: number
  stateAtMs: number
  state: FiringState | null
  told: string
  endedAtMs: number | null
}

export type HubOptions = {
  /** False: it ticks and looks in the database only when told to; for tests. */
  isSelfWound?: boolean
}

/** The live hub: one a process. It holds every live firing and tells viewers what it computes. */
export function createHub(output: HubOutput, { isSelfWound = true }: HubOptions = {}): Hub {
  const held = new Map<string, Held>()
  /** Being read from the database: they take rows already, but nobody is told of them yet. */
  const loading = new Map<string, Held>()
  const waiting = new Map<string, string[]>()
  const timers: NodeJS.Timeout[] = []
  let underWay: Promise<void> = Promise.resolve()
  let isStopped = false

  const inTurn = (work: () => Promise<void>): Promise<void> => {
    underWay = underWay.then(work)
    return underWay
  }

  const load = async (facts: FiringFacts, stamp: string) => {
    const one: Held = {
      live: createLiveFiring(facts),
      stamp,
      emittedIndex: -1,
      stateAtMs: -Infinity,
      state: null,
      told: '',
      endedAtMs: null,
    }
    loading.set(facts.firingId, one)
    try {
      // Rows that are committed from here on come through `takeRows`; a row that comes both ways is one point.
      const em = await forkEm()
      for (const assignment of facts.assignments) {
        const columns = await readHot(em, assignment.probeNo, [assignment])
        columns.atMs.forEach((atMs, i) => {
          const emf = columns.emfTenthUv[i] ?? null
          const cold = columns.coldCentiC[i] ?? null
          const temp = columns.tempCentiC[i] ?? null
          putRow(one.live, assignment, atMs, emf, cold, temp, columns.flag[i] ?? 0)
        })
      }
      one.live.glance(nowMs())
      one.emittedIndex = one.live.stream.lastIndex
      held.set(facts.firingId, one)
    } finally {
      loading.delete(facts.firingId)
    }
  }

  /** Reads a firing again: into the one that is held, or anew when its probes' periods are others. */
  const refresh = async (firingId: string, stamp: string | null) => {
    const facts = await readFiringFacts(await forkEm(), firingId)
    const known = held.get(firingId)
    if (facts === null) return
    const isEnded = facts.state === 'finished' || facts.state === 'abandoned'
    if (known === undefined) {
      if (!isEnded) await load(facts, stamp ?? '')
      return
    }
    if (!isEnded && periodsOf(known.live.facts()) !== periodsOf(facts)) await load(facts, stamp ?? '')
    else known.live.setFacts(facts)
    const now = held.get(firingId) ?? known
    now.stamp = stamp ?? ''
    now.stateAtMs = -Infinity
    if (isEnded) now.endedAtMs ??= nowMs()
  }

  const announce = async (firingId: string, whats: readonly string[]) => {
    const revision = held.get(firingId)?.live.facts().revision ?? (await readRevision(firingId))
    for (const what of whats) {
      output.toFiring(firingId, events.firingChanged, { firingId, revision, what })
      output.toRoom(events.roomChanged, { firingId, revision, what })
    }
  }

  /** Notices that came while the database did not answer are kept and tried again. */
  const workThroughNotices = () =>
    inTurn(async () => {
      for (const [firingId, whats] of [...waiting]) {
        waiting.delete(firingId)
        try {
          await refresh(firingId, null)
          await announce(firingId, whats)
        } catch (error) {
          waiting.set(firingId, [...whats, ...(waiting.get(firingId) ?? [])])
          log().warn({ err: error, firingId }, 'a changed firing could not be read; trying again')
          if (!isStopped) setTimeout(() => void workThroughNotices(), retryMs).unref()
        }
      }
    })

  const reconcileNow = async () => {
    const stamps = await readLiveStamps(await forkEm())
    const live = new Map(stamps.map(({ firingId, stamp }) => [firingId, stamp]))
    for (const [firingId, stamp] of live) {
      const known = held.get(firingId)
      if (known?.stamp === stamp) continue
      const isNews = known === undefined || known.stamp !== ''
      await refresh(firingId, stamp)
      if (isNews) await announce(firingId, [known === undefined ? 'started' : 'details'])
    }
    for (const [firingId, one] of held) {
      if (!live.has(firingId) && one.endedAtMs === null) {
        await refresh(firingId, '')
        await announce(firingId, [one.live.facts().state === 'abandoned' ? 'abandoned' : 'finished'])
      }
      if (one.endedAtMs !== null && nowMs() - one.endedAtMs > keepEndedMs) held.delete(firingId)
    }
  }

  const takeRows = (rows: CommittedRows) => {
    const takers = [...held.values(), ...loading.values()].filter((one) => one.endedAtMs === null)
    const routes = new Map<number, { live: LiveFiring; assignment: ProbeAssignment }[]>()
    for (const { live } of takers) {
      for (const assignment of live.facts().assignments) {
        routes.set(assignment.probeNo, [...(routes.get(assignment.probeNo) ?? []), { live, assignment }])
      }
    }
    if (routes.size === 0) return
    for (let i = 0; i < rows.atMs.length; i += 1) {
      const atMs = rows.atMs[i] ?? NaN
      for (const { live, assignment } of routes.get(rows.probeNo[i] ?? -1) ?? []) {
        if (!(atMs >= assignment.fromMs && atMs < assignment.untilMs)) continue
        const [emf, cold] = [rows.emfTenthUv[i] ?? null, rows.coldCentiC[i] ?? null]
        putRow(live, assignment, atMs, emf, cold, rows.tempCentiC[i] ?? null, rows.flag[i] ?? 0)
      }
    }
  }

  const tickOne = (firingId: string, one: Held, atMs: number) => {
    const { live } = one
    const points = live.stream.between(one.emittedIndex, live.stream.lastIndex)
    one.emittedIndex = live.stream.lastIndex
    if (points.length > 0) {
      output.toFiring(firingId, events.firingReadings, { firingId, epoch: live.epoch, points })
    }
    const isDue = atMs - one.stateAtMs >= stateMs - tickMs / 4
    const told = tellingOf(live, atMs)
    if (!isDue && told === one.told) return
    one.told = told
    one.stateAtMs = atMs
    one.state = live.state(atMs)
    output.toFiring(firingId, events.firingState, one.state)
  }

  let roomAtMs = -Infinity
  const tick = () => {
    const atMs = nowMs()
    for (const [firingId, one] of held) {
      if (one.endedAtMs !== null && one.stateAtMs > one.endedAtMs) continue
      tickOne(firingId, one, atMs)
    }
    if (atMs - roomAtMs >= stateMs - tickMs / 4 || atMs < roomAtMs) {
      roomAtMs = atMs
      output.toRoom(events.roomState, roomState())
    }
  }

  const roomState = (): RoomState => {
    const atMs = nowMs()
    const firings = [...held.values()]
      .filter((one) => one.endedAtMs === null)
      .map((one) => toRoomFiring(one.live.facts(), one.state ?? one.live.state(atMs)))
      .sort((a, b) => (a.hearthNumber ?? 99) - (b.hearthNumber ?? 99))
    return { atMs: Math.round(atMs), firings }
  }

  const join = async (request: JoinRequest, enter: () => void): Promise<FiringJoined> => {
    if (!held.has(request.firingId)) await inTurn(() => refresh(request.firingId, '').catch(() => undefined))
    const one = held.get(request.firingId)
    if (one === undefined) {
      throw new AppError('not found', 'This firing is not over a fire now. Open it in the list of firings.')
    }
    const { live } = one
    const holdsAll = live.stream.firstIndex <= request.lastIndex + 1 && request.lastIndex <= one.emittedIndex
    const isFresh = request.epoch !== live.epoch || !holdsAll
    // Nothing is awaited from here to the answer, so no tick comes between what is answered and what follows.
    enter()
    return {
      firingId: request.firingId,
      epoch: live.epoch,
      isFresh,
      points: live.stream.between(isFresh ? -1 : request.lastIndex, one.emittedIndex),
      state: live.state(nowMs()),
      staveColumns: live.staveColumns(),
    }
  }

  const start = async () => {
    hubDoor().current = {
      takeRows,
      firingChanged: (firingId, what) => {
        waiting.set(firingId, [...(waiting.get(firingId) ?? []), what])
        void workThroughNotices()
      },
    }
    if (isSelfWound) timers.push(setInterval(tick, tickMs))
    for (;;) {
      if (isStopped) return
      try {
        await reconcile()
        break
      } catch (error) {
        log().warn({ err: error }, 'live firings could not be read; trying again in a second')
        await new Promise((resolve) => setTimeout(resolve, retryMs).unref())
      }
    }
    if (!isSelfWound) return
    timers.push(
      setInterval(() => {
        reconcile().catch((error: unknown) => {
          log().warn({ err: error }, 'live firings could not be compared with the database; trying again')
        })
      }, reconcileMs),
    )
  }

  const reconcile = async () => {
    let failure: unknown = null
    await inTurn(() => reconcileNow().catch((error: unknown) => void (failure = error)))
    if (failure !== null) throw failure
  }

  return {
    start,
    stop: () => {
      isStopped = true
      for (const timer of timers) clearInterval(timer)
      hubDoor().current = null
    },
    tick,
    reconcile,
    settled: () => inTurn(async () => undefined),
    join,
    roomState,
  }
}

function putRow(
  live: LiveFiring,
  assignment: ProbeAssignment,
  atMs: number,
  emfTenthUv: number | null,
  coldCentiC: number | null,
  tempCentiC: number | null,
  flag: number,
): void {
  live.put(
    assignment,
    atMs,
    convertReading(assignment.conversion, emfTenthUv, coldCentiC, tempCentiC, flag),
    flag,
  )
}

/** Probes and their periods; what a period gains at its end by being closed is no other period. */
function periodsOf(facts: FiringFacts): string {
  return JSON.stringify(
    facts.assignments.map((one) => [one.probeId, one.role, one.fromMs, String(one.untilMs)]),
  )
}

/** What viewers are told at once when it changes. */
function tellingOf(live: LiveFiring, atMs: number): string {
  const { signals, alarm, words, position } = live.glance(atMs)
  const { revision, state } = live.facts()
  const conditions = signals.map((signal) => `${signal.role} ${signal.condition} ${signal.cause}`)
  return [revision, state, ...conditions, alarm?.words, words, position].join('|')
}

function toRoomFiring(facts: FiringFacts, state: FiringState): RoomFiring {
  const { forecast: _forecast, stave: _stave, ...rest } = state
  const { hearthNumber, serial, recipeName } = facts
  return { ...rest, hearthNumber, serial, recipeName }
}

async function readRevision(firingId: string): Promise<number> {
  const rows = await queryRows<{ revision: number }>(
    await forkEm(),
    'select revision from firings where id = ?',
    [firingId],
  )
  return rows[0]?.revision ?? 0
}
