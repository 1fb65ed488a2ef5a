import { percentAboveFromLog10, percentBelowFromLog10 } from './dose-ratio'
import type { BrokenLimit, Score, ScoreTerm, Verdict } from './score-types'
import { fahrenheitDifferenceFromC, fahrenheitFromC } from './temperature'

/** The unit in which a sentence says temperatures. Differences are converted as differences. */
export type ShownUnit = 'C' | 'F'

/** What the words need beside a term's own figures. */
export type SentenceContext = { doseMin: number | null; targetDoseMin: number; refTempC: number }

function showTemp(tempC: number, unit: ShownUnit): string {
  return unit === 'C' ? `${tempC.toFixed(0)} °C` : `${fahrenheitFromC(tempC).toFixed(0)} °F`
}

function showDifference(differenceC: number, unit: ShownUnit): string {
  return unit === 'C'
    ? `${differenceC.toFixed(1)} °C`
    : `${fahrenheitDifferenceFromC(differenceC).toFixed(1)} °F`
}

/** A dose to three figures, without an exponent. */
export function showDose(doseMin: number): string {
  if (doseMin >= 100) return doseMin.toFixed(0)
  if (doseMin >= 10) return doseMin.toFixed(1)
  return doseMin >= 1 ? doseMin.toFixed(2) : doseMin.toFixed(3)
}

/** Minutes and seconds, "8:10". */
export function showMinutes(minutes: number): string {
  const wholeS = Math.round(minutes * 60)
  return `${Math.floor(wholeS / 60)}:${String(wholeS % 60).padStart(2, '0')}`
}

/** log10 of a ratio as a percentage of the target, "12 % above". */
function showRatio(log10Ratio: number): string {
  const percent = percentAboveFromLog10(Math.abs(log10Ratio))
  const downPercent = percentBelowFromLog10(Math.abs(log10Ratio))
  if (percent < 0.5) return 'on'
  return log10Ratio > 0 ? `${percent.toFixed(0)} % above` : `${downPercent.toFixed(0)} % below`
}

function showPoints(term: ScoreTerm): string {
  if (term.pointsLost === null) return 'Not scored.'
  if (term.pointsLost === 0) return 'No points lost.'
  return `${term.pointsLost.toFixed(1)} of ${term.pointsOf} points lost.`
}

/**
 * One sentence that says a term's measure, what was allowed, and the points lost, in words and figures of the term
 * alone. A term that is not measured says why in `detail`.
 */
export function describeTerm(term: ScoreTerm, context: SentenceContext, unit: ShownUnit = 'C'): string {
  if (term.isMeasured && term.measured === null) {
    return `No dose counted: the target is ${showDose(context.targetDoseMin)} min at ${showTemp(context.refTempC, unit)}. ${showPoints(term)}`
  }
  if (!term.isMeasured || term.measured === null) {
    const reason = term.detail ?? 'nothing to measure it by'
    return `${term.name} is left out: ${reason}. The other terms are scaled to 100.`
  }
  return `${termFact(term, term.measured, context, unit)} ${showPoints(term)}`
}

function termFact(term: ScoreTerm, measured: number, context: SentenceContext, unit: ShownUnit): string {
  const allowed = term.allowed ?? 0
  switch (term.key) {
    case 'dose':
      return doseFact(measured, allowed, context, unit)
    case 'inBand':
      return `In the band for ${measured.toFixed(0)} % of the time above ${showTemp(120, unit)}; ${allowed} % or more loses nothing.`
    case 'shape':
      return `The curve lay ${measured.toFixed(2)} bands from the plan on average; up to ${allowed} loses nothing.`
    case 'stageLengths':
      return stageFact(term.detail ?? 'A stage', measured, allowed)
    case 'spread':
      return `The two opposite probes differed by ${showDifference(measured, unit)} on average; the recipe allows ${showDifference(allowed, unit)}.`
    case 'preheatAndBend':
      return preheatFact(term, measured, allowed)
  }
}

