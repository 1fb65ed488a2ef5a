import { requireFinite, requirePositive } from './domain'
import type { DoseResult } from './dose-interval'
import { doseInterval, probeErrorC, readDoseMin } from './dose-interval'
import { toleranceBoundsMin } from './dose-ratio'
import type { FilledSeries } from './gaps'
import { fillGaps, gapExtremes } from './gaps'
import type { CurvePoint } from './heat-dose'
import { arrheniusEquivalentMinutes, createArrheniusSegment, equivalentMinutes } from './heat-dose'
import { planCurve } from './plan'
import { findClimbAbove, findHeldAbove } from './score-limits'
import { ruleset1 } from './score-ruleset'
import { describeBrokenLimit, describeScore, describeTerm } from './score-sentences'
import type { PlanLeg } from './score-stages'
import { alignedPlanAt, alignPlan, matchStages, planLegs } from './score-stages'
import type { MeasuredTerm } from './score-terms'
import {
  measureBand,
  measureDose,
  measureInBand,
  measurePreheatAndBend,
  measureShape,
  measureSpread,
  measureStageLengths,
} from './score-terms'
import type {
  BrokenLimit,
  MatchedStage,
  ProbePlace,
  Score,
  ScoreInput,
  ScoreTerm,
  Verdict,
} from './score-types'
import type { DepthRangeMm } from './stave'
import { staveHistory, toastDepthMm } from './stave'

export { ruleset1 } from './score-ruleset'
export type { Score, ScoreInput, ScoreTerm, Verdict } from './score-types'

/** Grid and step of the stave for one figure: within 0.05 mm of the drawn picture's at a tenth of its cost. */
const SCORE_STAVE_CELL_MM = 0.4
const SCORE_STAVE_STEP_S = 10

/**
 * Scores a finished firing by ruleset 1 (SCIENCE §5): verdict, points, and each term with what was measured, what is
 * allowed, what was lost and why in words.
 *
 * The same input gives the same score bit for bit, and the score is plain JSON. Stored beside it: the ruleset's
 * number, the site rules, the recipe copy; the readings are stored already.
 *
 * @throws RangeError for an input that is no firing: a series with times that fall or arrays of unequal length, a
 *   stage that is invalid, a tolerance or target not above 0. What a person can cause (no rest start, a long gap, a
 *   probe at another place) is no error but an incomplete score with its reasons.
 */
export function scoreFiring(input: ScoreInput): Score {
  const { recipe, rules } = input
  const legs = planLegs(recipe.planStartTempC, recipe.stages, ruleset1.rampBandMin)
  const planPoints = planCurve(
    recipe.planStartTempC,
    recipe.stages.map(({ kind, targetTempC, minutes }) => ({ kind, targetTempC, durationS: minutes * 60 })),
  )
  const planDoseMin = equivalentMinutes(rules.dose, planPoints)
  const targetDoseMin = requirePositive('doseTargetMin', recipe.doseTargetMin ?? planDoseMin)
  requirePositive('doseToleranceLog10', recipe.doseToleranceLog10)
  const toast = readToast(input, legs)
  const reasons = incompleteReasons(input, toast?.filled ?? null)
  const isIncomplete = reasons.length > 0
  const limitsBroken = toast === null ? [] : findBrokenLimits(input, toast.filled)
  const deltaLog10 =
    isIncomplete || toast === null || toast.dose.log10Dose === null
      ? null
      : toast.dose.log10Dose - Math.log10(targetDoseMin)
  const terms = scoreTerms(input, legs, toast, targetDoseMin, isIncomplete)
  const score: Omit<Score, 'sentences'> = {
    ruleset: ruleset1.number,
    verdict: verdictOf(
      isIncomplete,
      limitsBroken,
      toast?.dose ?? null,
      targetDoseMin,
      recipe.doseToleranceLog10,
    ),
    points: isIncomplete ? null : pointsOf(terms),
    dose: toast?.dose ?? null,
    planDoseMin,
    targetDoseMin,
    toleranceLog10: recipe.doseToleranceLog10,
    deltaLog10,
    ...dosesBesideToast(input),
    ...indicesOf(input, toast?.filled ?? null, planPoints),
    toastDepthMm: toast === null ? null : toastDepthOf(input, toast.filled),
    terms,
    limitsBroken,
    gaps: toast?.filled.gaps ?? [],
    stages: toast?.stages ?? [],
    incompleteReasons: reasons,
  }
  return { ...score, sentences: describeScore(score, rules.dose.refTempC) }
}

