import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { forkEm } from '@/lib/db/orm'
import { formatNumber } from '@/lib/format'
import { isSameRules } from '@/lib/markers/same-rules'
import { readMarkers } from '@/lib/markers/read-markers'
import { restsOn } from '@/lib/markers/response-words'
import type { MarkerDto, MarkerPredictionDto, MarkerResponseDto, VersionMarkers } from '@/lib/markers/schema'
import type { ToastFacts } from '@/lib/markers/toast-facts'
import { toastFactsOf } from '@/lib/markers/toast-facts'
import { getVersion } from '@/lib/recipes/get-version'
import type { LeadPlace } from '@/lib/recipes/schema'
import type { CompiledFormula } from '@/lib/science/formula'
import { compileFormula } from '@/lib/science/formula'
import { inBaseUnit, lotAssaySymbol } from '@/lib/science/formula-symbols'
import { markerFamilies } from '@/lib/science/marker-families'
import { predictMarker } from '@/lib/science/marker-fit'
import type { SiteRules } from '@/lib/science/site-rules'
import { currentSite, siteOfVersion } from '@/lib/site/current-site'

type Answered = MarkerDto & { response: MarkerResponseDto }
type Outcome = Pick<MarkerPredictionDto, 'value' | 'interval' | 'refusal'>

/** What a prediction is made from. */
type Toast = { facts: ToastFacts; place: LeadPlace; rules: SiteRules; lotAssays: ReadonlyMap<string, number> }

/**
 * Every marker that has a response, for a recipe version's plan: a fit with its interval and what it rests on, a
 * formula without one, and a refusal in words wherever nothing honest can be said.
 *
 * @param input `lot`: assays of a lot before the fire, "vanillin:2.1,eugenol:0.4", each in its marker's unit
 */
export async function predictMarkers(
  actor: Actor,
  input: { id: string; lot?: string },
): Promise<VersionMarkers> {
  requirePermission(actor, 'markers:read')
  const version = await getVersion(actor, { id: input.id })
  const em = await forkEm()
  const [markers, site] = await Promise.all([readMarkers(em), currentSite(em)])
  const lotSymbols = markers.map(lotAssaySymbol)
  const answered = markers.filter((marker): marker is Answered => marker.response !== null)
  const formulas = new Map<string, CompiledFormula>()
  for (const { id, response } of answered) {
    if (response.kind !== 'formula') continue
    const compiled = compileFormula(response.formula, { unit: response.unit, lotSymbols })
    if (compiled.ok) formulas.set(id, compiled)
  }
  const rulesOfFits = new Map<number, SiteRules>()
  for (const { response } of answered) {
    if (response.kind !== 'fit' || rulesOfFits.has(response.siteSettingsVersion)) continue
    rulesOfFits.set(
      response.siteSettingsVersion,
      (await siteOfVersion(em, response.siteSettingsVersion)).rules,
    )
  }
  const used = new Set([...formulas.values()].flatMap((formula) => formula.symbols))
  const needsDepth =
    used.has('toast_depth') ||
    answered.some(
      ({ response }) =>
        response.kind === 'fit' &&
        markerFamilies[response.picture.fit.family].predictors.includes('toastDepthMm'),
    )
  const toast: Toast = {
    facts: toastFactsOf(version.content, site.rules, needsDepth),
    place: version.content.leadPlace,
    rules: site.rules,
    lotAssays: lotAssaysOf(input.lot ?? '', markers),
  }
  return {
    predictions: answered.map((marker) => ({
      marker: { id: marker.id, key: marker.key, name: marker.name },
      unit: marker.response.unit,
      kind: marker.response.kind,
      number: marker.response.number,
      restsOn: restsOn(marker.response),
      ...predict(marker, formulas.get(marker.id), rulesOfFits, toast),
    })),
    without: markers.filter((marker) => marker.response === null).map((marker) => marker.name),
    lotAssays: markers
      .filter((marker) => used.has(`lot_${marker.key}`))
      .map(({ key, name, unit }) => ({ key, name, unit })),
  }
}

function lotAssaysOf(typed: string, markers: readonly MarkerDto[]): Map<string, number> {
  const assays = new Map<string, number>()
  for (const part of typed.split(',')) {
    const [key, value] = part.split(':')
    const marker = markers.find((one) => one.key === key)
    if (marker !== undefined && value !== undefined) {
      assays.set(`lot_${marker.key}`, inBaseUnit(Number(value), marker.unit))
    }
  }
  return assays
}

const refused = (refusal: string): Outcome => ({ value: null, interval: null, refusal })

function predict(
  { response }: Answered,
  formula: CompiledFormula | undefined,
  rulesOfFits: ReadonlyMap<number, SiteRules>,
  toast: Toast,
): Outcome {
  const outcome =
    response.kind === 'formula'
      ? predictByFormula(formula, toast)
      : predictByFit(response, rulesOfFits.get(response.siteSettingsVersion), toast)
  if (outcome.value === null || outcome.value >= 0) return outcome
  return refused('It would be below nothing here, so the response does not hold for this toast.')
}

function predictByFormula(formula: CompiledFormula | undefined, toast: Toast): Outcome {
  if (formula === undefined) return refused('The formula names a quantity that is not on the list any more.')
  const value = formula.evaluate(toast.facts.formula(toast.lotAssays))
  return value.isKnown ? { value: value.value, interval: null, refusal: null } : refused(value.reason)
}

function predictByFit(
  response: Extract<MarkerResponseDto, { kind: 'fit' }>,
  rules: SiteRules | undefined,
  toast: Toast,
): Outcome {
  const { fit } = response.picture
  if (!isSamePlace(response.place, toast.place)) {
    return refused(
      `The fit rests on doses read at ${placeWords(response.place)}; this recipe reads at ${placeWords(toast.place)}. They do not compare.`,
    )
  }
  if (rules === undefined || !isSameRules(fit.family, rules, toast.rules)) {
    return refused('The fit was made under other site rules than those in force. Fit it again.')
  }
  const x: number[] = []
  for (const key of markerFamilies[fit.family].predictors) {
    const value = toast.facts.predictors[key]
    if (value === null) return refused('The plan has none of what the fit rests on.')
    x.push(value)
  }
  const predicted = predictMarker(fit, x)
  if (!predicted.ok) return refused(predicted.refusal)
  const { value, low, high } = predicted
  return { value, interval: { low: Math.max(0, low), high }, refusal: null }
}

function isSamePlace(one: LeadPlace, other: LeadPlace): boolean {
  return (
    one.height === other.height &&
    one.side === other.side &&
    one.depthMm === other.depthMm &&
    one.mounting === other.mounting
  )
}

function placeWords(place: LeadPlace): string {
  return `${place.height} ${place.side}, ${formatNumber(place.depthMm, place.depthMm % 1 === 0 ? 0 : 1)} mm, ${place.mounting}`
}
