import { AppError } from '@/lib/errors'
import type { FiringJoined, RoomState } from '@/lib/live/events'
import { readAlarmsAgain } from '@/lib/live/hub-alarms'
import { hubDoor } from '@/lib/live/hub-door'
import { loadUntilDone, noticeChange, reconcileWithDatabase, refreshFiring } from '@/lib/live/hub-load'
import { takeRows } from '@/lib/live/hub-rows'
import { hubSketch } from '@/lib/live/hub-sketch'
import type { HubOutput, HubState } from '@/lib/live/hub-state'
import { createHubState, inTurn } from '@/lib/live/hub-state'
import { roomStateOf, tickHub, tickMs } from '@/lib/live/hub-tick'
import { log } from '@/lib/log'
import { nowMs } from '@/lib/runtime'

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

export type HubOptions = {
  /** False: it ticks and looks in the database only when told to; for tests. */
  isSelfWound?: boolean
}

const reconcileMs = 5_000

/** The live hub: one a process. It holds every live firing and tells viewers what it computes. */
export function createHub(output: HubOutput, { isSelfWound = true }: HubOptions = {}): Hub {
  const hub = createHubState(output)
  const timers: NodeJS.Timeout[] = []
  const reconcile = () => inTurn(hub, () => reconcileWithDatabase(hub))
  return {
    start: async () => {
      hubDoor().current = {
        takeRows: (rows) => takeRows(hub, rows),
        gatewayHeard: hub.gateways.hear,
        firingChanged: (firingId, what) => noticeChange(hub, firingId, what),
        alarmsChanged: (firingId) => void readAlarmsAgain(hub, firingId),
        sketchOf: (firingId) => hubSketch(hub, firingId),
      }
      if (isSelfWound) timers.push(setInterval(() => tickHub(hub), tickMs))
      await loadUntilDone(hub)
      if (isSelfWound && !hub.isStopped)
        timers.push(setInterval(() => void reconcile().catch(warn), reconcileMs))
    },
    stop: () => {
      hub.isStopped = true
      for (const timer of timers) clearInterval(timer)
      hubDoor().current = null
    },
    tick: () => tickHub(hub),
    reconcile,
    settled: async () => {
      await inTurn(hub, async () => undefined)
      await hub.alarmsUnderWay
    },
    join: (request, enter) => joinFiring(hub, request, enter),
    roomState: () => roomStateOf(hub),
  }
}

function warn(error: unknown): void {
  log().warn({ err: error }, 'live firings could not be compared with the database; trying again')
}

/** @throws AppError 'not found' when the firing is not live */
async function joinFiring(hub: HubState, request: JoinRequest, enter: () => void): Promise<FiringJoined> {
  const { firingId, epoch, lastIndex } = request
  if (!hub.held.has(firingId)) await inTurn(hub, () => refreshFiring(hub, firingId, ''))
  const one = hub.held.get(firingId)
  if (one === undefined) {
    throw new AppError('not found', 'This firing is not over a fire now. Open it in the list of firings.')
  }
  const { live } = one
  const isHeldYet = live.stream.firstIndex <= lastIndex + 1 && lastIndex <= one.emittedIndex
  const isFresh = epoch !== live.epoch || !isHeldYet
  // Nothing is awaited from here to the answer, so no tick comes between what is answered and what follows.
  enter()
  return {
    firingId,
    epoch: live.epoch,
    isFresh,
    points: live.stream.between(isFresh ? -1 : lastIndex, one.emittedIndex),
    state: live.state(nowMs()),
    staveColumns: live.staveColumns(),
  }
}
