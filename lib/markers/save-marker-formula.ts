import type * as z from 'zod'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission, requirePerson } from '@/lib/auth/permissions'
import { inTransaction } from '@/lib/db/orm'
import { invalidField } from '@/lib/errors'
import { readLotSymbols, readMarker } from '@/lib/markers/read-markers'
import type { MarkerDetail, saveFormulaSchema } from '@/lib/markers/schema'
import { lockMarker, writeResponse } from '@/lib/markers/write-response'
import { compileFormula } from '@/lib/science/formula'
import { currentSite } from '@/lib/site/current-site'

/**
 * Puts a formula in force as the marker's response, as its plain form. One that is in force already makes no new
 * response.
 * @throws AppError 'invalid' with the fault and its place, 'stale' when another response was written meanwhile
 */
export async function saveMarkerFormula(
  actor: Actor,
  input: z.infer<typeof saveFormulaSchema> & { id: string },
): Promise<MarkerDetail> {
  requirePermission(actor, 'markers:write')
  const person = requirePerson(actor)
  return inTransaction(async (em) => {
    const marker = await lockMarker(em, input.id, input.seenNumber)
    const compiled = compileFormula(input.formula, { unit: input.unit, lotSymbols: await readLotSymbols(em) })
    if (!compiled.ok) {
      const { message, index } = compiled.fault
      throw invalidField('formula', `At letter ${index + 1}: ${message}`)
    }
    const inForce = marker.response
    const isSame =
      inForce?.kind === 'formula' && inForce.formula === compiled.text && inForce.unit === compiled.unit
    if (isSame && inForce.note === input.note) return marker
    const number = await writeResponse(em, person, marker, {
      kind: 'formula',
      unit: compiled.unit,
      formula: compiled.text,
      family: null,
      fit: null,
      results: null,
      matrix: null,
      extraction: null,
      samplePosition: null,
      sampleFromMm: null,
      sampleToMm: null,
      leadHeight: null,
      leadSide: null,
      leadDepthMm: null,
      leadMounting: null,
      siteSettingsVersion: (await currentSite(em)).version,
      note: input.note,
    })
    await writeAuditEntry(
      em,
      actor,
      'marker formula written',
      { type: 'marker', id: marker.id },
      { marker: marker.name, number, formula: compiled.text, unit: compiled.unit },
    )
    return readMarker(em, marker.id)
  })
}
