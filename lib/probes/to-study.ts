import type { PlacementDto, StudyDto, StudyResultDto } from '@/lib/probes/study-schema'
import { studyResultSchema } from '@/lib/probes/study-schema'
import type { DoseModel } from '@/lib/science/heat-dose'
import { leastPlacements, repeatabilityOf } from '@/lib/science/repeatability'

type PlacementRow = {
  id: string
  position: number
  placed_temp_c: number
  reference_temp_c: number
  way: PlacementDto['way']
  placed_at: string
  placed_by: string
  struck_at: string | null
  struck_by: string | null
  strike_reason: string | null
}

export type StudyRow = {
  id: string
  no: number
  probe_id: string
  probe_name: string
  is_probe_retired: boolean
  reference_probe_id: string
  reference_name: string
  is_reference_retired: boolean
  height: string
  side: string
  depth_mm: number
  mounting: string
  heat_words: string
  state: StudyDto['state']
  started_at: Date
  started_by: string
  ended_at: Date | null
  end_reason: string | null
  signed_by: string | null
  result: unknown
  adopted_at: Date | null
  adopted_by: string | null
  adopted_version: number | null
  placements: PlacementRow[] | null
}

export const studySelect = `
  select s.id, s.no, s.probe_id, p.name as probe_name, p.retired_at is not null as is_probe_retired,
         s.reference_probe_id, r.name as reference_name, r.retired_at is not null as is_reference_retired, s.height,
         s.side, s.depth_mm, s.mounting, s.heat_words, s.state, s.started_at, a.name as started_by, s.ended_at,
         s.end_reason, g.account_name as signed_by, s.result, s.adopted_at, b.name as adopted_by, s.adopted_version,
         (select json_agg(json_build_object('id', l.id, 'position', l.position, 'placed_temp_c', l.placed_temp_c,
              'reference_temp_c', l.reference_temp_c, 'way', l.way, 'placed_at', l.placed_at, 'placed_by', y.name,
              'struck_at', l.struck_at, 'struck_by', k.name, 'strike_reason', l.strike_reason) order by l.position)
            from repeatability_placements l join accounts y on y.id = l.account_id
            left join accounts k on k.id = l.struck_by where l.study_id = s.id) as placements
    from repeatability_studies s
    join probes p on p.id = s.probe_id
    join probes r on r.id = s.reference_probe_id
    join accounts a on a.id = s.started_by
    left join accounts b on b.id = s.adopted_by
    left join signatures g on g.id = s.signature_id`

/** @param dose rules in force, for what an open study says so far */
export function toStudy(row: StudyRow, dose: DoseModel): StudyDto {
  const placements = (row.placements ?? []).map(toPlacement)
  return {
    id: row.id,
    number: row.no,
    probe: { id: row.probe_id, name: row.probe_name, isRetired: row.is_probe_retired },
    reference: {
      id: row.reference_probe_id,
      name: row.reference_name,
      isRetired: row.is_reference_retired,
    },
    place: { height: row.height, side: row.side, depthMm: row.depth_mm, mounting: row.mounting },
    heatWords: row.heat_words,
    state: row.state,
    startedAt: new Date(row.started_at).toISOString(),
    startedBy: row.started_by,
    endedAt: row.ended_at === null ? null : new Date(row.ended_at).toISOString(),
    endReason: row.end_reason,
    signedBy: row.signed_by,
    placements,
    result: row.state === 'finished' ? studyResultSchema.parse(row.result) : resultOf(placements, dose),
    adopted:
      row.adopted_at === null || row.adopted_by === null || row.adopted_version === null
        ? null
        : { at: new Date(row.adopted_at).toISOString(), by: row.adopted_by, version: row.adopted_version },
  }
}

/** What the placements that count say; null below five, or while all are alike. */
function resultOf(placements: readonly PlacementDto[], dose: DoseModel): StudyResultDto | null {
  const differencesC = placements.filter((one) => one.struck === null).map((one) => one.differenceC)
  if (differencesC.length < leastPlacements || new Set(differencesC).size === 1) return null
  return { ...repeatabilityOf(differencesC, dose), zC: dose.zC }
}

function toPlacement(row: PlacementRow): PlacementDto {
  return {
    id: row.id,
    position: row.position,
    placedTempC: row.placed_temp_c,
    referenceTempC: row.reference_temp_c,
    // To 0.001 °C: what is stored is no finer, and two equal differences compare as equal.
    differenceC: Math.round((row.placed_temp_c - row.reference_temp_c) * 1000) / 1000,
    way: row.way,
    placedAt: new Date(row.placed_at).toISOString(),
    placedBy: row.placed_by,
    struck:
      row.struck_at === null
        ? null
        : {
            at: new Date(row.struck_at).toISOString(),
            by: row.struck_by ?? '',
            reason: row.strike_reason ?? '',
          },
  }
}
