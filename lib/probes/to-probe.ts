import type { ProbeCheckDto, ProbeDto } from '@/lib/probes/schema'
import { now } from '@/lib/runtime'

type CheckRow = {
  id: string
  kind: 'ice' | 'boiling' | 'block'
  reference_temp_c: number
  measured_temp_c: number
  uncertainty_c: number
  station_pressure_hpa: number | null
  checked_at: string
  due_at: string
  checked_by: string
}

export type ProbeRow = {
  id: string
  no: number
  name: string
  gateway_id: string
  gateway_name: string
  channel: number
  thermocouple_type: 'K' | 'N' | 'J' | 'T'
  iec_class: number
  serial: string
  hearth_id: string | null
  hearth_number: number
  usual_role: 'lead' | 'opposite' | 'coals' | 'spare'
  height: 'bilge' | 'quarter' | 'head end' | 'head' | 'coals'
  side: string
  depth_mm: number
  mounting: 'wedge' | 'drilled' | 'clamped' | 'hung'
  checks: CheckRow[] | null
}

/** One row a probe, with the newest check of each kind as JSON. */
export const probeSelect = `
  select p.id, p.no, p.name, p.gateway_id, g.name as gateway_name, p.channel, p.thermocouple_type, p.iec_class, p.serial,
         p.hearth_id, h.number as hearth_number, p.usual_role, p.height, p.side, p.depth_mm, p.mounting,
         (select json_agg(k order by k.reference_temp_c) from (
            select distinct on (c.kind) c.id, c.kind, c.reference_temp_c, c.measured_temp_c, c.uncertainty_c,
                   c.station_pressure_hpa, c.checked_at, c.due_at, a.name as checked_by
              from probe_checks c join accounts a on a.id = c.account_id
             where c.probe_id = p.id order by c.kind, c.checked_at desc) k) as checks
    from probes p
    join gateways g on g.id = p.gateway_id
    left join hearths h on h.id = p.hearth_id`

function toCheck(row: CheckRow): ProbeCheckDto {
  return {
    id: row.id,
    kind: row.kind,
    referenceTempC: row.reference_temp_c,
    measuredTempC: row.measured_temp_c,
    correctionC: row.reference_temp_c - row.measured_temp_c,
    uncertaintyC: row.uncertainty_c,
    stationPressureHpa: row.station_pressure_hpa,
    checkedAt: new Date(row.checked_at).toISOString(),
    dueAt: new Date(row.due_at).toISOString(),
    checkedBy: row.checked_by,
  }
}

export function toProbe(row: ProbeRow): ProbeDto {
  const checks = (row.checks ?? []).map(toCheck)
  const dueAt = checks.map((check) => check.dueAt).sort()[0] ?? null
  return {
    id: row.id,
    name: row.name,
    gateway: { id: row.gateway_id, name: row.gateway_name },
    channel: row.channel,
    thermocoupleType: row.thermocouple_type,
    iecClass: row.iec_class,
    serial: row.serial,
    hearth: row.hearth_id === null ? null : { id: row.hearth_id, number: row.hearth_number },
    usualRole: row.usual_role,
    place: { height: row.height, side: row.side, depthMm: row.depth_mm, mounting: row.mounting },
    checks,
    checkDueAt: dueAt,
    isCheckDue: dueAt === null || new Date(dueAt) <= now(),
  }
}
