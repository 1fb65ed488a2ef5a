import type { Sketch } from '@/lib/firings/sketch'
import { shared } from '@/lib/runtime'

/**
 * Readings that one gateway message has just committed, by column; row i is the i-th of each. Whole numbers as
 * they are stored: 0.1 µV, 0.01 °C, ms since 1970 UTC. Flag 0 is none, 1 open, 2 short, 3 fault.
 */
export type CommittedRows = {
  probeNo: number[]
  atMs: number[]
  emfTenthUv: (number | null)[]
  coldCentiC: (number | null)[]
  tempCentiC: (number | null)[]
  flag: number[]
}

/** What the hub takes from the rest of the process. All return at once and never throw. */
export type HubDoor = {
  takeRows: (rows: CommittedRows) => void
  /** A message of a gateway came, whatever was in it; the offset of its clock is null until it is stored. */
  gatewayHeard: (gatewayId: string, atMs: number, clockOffsetMs: number | null) => void
  firingChanged: (firingId: string, what: string) => void
  /** A hand's move of an alarm was committed. */
  alarmsChanged: (firingId: string) => void
  /** The small pair of a live firing; null when it is not held. */
  sketchOf: (firingId: string) => Sketch | null
}

/**
 * The one hub of this process. The server, the route bundle and the page bundle each have their own copy of every
 * module, so what they share is this holder. `current` is null where no hub runs (seeds, migrations, most tests).
 */
export function hubDoor(): { current: HubDoor | null } {
  return shared<{ current: HubDoor | null }>('hub', () => ({ current: null }))
}
