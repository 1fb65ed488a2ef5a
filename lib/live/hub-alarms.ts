import { alarmKey } from '@/lib/alarms/firing-alarms'
import { insertAlarmMove, isOutOfTurn } from '@/lib/alarms/insert-alarm-move'
import { readAlarmStandings } from '@/lib/alarms/read-alarm-standings'
import { forkEm } from '@/lib/db/orm'
import type { HubState } from '@/lib/live/hub-state'
import type { LiveFiring } from '@/lib/live/live-firing'
import { log } from '@/lib/log'

const retryMs = 1_000

/** Takes the moves that a firing's alarms made with this tick, and writes them down behind those before. */
export function keepAlarmMoves(hub: HubState, firingId: string, live: LiveFiring): void {
  const moves = live.takeAlarmMoves()
  if (moves.length === 0) return
  hub.alarmMoves.push(...moves.map((move) => ({ firingId, move })))
  void inAlarmTurn(hub, () => writeMoves(hub))
}

/** Reads again how a firing's alarms stand, once what this hub has to say is written. */
export function readAlarmsAgain(hub: HubState, firingId: string): Promise<void> {
  return inAlarmTurn(hub, async () => {
    await writeMoves(hub)
    await restore(hub, firingId)
  })
}

function inAlarmTurn(hub: HubState, work: () => Promise<void>): Promise<void> {
  const done = hub.alarmsUnderWay.then(work).catch((error: unknown) => {
    log().warn({ err: error }, 'alarms could not be written or read; trying again')
    if (hub.isStopped) return
    setTimeout(() => void inAlarmTurn(hub, work), retryMs).unref()
  })
  hub.alarmsUnderWay = done
  return done
}

/** In their order. One that the table refuses was overtaken by a hand or by the firing's end: what stands there holds. */
async function writeMoves(hub: HubState): Promise<void> {
  for (let next = hub.alarmMoves[0]; next !== undefined; next = hub.alarmMoves[0]) {
    const { firingId, move } = next
    try {
      await insertAlarmMove(await forkEm(), { firingId, ...move, accountId: null, shelvedUntilMs: null })
      hub.alarmMoves.shift()
    } catch (error) {
      if (!isOutOfTurn(error)) throw error
      hub.alarmMoves.shift()
      dropMovesOf(hub, firingId, alarmKey(move))
      await restore(hub, firingId)
    }
  }
}

function dropMovesOf(hub: HubState, firingId: string, key: string): void {
  for (let i = hub.alarmMoves.length - 1; i >= 0; i -= 1) {
    const one = hub.alarmMoves[i]
    if (one !== undefined && one.firingId === firingId && alarmKey(one.move) === key) {
      hub.alarmMoves.splice(i, 1)
    }
  }
}

async function restore(hub: HubState, firingId: string): Promise<void> {
  const standings = await readAlarmStandings(await forkEm(), firingId)
  const held = hub.held.get(firingId)
  if (held === undefined) return
  const pending = new Set(
    hub.alarmMoves.filter((one) => one.firingId === firingId).map(({ move }) => alarmKey(move)),
  )
  held.live.restoreAlarms(standings, (key) => pending.has(key))
  // Told with the next tick.
  held.stateAtMs = -Infinity
}
