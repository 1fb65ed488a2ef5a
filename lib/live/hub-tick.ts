import type { FiringState, RoomFiring, RoomState } from '@/lib/live/events'
import { events } from '@/lib/live/events'
import type { FiringFacts } from '@/lib/live/firing-facts'
import { keepAlarmMoves } from '@/lib/live/hub-alarms'
import type { Held, HubState } from '@/lib/live/hub-state'
import { isFarFromPlan } from '@/lib/live/far-from-plan'
import type { LiveFiring } from '@/lib/live/live-firing'
import { nowMs } from '@/lib/runtime'

export const tickMs = 200
/** A state goes out once a second; a tick that comes a little early counts. */
const stateMs = 1_000 - tickMs / 4
/** Ticks further apart than this were not on time. */
const stoodStillMs = 2_000

/** Sends what has come since the last tick, at most once each; states once a second or when something changed. */
export function tickHub(hub: HubState): void {
  const atMs = nowMs()
  // A server that stood still heard nobody meanwhile: that is no gateway's silence.
  if (atMs - hub.tickedAtMs > stoodStillMs) hub.gateways.wasAwayUntil(atMs)
  hub.tickedAtMs = atMs
  for (const [firingId, one] of hub.held) {
    const isDone = one.endedAtMs !== null && one.stateAtMs >= one.endedAtMs
    if (!isDone) tickFiring(hub, firingId, one, atMs)
  }
  if (atMs - hub.roomAtMs < stateMs && atMs >= hub.roomAtMs) return
  hub.roomAtMs = atMs
  hub.output.toRoom(events.roomState, roomStateOf(hub))
}

function tickFiring(hub: HubState, firingId: string, one: Held, atMs: number): void {
  const { live } = one
  // First, so that what was found to be stuck goes out with this tick.
  const told = tellingOf(live, atMs)
  keepAlarmMoves(hub, firingId, live)
  const points = live.stream.between(one.emittedIndex, live.stream.lastIndex)
  one.emittedIndex = live.stream.lastIndex
  if (points.length > 0) {
    hub.output.toFiring(firingId, events.firingReadings, { firingId, epoch: live.epoch, points })
  }
  if (atMs - one.stateAtMs < stateMs && told === one.told) return
  one.told = told
  one.stateAtMs = atMs
  one.state = live.state(atMs)
  hub.output.toFiring(firingId, events.firingState, one.state)
}

function tellingOf(live: LiveFiring, atMs: number): string {
  const { signals, alarms, troubles, words, position } = live.glance(atMs)
  const { revision, state } = live.facts()
  const conditions = signals.map((signal) => `${signal.role} ${signal.condition} ${signal.cause}`)
  const said = alarms.map((alarm) => `${alarm.id} ${alarm.state} ${alarm.words}`)
  return [revision, state, ...conditions, ...said, ...troubles.map((one) => one.words), words, position].join(
    '|',
  )
}

/** Every live firing in its short form, by hearth. */
export function roomStateOf(hub: HubState): RoomState {
  const atMs = nowMs()
  const firings = [...hub.held.values()]
    .filter((one) => one.endedAtMs === null)
    .map((one) => toRoomFiring(one.live.facts(), one.state ?? one.live.state(atMs)))
    .sort((a, b) => (a.hearthNumber ?? 99) - (b.hearthNumber ?? 99))
  return { atMs: Math.round(atMs), firings }
}

function toRoomFiring(facts: FiringFacts, state: FiringState): RoomFiring {
  const { forecast: _forecast, stave: _stave, alarms: _alarms, troubles: _troubles, ...rest } = state
  const { hearthNumber, serial, recipeName } = facts
  const isFar = state.state === 'toasting' && isFarFromPlan(state, facts.plan)
  return { ...rest, hearthNumber, serial, recipeName, isFarFromPlan: isFar }
}
