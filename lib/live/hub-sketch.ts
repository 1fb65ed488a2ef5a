import type { Sketch } from '@/lib/firings/sketch'
import { bandOf, thinCurve, thinColumns } from '@/lib/firings/sketch'
import type { Held, HubState } from '@/lib/live/hub-state'
import { nowMs } from '@/lib/runtime'

/** A room's screen asks for each hearth's picture now and then; many screens get the same one, ms. */
const freshForMs = 4_000
const kept = new WeakMap<Held, { atMs: number; sketch: Sketch }>()

/** The small pair of a firing that the hub holds, from what it has computed already; null when it holds none. */
export function hubSketch(hub: HubState, firingId: string): Sketch | null {
  const one = hub.held.get(firingId)
  if (one === undefined) return null
  const atMs = nowMs()
  const known = kept.get(one)
  if (known !== undefined && Math.abs(atMs - known.atMs) < freshForMs) return known.sketch
  const sketch = sketchOf(one)
  kept.set(one, { atMs, sketch })
  return sketch
}

function sketchOf({ live }: Held): Sketch {
  const { toastMs, plan } = live.facts()
  const band = bandOf(plan)
  if (toastMs === null) return { timeS: [], tempC: [], band, wood: null }
  // A point that came again, as no reading, is the later one of the two.
  const byInstant = new Map<number, number | null>()
  for (const [, role, at, tempC] of live.stream.between(-1, live.stream.lastIndex)) {
    if (role === 'lead' && at >= toastMs) byInstant.set(at, tempC)
  }
  const points = [...byInstant].sort((a, b) => a[0] - b[0])
  const curve = thinCurve(
    points.map(([at]) => (at - toastMs) / 1000),
    points.map(([, tempC]) => tempC ?? Number.NaN),
  )
  return { ...curve, band, wood: thinColumns(live.staveColumns()) }
}
