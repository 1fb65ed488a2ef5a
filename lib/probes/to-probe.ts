import { leadCheckFaults } from '@/lib/probes/lead-check-faults'
import type { ProbeCheckDto, ProbeDto } from '@/lib/probes/schema'
import { toCheckRow } from '@/lib/probes/to-check-row'
import { nowMs } from '@/lib/runtime'

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
  way: 'by hand' | 'live'
  settled_sd_c: number | null
  altitude_m: number | null
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
  retired_at: Date | null
  created_at: Date
  is_reading: boolean
  checks: CheckRow[] | null
  sort_key: string | null
}

/** When the earliest of the newest checks of each kind is due, by probe; for lists that filter or sort by it. */
export const probeDueSql = `(
  select min(k.due_at) from (select distinct on (c.kind) c.due_at from probe_checks c
    where c.probe_id = p.id order by c.kind, c.checked_at desc) k)`

/** One row a probe, with all its checks as JSON, newest first. `sortKey` is an expression of the list's order. */
export function probeSelect(sortKey = 'null'): string {
  return `
  select p.id, p.no, p.name, p.gateway_id, g.name as gateway_name, p.channel, p.thermocouple_type, p.iec_class, p.serial,
         p.hearth_id, h.number as hearth_number, p.usual_role, p.height, p.side, p.depth_mm, p.mounting, p.retired_at,
         p.created_at, exists (select 1 from firing_probes l where l.probe_id = p.id and l.until_at is null) as is_reading,
         (${sortKey})::text as sort_key,
         (select json_agg(json_build_object('id', c.id, 'kind', c.kind, 'reference_temp_c', c.reference_temp_c,
              'measured_temp_c', c.measured_temp_c, 'uncertainty_c', c.uncertainty_c,
              'station_pressure_hpa', c.station_pressure_hpa, 'checked_at', c.checked_at, 'due_at', c.due_at,
              'checked_by', a.name, 'way', c.way, 'settled_sd_c', c.settled_sd_c, 'altitude_m', c.altitude_m)
              order by c.checked_at desc, c.reference_temp_c desc, c.id)
            from probe_checks c join accounts a on a.id = c.account_id where c.probe_id = p.id) as checks
    from probes p
    join gateways g on g.id = p.gateway_id
    left join hearths h on h.id = p.hearth_id`
}

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
    way: row.way,
    settledSdC: row.settled_sd_c,
    altitudeM: row.altitude_m,
  }
}

/** Every check of the row, newest first. */
export function checksOf(row: ProbeRow): ProbeCheckDto[] {
  return (row.checks ?? []).map(toCheck)
}

/** @param dueSoonDays the site's rule */
export function toProbe(row: ProbeRow, dueSoonDays: number): ProbeDto {
  const all = checksOf(row)
  const atMs = nowMs()
  const facts = all.map(toCheckRow)
  const newest = all.filter((check, index) => all.findIndex((one) => one.kind === check.kind) === index)
  const checks = newest.sort((a, b) => a.referenceTempC - b.referenceTempC)
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
    isCheckDue: dueAt === null || Date.parse(dueAt) <= atMs,
    checkState: stateOf(row.usual_role, dueAt, atMs, dueSoonDays),
    leadFaults: row.usual_role === 'coals' ? [] : leadCheckFaults(row.name, facts, atMs),
    isReading: row.is_reading,
    retiredAt: row.retired_at === null ? null : new Date(row.retired_at).toISOString(),
  }
}

function stateOf(
  role: ProbeRow['usual_role'],
  dueAt: string | null,
  atMs: number,
  dueSoonDays: number,
): ProbeDto['checkState'] {
  if (dueAt === null) return role === 'coals' ? 'not asked' : 'never'
  const leftMs = Date.parse(dueAt) - atMs
  if (leftMs <= 0) return 'overdue'
  return leftMs <= dueSoonDays * 86_400_000 ? 'due soon' : 'in date'
}
