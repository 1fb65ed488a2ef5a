import { convertReading } from '@/lib/ingest/convert-reading'
import type { ProbeAssignment } from '@/lib/ingest/firing-probes'
import type { ReadingColumns } from '@/lib/ingest/reading-columns'
import type { CommittedRows } from '@/lib/live/hub-door'
import type { HubState } from '@/lib/live/hub-state'
import type { LiveFiring } from '@/lib/live/live-firing'

type Route = { live: LiveFiring; assignment: ProbeAssignment }

/** Gives committed rows to the firings whose probes read them, in their periods. */
export function takeRows(hub: HubState, rows: CommittedRows): void {
  const routes = routesOf(hub)
  if (routes.size === 0) return
  for (let i = 0; i < rows.atMs.length; i += 1) {
    for (const { live, assignment } of routes.get(rows.probeNo[i] ?? -1) ?? []) {
      putRow(live, assignment, rows, i)
    }
  }
}

function routesOf(hub: HubState): Map<number, Route[]> {
  const routes = new Map<number, Route[]>()
  for (const { live, endedAtMs } of [...hub.held.values(), ...hub.loading.values()]) {
    if (endedAtMs !== null) continue
    for (const assignment of live.facts().assignments) {
      routes.set(assignment.probeNo, [...(routes.get(assignment.probeNo) ?? []), { live, assignment }])
    }
  }
  return routes
}

/** Converts row `i` and puts it into the firing, if it lies in the probe's period there. */
export function putRow(live: LiveFiring, assignment: ProbeAssignment, rows: ReadingColumns, i: number): void {
  const atMs = rows.atMs[i] ?? NaN
  if (!(atMs >= assignment.fromMs && atMs < assignment.untilMs)) return
  const flag = rows.flag[i] ?? 0
  const [emf, cold] = [rows.emfTenthUv[i] ?? null, rows.coldCentiC[i] ?? null]
  const tempC = convertReading(assignment.conversion, emf, cold, rows.tempCentiC[i] ?? null, flag)
  live.put(assignment, atMs, tempC, flag)
}