function doseFact(measured: number, allowed: number, context: SentenceContext, unit: ShownUnit): string {
  const at = `min at ${showTemp(context.refTempC, unit)}`
  const target = `the target of ${showDose(context.targetDoseMin)}`
  const figure = context.doseMin === null ? 'No dose' : `Dose ${showDose(context.doseMin)} ${at}`
  const upPercent = percentAboveFromLog10(allowed).toFixed(0)
  const downPercent = percentBelowFromLog10(allowed).toFixed(0)
  return `${figure} is ${showRatio(measured)} ${target}; from ${downPercent} % below to ${upPercent} % above is allowed.`
}

function stageFact(stage: string, measured: number, allowed: number): string {
  if (Math.abs(measured) < 0.5) return 'Every stage had its planned length.'
  const way = measured > 0 ? 'long' : 'short'
  return `${stage} was ${Math.abs(measured).toFixed(0)} % ${way}, the furthest off of the stages; up to ${allowed} % loses nothing.`
}

function preheatFact(term: ScoreTerm, measured: number, allowed: number): string {
  if (term.unit === 'percentMoisture') {
    const side = measured < allowed ? 'least' : 'most'
    if (term.pointsLost === 0) return `Stave moisture ${measured.toFixed(1)} % is in the recipe's range.`
    return `Stave moisture was ${measured.toFixed(1)} %; the recipe asks for at ${side} ${allowed.toFixed(1)} %.`
  }
  const what = term.detail === 'bend' ? 'The bend' : 'The preheat'
  return `${what} took ${showMinutes(measured)} min; the recipe asks for at least ${showMinutes(allowed)}.`
}

/** What was exceeded, by how much and for how long. */
export function describeBrokenLimit(limit: Omit<BrokenLimit, 'sentence'>, unit: ShownUnit = 'C'): string {
  const at = `${showMinutes(limit.atS / 60)} after toast start`
  if (limit.limit === 'wood maximum') {
    return `The wood at the lead probe stood above its maximum of ${showTemp(limit.allowed, unit)} for ${limit.heldS.toFixed(0)} s from ${at}, up to ${showTemp(limit.measured, unit)}.`
  }
  return `The wood climbed ${showDifference(limit.measured, unit)} in a minute, above its maximum of ${showDifference(limit.allowed, unit)}, first ${at}.`
}

const verdictSentences: Record<Verdict, string> = {
  incomplete: 'Incomplete: the record does not allow a score.',
  'limit broken': 'Limit broken: a limit of the recipe was exceeded, whatever the points say.',
  'out of tolerance':
    'Out of tolerance: the dose lies outside what the recipe allows, its interval included.',
  'cannot tell': 'Cannot tell: the interval of the dose reaches across the edge of the tolerance.',
  'in tolerance': 'In tolerance: the dose lies within what the recipe allows, its interval included.',
}

/** Why this score: the verdict, what broke or is missing, then every term. */
export function describeScore(
  score: Omit<Score, 'sentences'>,
  refTempC: number,
  unit: ShownUnit = 'C',
): string[] {
  const context = { doseMin: score.dose?.doseMin ?? null, targetDoseMin: score.targetDoseMin, refTempC }
  const sentences = [verdictSentences[score.verdict], ...score.incompleteReasons]
  for (const limit of score.limitsBroken) sentences.push(describeBrokenLimit(limit, unit))
  if (score.verdict !== 'incomplete') {
    for (const term of score.terms) sentences.push(describeTerm(term, context, unit))
  }
  const widened = score.gaps.filter((gap) => gap.treatment === 'widened')
  if (widened.length > 0) {
    const missingMin = widened.reduce((sum, gap) => sum + gap.missingS, 0) / 60
    sentences.push(`The interval is wider for ${showMinutes(missingMin)} min without a reading.`)
  }
  if (score.dose?.isAssumed === true) {
    sentences.push('The same-mount interval is assumed: the site has not measured its own yet.')
  }
  return sentences
}
