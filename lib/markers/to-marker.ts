import { fitCurve } from '@/lib/markers/fit-picture'
import type { MarkerDto, MarkerResponseDto } from '@/lib/markers/schema'
import { fitResultSchema, markerFitSchema, markerResponseSchema, markerSchema } from '@/lib/markers/schema'
import * as z from 'zod'

export type MarkerRow = { id: string; key: string; name: string; unit: string }

export type ResponseRow = {
  id: string
  marker_id: string
  number: number
  kind: 'formula' | 'fit'
  unit: string
  formula: string | null
  family: string | null
  fit: unknown
  results: unknown
  matrix: string | null
  extraction: string | null
  sample_position: string | null
  sample_from_mm: number | null
  sample_to_mm: number | null
  lead_height: string | null
  lead_side: string | null
  lead_depth_mm: number | null
  lead_mounting: string | null
  site_settings_version: number
  note: string
  author: string
  created_at: Date
}

/** One row a response with its author's name. */
export const responseSelect = `
  select r.*, a.name as author from marker_responses r join accounts a on a.id = r.author_id`

const base = markerResponseSchema.options[0].omit({ kind: true, formula: true })

/** The parsed boundary: what a fit was stored as is read back by its schema. */
export function toResponse(row: ResponseRow): MarkerResponseDto {
  const shared = base.parse({
    id: row.id,
    number: row.number,
    unit: row.unit,
    note: row.note,
    author: row.author,
    createdAt: new Date(row.created_at).toISOString(),
  })
  if (row.kind === 'formula') return { ...shared, kind: 'formula', formula: row.formula ?? '' }
  const fit = markerFitSchema.parse(row.fit)
  return {
    ...shared,
    kind: 'fit',
    picture: { fit, results: z.array(fitResultSchema).parse(row.results), curve: fitCurve(fit) },
    matrix: row.matrix ?? '',
    extraction: row.extraction ?? '',
    samplePosition: row.sample_position ?? '',
    sampleFromMm: row.sample_from_mm ?? 0,
    sampleToMm: row.sample_to_mm ?? 0,
    place: markerResponseSchema.options[1].shape.place.parse({
      height: row.lead_height,
      side: row.lead_side,
      depthMm: row.lead_depth_mm,
      mounting: row.lead_mounting,
    }),
    siteSettingsVersion: row.site_settings_version,
  }
}

export function toMarker(row: MarkerRow, response: MarkerResponseDto | null): MarkerDto {
  return {
    id: row.id,
    key: row.key,
    name: row.name,
    unit: markerSchema.shape.unit.parse(row.unit),
    response,
  }
}
