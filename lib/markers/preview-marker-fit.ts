import type { EntityManager } from '@mikro-orm/postgresql'
import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm } from '@/lib/db/orm'
import { invalidField } from '@/lib/errors'
import { fitResults, toFitPicture } from '@/lib/markers/fit-picture'
import { readFitRows } from '@/lib/markers/read-fit-rows'
import { readMarker } from '@/lib/markers/read-markers'
import { resolveFitRows } from '@/lib/markers/resolve-fit-rows'
import type { FitInput, FitPreview } from '@/lib/markers/schema'
import { mostResults } from '@/lib/markers/schema'
import { currentSite } from '@/lib/site/current-site'

/** Pasted results looked up and fitted, with an error for each row that cannot be used. Stores nothing. */
export async function previewMarkerFit(actor: Actor, input: FitInput & { id: string }): Promise<FitPreview> {
  requirePermission(actor, 'markers:write')
  const em = await forkEm()
  await readMarker(em, input.id)
  return previewFit(em, input)
}

/** The same for verbs that have authorised already. No row is left out silently: with one error there is no fit. */
export async function previewFit(em: EntityManager, input: FitInput): Promise<FitPreview> {
  const { rows: typed, tooMany } = readFitRows(input.rows)
  if (typed.length === 0) {
    throw invalidField('rows', 'Paste at least one row: barrel serial or dose in minutes, then the result.')
  }
  if (tooMany) throw invalidField('rows', `At most ${mostResults} results in one fit.`)
  const { rules } = await currentSite(em)
  const rows = await resolveFitRows(em, typed, { family: input.family, place: input.place, rules })
  const results = rows.flatMap((row) => (row.result === null ? [] : [row.result]))
  if (results.length < rows.length) return { rows, outcome: null }
  const outcome = fitResults(input.family, results)
  return { rows, outcome: outcome.ok ? { ok: true, picture: toFitPicture(outcome.fit, results) } : outcome }
}