/** The toast as it was read: joined readings, matched stages, dose with its intervals. */
type Toast = { filled: FilledSeries; stages: MatchedStage[]; dose: DoseResult; restStartS: number }

/** Null when the firing never came to rest, or nothing was read from toast start to rest start. */
function readToast(input: ScoreInput, legs: readonly PlanLeg[]): Toast | null {
  const { recipe, firing, rules } = input
  const restStartS = firing.restStartS
  if (restStartS === null || requireFinite('restStartS', restStartS) <= 0) return null
  const filled = fillGaps(input.lead, { fromS: 0, toS: restStartS }, rules.gaps)
  if (filled === null) return null
  const stages = matchStages(recipe.stages, firing.stageMarks, restStartS)
  const hasWideGap = filled.gaps.some((gap) => gap.treatment !== 'interpolated')
  const dose = doseInterval({
    timeS: filled.timeS,
    tempC: filled.tempC,
    model: rules.dose,
    probe: input.leadProbe,
    errors: rules.errors,
    gaps: hasWideGap
      ? gapExtremes(filled, rules.dose, (timeS) => alignedPlanAt(legs, stages, timeS).planTempC)
      : null,
  })
  return { filled, stages, dose, restStartS }
}

function isSamePlace(first: ProbePlace, second: ProbePlace): boolean {
  return (
    first.height === second.height &&
    first.side === second.side &&
    first.mounting === second.mounting &&
    Math.abs(first.depthMm - second.depthMm) < 1e-6
  )
}

function incompleteReasons(input: ScoreInput, filled: FilledSeries | null): string[] {
  const { recipe, firing, leadProbe, rules } = input
  const reasons: string[] = []
  if (firing.restStartS === null || firing.restStartS <= 0) {
    reasons.push('The firing has no rest start after its toast start, so there is no toast to score.')
  } else if (filled === null) {
    reasons.push('The lead probe gave no reading from toast start to rest start.')
  }
  if (!isSamePlace(recipe.leadPlace, leadProbe.place)) {
    reasons.push(
      'The lead probe sat at another place than the recipe is written for; doses of two places do not compare.',
    )
  }
  if (firing.leadSwaps.some((swap) => !swap.isSamePlace)) {
    reasons.push('The lead probe was replaced by one at another place.')
  }
  if (filled === null) return reasons
  const longest = filled.gaps.filter((gap) => gap.treatment === 'incomplete')
  if (longest.length > 0) {
    const minutes = (Math.max(...longest.map((gap) => gap.missingS)) / 60).toFixed(1)
    reasons.push(
      `The lead probe gave no reading for ${minutes} min; more than ${rules.gaps.widenUpToS / 60} min cannot be joined.`,
    )
  }
  if (filled.missingShare > rules.gaps.incompleteAboveShare) {
    const percent = (100 * filled.missingShare).toFixed(1)
    reasons.push(
      `${percent} % of the toast has no reading; more than ${100 * rules.gaps.incompleteAboveShare} % cannot be scored.`,
    )
  }
  return reasons
}

function verdictOf(
  isIncomplete: boolean,
  limitsBroken: readonly BrokenLimit[],
  dose: DoseResult | null,
  targetDoseMin: number,
  toleranceLog10: number,
): Verdict {
  const { lowMin: lowestMin, highMin: highestMin } = toleranceBoundsMin(targetDoseMin, toleranceLog10)
  const bounds = dose?.sameMount ?? { lowMin: 0, highMin: 0 }
  const holds: Record<Verdict, boolean> = {
    incomplete: isIncomplete || dose === null,
    'limit broken': limitsBroken.length > 0,
    'out of tolerance': bounds.highMin < lowestMin || bounds.lowMin > highestMin,
    'cannot tell': bounds.lowMin < lowestMin || bounds.highMin > highestMin,
    'in tolerance': true,
  }
  return ruleset1.verdictOrder.find((verdict) => holds[verdict]) ?? 'incomplete'
}

