import type { LivePoint } from '@/lib/live/events'
import { probeRoles } from '@/lib/live/events'

/**
 * All points of a firing in the order in which the hub learned them, numbered without a hole. A client says the last
 * number that it holds and gets exactly what came after; late readings carry a later number and an earlier instant.
 */
export type PointStream = {
  /** Number of the newest point; -1 for none. */
  readonly lastIndex: number
  /** Number of the oldest point that is still held. */
  readonly firstIndex: number
  push: (role: LivePoint[1], atMs: number, tempC: number) => void
  /** Points numbered after `afterIndex` up to `untilIndex`, both ends told as the client counts. */
  between: (afterIndex: number, untilIndex: number) => LivePoint[]
}

const mostPoints = 500_000

export function createPointStream(): PointStream {
  let base = 0
  let roles = new Uint8Array(4_096)
  let ats = new Float64Array(4_096)
  let temps = new Float32Array(4_096)
  let length = 0

  const makeRoom = () => {
    if (length < ats.length) return
    if (length >= mostPoints) {
      const half = length >> 1
      for (const values of [roles, ats, temps]) values.copyWithin(0, half, length)
      base += half
      length -= half
      return
    }
    const capacity = ats.length * 2
    const wider = {
      roles: new Uint8Array(capacity),
      ats: new Float64Array(capacity),
      temps: new Float32Array(capacity),
    }
    wider.roles.set(roles)
    wider.ats.set(ats)
    wider.temps.set(temps)
    ;({ roles, ats, temps } = wider)
  }
  const pointAt = (i: number): LivePoint => {
    const tempC = temps[i] ?? NaN
    // Two decimals are what is stored; a float32 holds them for any temperature that wood or coals have.
    const shown = Number.isNaN(tempC) ? null : Math.round(tempC * 100) / 100
    return [base + i, probeRoles[roles[i] ?? 0] ?? 'lead', ats[i] ?? 0, shown]
  }
  return {
    get lastIndex() {
      return base + length - 1
    },
    get firstIndex() {
      return base
    },
    push: (role, atMs, tempC) => {
      makeRoom()
      roles[length] = probeRoles.indexOf(role)
      ats[length] = atMs
      temps[length] = tempC
      length += 1
    },
    between: (afterIndex, untilIndex) => {
      const points: LivePoint[] = []
      const until = Math.min(untilIndex - base, length - 1)
      for (let i = Math.max(0, afterIndex + 1 - base); i <= until; i += 1) points.push(pointAt(i))
      return points
    },
  }
}
