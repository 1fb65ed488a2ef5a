import type * as z from 'zod'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { previewFit } from '@/lib/markers/preview-marker-fit'
import { readMarker } from '@/lib/markers/read-markers'
import type { FitPicture, FitPreview, fitMarkerSchema, MarkerDetail } from '@/lib/markers/schema'
import { lockMarker, writeResponse } from '@/lib/markers/write-response'
import { currentSite } from '@/lib/site/current-site'

/**
 * Fits the marker's response to results and puts it in force, with the results as they were used.
 * @throws AppError 'invalid' when a row cannot be used or the results do not support the fit, 'stale' when another
 *   response was written meanwhile
 */
export async function fitMarkerResponse(
  actor: Actor,
  input: z.infer<typeof fitMarkerSchema> & { id: string },
): Promise<MarkerDetail> {
  requirePermission(actor, 'markers:write')
  const person = requirePerson(actor)
  return inTransaction(async (em) => {
    const marker = await lockMarker(em, input.id, input.seenNumber)
    const { fit, results } = requireFit(await previewFit(em, input))
    const number = await writeResponse(em, person, marker, {
      kind: 'fit',
      unit: input.unit,
      formula: null,
      family: fit.family,
      fit,
      results,
      matrix: input.matrix,
      extraction: input.extraction,
      samplePosition: input.samplePosition,
      sampleFromMm: input.sampleFromMm,
      sampleToMm: input.sampleToMm,
      leadHeight: input.place.height,
      leadSide: input.place.side,
      leadDepthMm: input.place.depthMm,
      leadMounting: input.place.mounting,
      siteSettingsVersion: (await currentSite(em)).version,
      note: input.note,
    })
    await writeAuditEntry(
      em,
      actor,
      'marker fitted',
      { type: 'marker', id: marker.id },
      {
        marker: marker.name,
        number,
        family: fit.family,
        results: fit.count,
        belowLimit: fit.belowLimitCount,
      },
    )
    return readMarker(em, marker.id)
  })
}

function requireFit({ rows, outcome }: FitPreview): FitPicture {
  const wrong = rows.filter((row) => row.error !== null)
  if (outcome === null) {
    const fields = Object.fromEntries(wrong.map((row) => [`rows.${row.line}`, row.error ?? '']))
    const count = wrong.length === 1 ? 'One row' : `${wrong.length} rows`
    throw new AppError('invalid', `${count} cannot be used. Mend or take out each, then fit again.`, {
      fields,
    })
  }
  if (!outcome.ok) throw new AppError('invalid', outcome.refusal, { fields: { rows: outcome.refusal } })
  return outcome.picture
}