/** The wood maximum holds from toast start to the last reading, the rest included; the climb for the toast. */
function findBrokenLimits(input: ScoreInput, filled: FilledSeries): BrokenLimit[] {
  const { limits } = input.recipe
  const { rules } = input
  const broken: Omit<BrokenLimit, 'sentence'>[] = []
  if (limits.woodMaxTempC !== null) {
    const found = findHeldAbove(
      input.lead,
      requireFinite('woodMaxTempC', limits.woodMaxTempC),
      { fromS: 0, toS: Infinity },
      rules.limits.woodMaxHeldS,
      rules.gaps.interpolateUpToS,
    )
    if (found !== null) {
      const { atS, heldS, worst } = found
      broken.push({ limit: 'wood maximum', atS, heldS, measured: worst, allowed: limits.woodMaxTempC })
    }
  }
  if (limits.climbMaxCPerMin !== null) {
    const allowed = requireFinite('climbMaxCPerMin', limits.climbMaxCPerMin)
    const found = findClimbAbove(filled, allowed, rules.limits.climbWindowS)
    if (found !== null) {
      broken.push({
        limit: 'climb maximum',
        atS: found.atS,
        heldS: found.heldS,
        measured: found.worst,
        allowed,
      })
    }
  }
  return broken.map((limit) => ({ ...limit, sentence: describeBrokenLimit(limit) }))
}

function scoreTerms(
  input: ScoreInput,
  legs: readonly PlanLeg[],
  toast: Toast | null,
  targetDoseMin: number,
  isIncomplete: boolean,
): ScoreTerm[] {
  const { recipe, firing, rules } = input
  const context = { doseMin: toast?.dose.doseMin ?? null, targetDoseMin, refTempC: rules.dose.refTempC }
  if (toast === null || isIncomplete) {
    return ruleset1.termOrder.map((key) => {
      const { name, unit, points } = ruleset1.terms[key]
      const sentence = `${name} is not scored: the record is incomplete.`
      return {
        key,
        name,
        isMeasured: false,
        measured: null,
        allowed: null,
        unit,
        detail: null,
        pointsLost: null,
        pointsOf: points,
        sentence,
      }
    })
  }
  const figures = measureBand(
    toast.filled,
    alignPlan(legs, toast.stages, toast.filled.timeS),
    ruleset1.countFromTempC,
  )
  const measured: MeasuredTerm[] = [
    measureDose(ruleset1, toast.dose, targetDoseMin, recipe.doseToleranceLog10),
    measureInBand(ruleset1, figures, recipe),
    measureShape(ruleset1, figures),
    measureStageLengths(ruleset1, toast.stages),
    measureSpread(ruleset1, toast.filled, input),
    measurePreheatAndBend(ruleset1, recipe, firing),
  ]
  return measured.map((term) => {
    const scored = withPoints(term)
    return { ...scored, sentence: describeTerm(scored, context) }
  })
}

/** Points lost are rounded to one decimal place first, so that the figures shown add up to the points shown. */
function withPoints(term: MeasuredTerm): ScoreTerm {
  const { name, points } = ruleset1.terms[term.key]
  return {
    key: term.key,
    name,
    isMeasured: term.lostShare !== null,
    measured: term.measured,
    allowed: term.allowed,
    unit: term.unit,
    detail: term.detail,
    pointsLost: term.lostShare === null ? null : roundToTenth(term.lostShare * points),
    pointsOf: points,
    sentence: '',
  }
}

function roundToTenth(value: number): number {
  return Math.round(value * 10) / 10
}

/** What is left of the measured terms, scaled to 100. */
function pointsOf(terms: readonly ScoreTerm[]): number | null {
  let of = 0
  let lost = 0
  for (const term of terms) {
    if (term.pointsLost === null) continue
    of += term.pointsOf
    lost += term.pointsLost
  }
  return of > 0 ? roundToTenth((100 * (of - lost)) / of) : null
}

