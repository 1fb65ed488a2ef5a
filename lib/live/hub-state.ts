import type { FiringState } from '@/lib/live/events'
import type { AlarmMove } from '@/lib/alarms/firing-alarms'
import type { GatewayWatch } from '@/lib/live/gateway-watch'
import { createGatewayWatch } from '@/lib/live/gateway-watch'
import type { LiveFiring } from '@/lib/live/live-firing'
import { nowMs } from '@/lib/runtime'

/** Where the hub speaks to: the rooms of a socket server, or a test's notebook. */
export type HubOutput = {
  toFiring: (firingId: string, event: string, payload: object) => void
  toRoom: (event: string, payload: object) => void
}

/** A firing that the hub holds, and what viewers were told of it. */
export type Held = {
  live: LiveFiring
  /** As `readLiveStamps` gave it when the firing was read; empty when it was read for another reason. */
  stamp: string
  /** Number of the newest point that viewers were sent. */
  emittedIndex: number
  stateAtMs: number
  state: FiringState | null
  /** What viewers must be told at once when it changes, as one text. */
  told: string
  endedAtMs: number | null
}

export type HubState = {
  readonly output: HubOutput
  readonly held: Map<string, Held>
  /** Being read from the database: they take rows already, but nobody is told of them yet. */
  readonly loading: Map<string, Held>
  /** Notices that were not worked through yet, by firing. */
  readonly notices: Map<string, string[]>
  readonly gateways: GatewayWatch
  /** Moves of alarms that are not written down yet, in their order. */
  readonly alarmMoves: { firingId: string; move: AlarmMove }[]
  /** Writing them, and reading again what hands did, goes one after the other. */
  alarmsUnderWay: Promise<void>
  roomAtMs: number
  tickedAtMs: number
  isStopped: boolean
  /** Reading goes one after the other: what is read later is newer. */
  underWay: Promise<void>
}

export function createHubState(output: HubOutput): HubState {
  return {
    output,
    held: new Map(),
    loading: new Map(),
    notices: new Map(),
    gateways: createGatewayWatch(nowMs()),
    alarmMoves: [],
    alarmsUnderWay: Promise.resolve(),
    roomAtMs: -Infinity,
    tickedAtMs: -Infinity,
    isStopped: false,
    underWay: Promise.resolve(),
  }
}

/** Runs `work` after what is under way; settles, or fails, as it does. */
export function inTurn<T>(hub: HubState, work: () => Promise<T>): Promise<T> {
  const done = hub.underWay.then(work)
  hub.underWay = done.then(
    () => undefined,
    () => undefined,
  )
  return done
}

export function newlyHeld(live: LiveFiring, stamp: string): Held {
  return { live, stamp, emittedIndex: -1, stateAtMs: -Infinity, state: null, told: '', endedAtMs: null }
}
