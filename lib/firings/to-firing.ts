import type { FiringDto, FiringSummary, MarkDto } from '@/lib/firings/schema'
import type { FiringState } from '@/lib/firings/firing-states'
import { recipeCopySchema } from '@/lib/recipes/schema'

/** One row a firing with piece, batch, recipe, last hearth and newest score. */
export const firingSelect = `
  select f.id, f.state, f.revision, f.piece_id, p.kind as piece_kind, p.serial, p.position, b.id as batch_id,
         b.number as batch_number, b.piece_count, b.wood_lot, b.customer_id, c.name as customer_name,
         r.id as recipe_id, r.name as recipe_name, v.id as version_id, v.number as version_number,
         w.number as hearth_number, f.toaster_id, a.name as toaster_name, f.is_trial, f.is_imported, f.is_first_of_day,
         f.queued_at, f.preheat_at, f.bend_at, f.toast_at, f.rest_at, f.ended_at, f.end_reason,
         s.verdict, s.points, s.dose_minutes, s.dose_low_minutes, s.dose_high_minutes, s.plan_dose_minutes,
         s.toast_depth_mm, s.sketch, coalesce(f.toast_at, f.preheat_at, f.queued_at) as started_at
    from firings f
    join pieces p on p.id = f.piece_id
    join batches b on b.id = p.batch_id
    join customers c on c.id = b.customer_id
    join recipe_versions v on v.id = f.recipe_version_id
    join recipes r on r.id = v.recipe_id
    left join accounts a on a.id = f.toaster_id
    left join lateral (
      select h.number from firing_placements l join hearths h on h.id = l.hearth_id
       where l.firing_id = f.id order by l.from_at desc limit 1) w on true
    left join lateral (select * from scores where firing_id = f.id order by number desc limit 1) s on true`

export type FiringRow = {
  id: string
  state: FiringState
  revision: number
  piece_id: string
  piece_kind: 'barrel' | 'head'
  serial: string
  position: number
  batch_id: string
  batch_number: number
  piece_count: number
  wood_lot: string
  customer_id: string
  customer_name: string
  recipe_id: string
  recipe_name: string
  version_id: string
  version_number: number
  hearth_number: number | null
  toaster_id: string | null
  toaster_name: string | null
  is_trial: boolean
  is_imported: boolean
  is_first_of_day: boolean
  queued_at: Date
  preheat_at: Date | null
  bend_at: Date | null
  toast_at: Date | null
  rest_at: Date | null
  ended_at: Date | null
  end_reason: string | null
  verdict: 'in tolerance' | 'cannot tell' | 'out of tolerance' | 'limit broken' | 'incomplete' | null
  points: number | null
  dose_minutes: number | null
  dose_low_minutes: number | null
  dose_high_minutes: number | null
  plan_dose_minutes: number
  toast_depth_mm: number | null
  sketch: unknown
  started_at: Date
}

export function isoOrNull(at: Date | string | null): string | null {
  return at === null ? null : new Date(at).toISOString()
}

export function toFiringSummary(row: FiringRow): FiringSummary {
  return {
    id: row.id,
    state: row.state,
    piece: { id: row.piece_id, kind: row.piece_kind, serial: row.serial, position: row.position },
    batch: {
      id: row.batch_id,
      number: row.batch_number,
      pieceCount: row.piece_count,
      woodLot: row.wood_lot,
      customerName: row.customer_name,
    },
    recipe: {
      id: row.recipe_id,
      name: row.recipe_name,
      versionId: row.version_id,
      versionNumber: row.version_number,
    },
    hearthNumber: row.hearth_number,
    toaster: row.toaster_id === null ? null : { id: row.toaster_id, name: row.toaster_name ?? '' },
    isTrial: row.is_trial,
    isImported: row.is_imported,
    isFirstOfDay: row.is_first_of_day,
    queuedAt: new Date(row.queued_at).toISOString(),
    preheatAt: isoOrNull(row.preheat_at),
    bendAt: isoOrNull(row.bend_at),
    toastAt: isoOrNull(row.toast_at),
    restAt: isoOrNull(row.rest_at),
    endedAt: isoOrNull(row.ended_at),
    endReason: row.end_reason,
    score:
      row.verdict === null
        ? null
        : {
            verdict: row.verdict,
            points: row.points,
            doseMinutes: row.dose_minutes,
            doseLowMinutes: row.dose_low_minutes,
            doseHighMinutes: row.dose_high_minutes,
            planDoseMinutes: row.plan_dose_minutes,
            toastDepthMm: row.toast_depth_mm,
            sketch: row.sketch,
          },
  }
}

export type FiringDetailRow = FiringRow & {
  recipe_copy: unknown
  recipe_sha256: string | null
  site_settings_version: number | null
  moisture_percent: number | null
  moisture_method: 'oven-dry' | 'meter' | null
  colour: string | null
  smell: string | null
  outside_temp_c: number | null
  remarks: string
}

export type FiringProbeRow = {
  probe_id: string
  no: number
  name: string
  role: 'lead' | 'opposite' | 'coals'
  thermocouple_type: 'K' | 'N' | 'J' | 'T'
  iec_class: number
  height: string
  side: string
  depth_mm: number
  mounting: string
  from_at: Date
  until_at: Date | null
}

export function toFiring(
  row: FiringDetailRow,
  probes: readonly FiringProbeRow[],
  marks: MarkDto[],
): FiringDto {
  return {
    ...toFiringSummary(row),
    revision: row.revision,
    recipeCopy: row.recipe_copy === null ? null : recipeCopySchema.parse(row.recipe_copy),
    recipeSha256: row.recipe_sha256,
    siteSettingsVersion: row.site_settings_version,
    moisturePercent: row.moisture_percent,
    moistureMethod: row.moisture_method,
    colour: row.colour,
    smell: row.smell,
    outsideTempC: row.outside_temp_c,
    remarks: row.remarks,
    probes: probes.map((probe) => ({
      probeId: probe.probe_id,
      name: probe.name,
      role: probe.role,
      thermocoupleType: probe.thermocouple_type,
      iecClass: probe.iec_class,
      height: probe.height,
      side: probe.side,
      depthMm: probe.depth_mm,
      mounting: probe.mounting,
      fromAt: new Date(probe.from_at).toISOString(),
      untilAt: isoOrNull(probe.until_at),
    })),
    marks,
  }
}