function dosesBesideToast(input: ScoreInput): { bendDoseMin: number | null; restDoseMin: number | null } {
  const { lead, rules, firing } = input
  const breakS = rules.gaps.interpolateUpToS
  const doseIn = (fromS: number, toS: number) =>
    readDoseMin(rules.dose, lead.timeS, lead.tempC, { fromS, toS }, breakS)
  return {
    bendDoseMin: doseIn(-Infinity, 0),
    restDoseMin: firing.restStartS === null ? null : doseIn(firing.restStartS, Infinity),
  }
}

function indicesOf(
  input: ScoreInput,
  filled: FilledSeries | null,
  planPoints: readonly CurvePoint[],
): Pick<Score, 'slowIndexMin' | 'fastIndexMin' | 'planSlowIndexMin' | 'planFastIndexMin'> {
  const { slowJPerMol, fastJPerMol } = input.rules.indices
  const refTempC = input.rules.dose.refTempC
  return {
    slowIndexMin: filled === null ? null : indexMin(slowJPerMol, refTempC, filled),
    fastIndexMin: filled === null ? null : indexMin(fastJPerMol, refTempC, filled),
    planSlowIndexMin: arrheniusEquivalentMinutes(slowJPerMol, refTempC, planPoints),
    planFastIndexMin: arrheniusEquivalentMinutes(fastJPerMol, refTempC, planPoints),
  }
}

/** The Arrhenius integral over joined readings. */
function indexMin(eaJPerMol: number, refTempC: number, filled: FilledSeries): number {
  const segment = createArrheniusSegment(eaJPerMol, refTempC)
  let minutes = 0
  let lastC = filled.tempC[0] ?? NaN
  let lastRate = segment.rateAt(lastC)
  for (let i = 1; i < filled.timeS.length; i += 1) {
    const tempC = filled.tempC[i] ?? NaN
    const rate = segment.rateAt(tempC)
    const durationS = (filled.timeS[i] ?? NaN) - (filled.timeS[i - 1] ?? NaN)
    minutes += segment.minutes(durationS, lastC, lastRate, tempC, rate)
    lastC = tempC
    lastRate = rate
  }
  return minutes
}

/** Toast depth at rest start by the stave model, the stave taken to be at its first reading throughout at toast start. */
function toastDepthOf(input: ScoreInput, filled: FilledSeries): DepthRangeMm {
  const { recipe, firing, rules, leadProbe } = input
  const points: CurvePoint[] = []
  const last = filled.timeS.length - 1
  for (let i = 0; i <= last; i += 1) {
    const timeS = filled.timeS[i] ?? NaN
    if (i === 0 || i === last || timeS - (points.at(-1)?.timeS ?? 0) >= SCORE_STAVE_STEP_S) {
      points.push({ timeS, tempC: filled.tempC[i] ?? NaN })
    }
  }
  const highestC = points.reduce((highest, point) => Math.max(highest, point.tempC), -Infinity)
  const classC = probeErrorC(leadProbe, Math.min(rules.dose.baseTempC, highestC), highestC) ?? 0
  const { final } = staveHistory({
    points,
    columns: 2,
    thicknessMm: recipe.thicknessMm,
    probeDepthMm: leadProbe.place.depthMm,
    moisturePercent: firing.moisturePercent ?? rules.stave.moisturePercent,
    specificGravity: firing.specificGravity ?? rules.stave.specificGravity,
    roomTempC: firing.roomTempC ?? rules.stave.roomTempC,
    coldFaceHWPerM2K: rules.stave.coldFaceHWPerM2K,
    dose: rules.dose,
    toastDepthDoseMin: rules.stave.toastDepthDoseMin,
    probeDepthErrorMm: rules.stave.probeDepthErrorMm,
    diffusivityErrorShare: rules.stave.diffusivityErrorShare,
    probeErrorC: Math.hypot(classC, rules.errors.coldJunctionC, rules.errors.mountC),
    cellMm: SCORE_STAVE_CELL_MM,
    longestStepS: SCORE_STAVE_STEP_S,
  })
  return toastDepthMm(final)
}
