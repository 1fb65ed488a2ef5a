import type { EntityManager } from '@mikro-orm/postgresql'
import { queryRows } from '@/lib/db/orm'
import type { Conversion } from '@/lib/ingest/convert-reading'
import type { CheckRow } from '@/lib/science/probe-correction'
import { probeCorrectionAt } from '@/lib/science/probe-correction'
import type { ProbePlace } from '@/lib/science/score-types'
import type { ThermocoupleType } from '@/lib/science/thermocouple'

export type ProbeRole = 'lead' | 'opposite' | 'coals'

/** One probe at one place in one firing, from one instant (included) until another (not included). */
export type ProbeAssignment = {
  probeId: string
  probeNo: number
  probeName: string
  gatewayId: string
  role: ProbeRole
  iecClass: 1 | 2 | 3
  place: ProbePlace
  fromMs: number
  /** Infinity while it reads. */
  untilMs: number
  conversion: Conversion
}

type AssignmentRow = {
  probe_id: string
  no: number
  name: string
  gateway_id: string
  role: ProbeRole
  thermocouple_type: ThermocoupleType
  iec_class: number
  height: string
  side: string
  depth_mm: number
  mounting: string
  from_at: Date
  until_at: Date | null
  preheat_at: Date
}

type CheckSqlRow = {
  probe_id: string
  kind: CheckRow['kind']
  reference_temp_c: number
  measured_temp_c: number
  uncertainty_c: number
  checked_at: Date
  due_at: Date
}

/**
 * The probes of a firing with their places and periods, in time order, each with the correction that its checks gave
 * when the firing began: what is found out later does not change a score.
 */
export async function readFiringProbes(em: EntityManager, firingId: string): Promise<ProbeAssignment[]> {
  const rows = await queryRows<AssignmentRow>(
    em,
    `select fp.probe_id, p.no, p.name, p.gateway_id, fp.role, p.thermocouple_type, p.iec_class, fp.height, fp.side,
            fp.depth_mm, fp.mounting, fp.from_at, fp.until_at, f.preheat_at
       from firing_probes fp join probes p on p.id = fp.probe_id join firings f on f.id = fp.firing_id
      where fp.firing_id = ? order by fp.from_at, fp.role, p.no`,
    [firingId],
  )
  const checks = await readChecks(em, firingId)
  return rows.map((row) => ({
    probeId: row.probe_id,
    probeNo: row.no,
    probeName: row.name,
    gatewayId: row.gateway_id,
    role: row.role,
    iecClass: row.iec_class === 1 ? 1 : row.iec_class === 2 ? 2 : 3,
    place: { height: row.height, side: row.side, depthMm: row.depth_mm, mounting: row.mounting },
    fromMs: new Date(row.from_at).getTime(),
    untilMs: row.until_at === null ? Infinity : new Date(row.until_at).getTime(),
    conversion: {
      type: row.thermocouple_type,
      correction: probeCorrectionAt(checks.get(row.probe_id) ?? [], new Date(row.preheat_at).getTime()),
    },
  }))
}

async function readChecks(em: EntityManager, firingId: string): Promise<Map<string, CheckRow[]>> {
  const rows = await queryRows<CheckSqlRow>(
    em,
    `select probe_id, kind, reference_temp_c, measured_temp_c, uncertainty_c, checked_at, due_at
       from probe_checks where probe_id in (select probe_id from firing_probes where firing_id = ?)
      order by checked_at, id`,
    [firingId],
  )
  const byProbe = new Map<string, CheckRow[]>()
  for (const row of rows) {
    const check: CheckRow = {
      kind: row.kind,
      referenceTempC: row.reference_temp_c,
      measuredTempC: row.measured_temp_c,
      uncertaintyC: row.uncertainty_c,
      checkedAtMs: new Date(row.checked_at).getTime(),
      dueAtMs: new Date(row.due_at).getTime(),
    }
    byProbe.set(row.probe_id, [...(byProbe.get(row.probe_id) ?? []), check])
  }
  return byProbe
}
