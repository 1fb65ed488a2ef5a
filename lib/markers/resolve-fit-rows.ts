import type { EntityManager } from '@mikro-orm/postgresql'
import { queryRows } from '@/lib/db/orm'
import { scoreResultOf } from '@/lib/firings/read-score'
import { formatNumber } from '@/lib/format'
import { isSameRules } from '@/lib/markers/same-rules'
import type { TypedRow } from '@/lib/markers/read-fit-rows'
import { plainSerial } from '@/lib/markers/read-fit-rows'
import type { FitResult, PreviewRow } from '@/lib/markers/schema'
import type { LeadPlace } from '@/lib/recipes/schema'
import type { FamilyId, PredictorKey } from '@/lib/science/marker-families'
import { markerFamilies, predictors } from '@/lib/science/marker-families'
import type { SiteRules } from '@/lib/science/site-rules'
import { siteOfVersion } from '@/lib/site/current-site'

type ToastRow = {
  serial: string
  firing_id: string | null
  verdict: string | null
  result: unknown
  site_settings_version: number | null
  height: string | null
  side: string | null
  depth_mm: number | null
  mounting: string | null
}

type Toast = Pick<FitResult, 'doseMin' | 'slowIndexMin' | 'fastIndexMin' | 'toastDepthMm'>

/** What a fit is about, so that a row can be asked whether it belongs. */
export type FitTerms = { family: FamilyId; place: LeadPlace; rules: SiteRules }

/** Pasted rows with what is known of each barrel's toast, or why a row cannot be used. */
export async function resolveFitRows(
  em: EntityManager,
  rows: readonly TypedRow[],
  terms: FitTerms,
): Promise<PreviewRow[]> {
  const toasts = await readToasts(
    em,
    rows.flatMap((row) => (row.error === null && 'serial' in row.source ? [row.source.serial] : [])),
  )
  const scoredBy = await readRules(em, toasts)
  return rows.map((row) => resolveRow(row, toasts, scoredBy, terms))
}

/** The rules that these firings were scored by, by the version of the settings. */
async function readRules(
  em: EntityManager,
  toasts: ReadonlyMap<string, ToastRow[]>,
): Promise<Map<number, SiteRules>> {
  const rules = new Map<number, SiteRules>()
  for (const { site_settings_version: version } of [...toasts.values()].flat()) {
    if (version === null || rules.has(version)) continue
    rules.set(version, (await siteOfVersion(em, version)).rules)
  }
  return rules
}

/** Finished firings of these pieces with their newest score and the place of the lead probe, by plain serial. */
async function readToasts(em: EntityManager, serials: readonly string[]): Promise<Map<string, ToastRow[]>> {
  const bySerial = new Map<string, ToastRow[]>()
  if (serials.length === 0) return bySerial
  const rows = await queryRows<ToastRow>(
    em,
    `select p.serial, f.id as firing_id, s.verdict, s.result, s.site_settings_version, l.height, l.side, l.depth_mm, l.mounting
       from pieces p
       left join firings f on f.piece_id = p.id and f.state = 'finished'
       left join lateral (select * from scores where firing_id = f.id order by number desc limit 1) s on true
       left join lateral (select * from firing_probes where firing_id = f.id and role = 'lead'
                           order by from_at limit 1) l on true
      where replace(p.serial, '-', '') in (?)
      order by p.serial, f.toast_at`,
    [serials],
  )
  for (const row of rows) {
    const key = plainSerial(row.serial)
    bySerial.set(key, [...(bySerial.get(key) ?? []), row])
  }
  return bySerial
}

function resolveRow(
  row: TypedRow,
  toasts: ReadonlyMap<string, ToastRow[]>,
  scoredBy: ReadonlyMap<number, SiteRules>,
  terms: FitTerms,
): PreviewRow {
  const { line, typedSource, typedValue } = row
  const typed = { line, typedSource, typedValue }
  const wrong = (error: string): PreviewRow => ({ ...typed, result: null, error })
  if (row.error !== null) return wrong(row.error)
  const found =
    'serial' in row.source
      ? toastOfBarrel(row.source.serial, toasts, scoredBy, terms)
      : { serial: null, firingId: null, toast: typedDose(row.source.doseMin) }
  if ('error' in found) return wrong(found.error)
  const family = markerFamilies[terms.family]
  const missing = family.predictors.find((key) => found.toast[key] === null)
  if (missing !== undefined) return wrong(missingSentence(missing, found.serial))
  const fault = family.faultOf(family.predictors.map((key) => found.toast[key] ?? 0))
  if (fault !== null) return wrong(fault)
  const { serial, firingId, toast } = found
  return { ...typed, error: null, result: { ...typed, serial, firingId, ...toast, ...row.value } }
}

function typedDose(doseMin: number): Toast {
  return { doseMin, slowIndexMin: null, fastIndexMin: null, toastDepthMm: null }
}

function missingSentence(key: PredictorKey, serial: string | null): string {
  const { name } = predictors[key]
  return serial === null
    ? `A typed dose has no ${name}: give the barrel’s serial, or take a response to the dose.`
    : `The score of ${serial} has no ${name}.`
}

type Found = { serial: string; firingId: string; toast: Toast }

function toastOfBarrel(
  key: string,
  toasts: ReadonlyMap<string, ToastRow[]>,
  scoredBy: ReadonlyMap<number, SiteRules>,
  terms: FitTerms,
): Found | { error: string } {
  const [row, another] = toasts.get(key) ?? []
  if (row === undefined) return { error: `There is no barrel or head ${key}.` }
  const { serial, firing_id: firingId } = row
  if (firingId === null) return { error: `${serial} has no finished firing yet.` }
  if (another !== undefined) {
    return { error: `${serial} was fired more than once, and a sum of doses is another toast. Leave it out.` }
  }
  if (row.verdict === null) return { error: `${serial} is not scored yet: its gateway still owes readings.` }
  if (row.verdict === 'incomplete') {
    return { error: `The firing of ${serial} is incomplete, so its dose is not known. Leave it out.` }
  }
  const placeError = errorOfPlace(row, terms.place)
  if (placeError !== null) return { error: placeError }
  const rules = scoredBy.get(row.site_settings_version ?? 0)
  if (rules === undefined || !isSameRules(terms.family, rules, terms.rules)) {
    return {
      error: `${serial} was scored by other site rules than those in force: its figures do not compare.`,
    }
  }
  const score = scoreResultOf(row.result)
  return {
    serial,
    firingId,
    toast: {
      doseMin: score.dose?.doseMin ?? null,
      slowIndexMin: score.slowIndexMin,
      fastIndexMin: score.fastIndexMin,
      toastDepthMm: score.toastDepthMm?.value ?? null,
    },
  }
}

/** A dose speaks for its place only (PRODUCT, recipe bench). */
function errorOfPlace(row: ToastRow, place: LeadPlace): string | null {
  const isSame =
    row.height === place.height &&
    row.side === place.side &&
    row.depth_mm === place.depthMm &&
    row.mounting === place.mounting
  if (isSame) return null
  return `${row.serial} was read at ${row.height ?? 'no place'}, ${row.side ?? ''}, ${formatNumber(row.depth_mm ?? 0, 1)} mm, ${row.mounting ?? ''}: not the place of this fit.`
}
