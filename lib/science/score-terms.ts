import type { DoseResult } from './dose-interval'
import type { FilledSeries } from './gaps'
import { meanSpreadC } from './score-limits'
import type { Ruleset } from './score-ruleset'
import type { AlignedPlan } from './score-stages'
import type {
  MatchedStage,
  ScoreFiringFacts,
  ScoreInput,
  ScoreRecipe,
  ScoreTermKey,
  ScoreUnit,
} from './score-types'

/**
 * A term before it has points: what was measured, what loses nothing, and at what everything is lost. `measured` null
 * and `lostShare` given is a measure without a number (no dose at all).
 */
export type MeasuredTerm = {
  key: ScoreTermKey
  measured: number | null
  allowed: number | null
  unit: ScoreUnit
  detail: string | null
  /** 0 to 1; null when the term cannot be measured, and `detail` says why. */
  lostShare: number | null
}

function lostShareOf(value: number, noLoss: number, allLost: number): number {
  return Math.min(1, Math.max(0, (value - noLoss) / (allLost - noLoss)))
}

function unmeasured(key: ScoreTermKey, unit: ScoreUnit, reason: string): MeasuredTerm {
  return { key, measured: null, allowed: null, unit, detail: reason, lostShare: null }
}

/** |Δlog10 E| against the recipe's tolerance. Signed as shown: above 0 is more than the target. */
export function measureDose(
  ruleset: Ruleset,
  dose: DoseResult,
  targetDoseMin: number,
  toleranceLog10: number,
): MeasuredTerm {
  const rule = ruleset.terms.dose
  const common = { key: 'dose', unit: rule.unit, allowed: toleranceLog10, detail: null } as const
  if (dose.log10Dose === null) return { ...common, measured: null, lostShare: 1 }
  const measured = dose.log10Dose - Math.log10(targetDoseMin)
  const noLoss = rule.noLossTimes * toleranceLog10
  const lostShare = lostShareOf(Math.abs(measured), noLoss, rule.allLostTimes * toleranceLog10)
  return { ...common, measured, lostShare }
}

/** Time above the counting temperature, and what of it lay in the band; deviations in bands. */
export type BandFigures = { aboveS: number; insideS: number; meanSquareBands: number }

/**
 * Walks the joined readings against the aligned plan. Each point stands for half the time to its neighbours. Only
 * where the wood itself is above the counting temperature: wet wood that lingers near 100 °C is not punished.
 */
export function measureBand(filled: FilledSeries, plan: AlignedPlan, countFromTempC: number): BandFigures {
  const { timeS, tempC } = filled
  const last = timeS.length - 1
  let aboveS = 0
  let insideS = 0
  let squareSum = 0
  for (let i = 0; i <= last; i += 1) {
    const temp = tempC[i] ?? NaN
    if (!(temp > countFromTempC)) continue
    const weightS = ((timeS[Math.min(last, i + 1)] ?? NaN) - (timeS[Math.max(0, i - 1)] ?? NaN)) / 2
    const bands = (temp - (plan.planTempC[i] ?? NaN)) / (plan.halfWidthC[i] ?? NaN)
    aboveS += weightS
    // A hair beyond 1 is rounding: a reading on the edge of the band is inside.
    if (Math.abs(bands) <= 1 + 1e-9) insideS += weightS
    squareSum += weightS * bands * bands
  }
  return { aboveS, insideS, meanSquareBands: aboveS > 0 ? squareSum / aboveS : 0 }
}

/** True when the plan, taken as it stands, passes the counting temperature. */
function planCounts(recipe: ScoreRecipe, countFromTempC: number): boolean {
  return (
    recipe.planStartTempC > countFromTempC ||
    recipe.stages.some((stage) => stage.targetTempC > countFromTempC)
  )
}

/** Share of the time above 120 °C inside the band. Never above it though the plan is: all lost. */
export function measureInBand(ruleset: Ruleset, figures: BandFigures, recipe: ScoreRecipe): MeasuredTerm {
  const rule = ruleset.terms.inBand
  if (figures.aboveS === 0 && !planCounts(recipe, ruleset.countFromTempC)) {
    return unmeasured('inBand', rule.unit, `neither plan nor wood passes ${ruleset.countFromTempC} °C`)
  }
  const measured = figures.aboveS > 0 ? (100 * figures.insideS) / figures.aboveS : 0
  const lostShare = lostShareOf(measured, rule.noLoss, rule.allLost)
  return { key: 'inBand', measured, allowed: rule.noLoss, unit: rule.unit, detail: null, lostShare }
}

/** Root mean square of the deviation from plan in bands. */
export function measureShape(ruleset: Ruleset, figures: BandFigures): MeasuredTerm {
  const rule = ruleset.terms.shape
  if (figures.aboveS === 0) {
    return unmeasured('shape', rule.unit, `the wood never passed ${ruleset.countFromTempC} °C`)
  }
  const measured = Math.sqrt(figures.meanSquareBands)
  const lostShare = lostShareOf(measured, rule.noLoss, rule.allLost)
  return { key: 'shape', measured, allowed: rule.noLoss, unit: rule.unit, detail: null, lostShare }
}

/** The stage furthest off its planned length, signed, % of the plan's minutes. A stage of no minutes has no share. */
export function measureStageLengths(ruleset: Ruleset, stages: readonly MatchedStage[]): MeasuredTerm {
  const rule = ruleset.terms.stageLengths
  let measured: number | null = null
  let detail: string | null = null
  for (const stage of stages) {
    if (stage.planMinutes <= 0) continue
    const percent = (100 * (stage.actualMinutes - stage.planMinutes)) / stage.planMinutes
    if (measured !== null && Math.abs(percent) <= Math.abs(measured)) continue
    measured = percent
    detail = stage.name
  }
  if (measured === null) return unmeasured('stageLengths', rule.unit, 'the plan has no stage with a length')
  const lostShare = lostShareOf(Math.abs(measured), rule.noLoss, rule.allLost)
  return { key: 'stageLengths', measured, allowed: rule.noLoss, unit: rule.unit, detail, lostShare }
}

/** Mean absolute difference of the opposite probes. Needs both for half of the toast, and a limit in the recipe. */
export function measureSpread(ruleset: Ruleset, filled: FilledSeries, input: ScoreInput): MeasuredTerm {
  const rule = ruleset.terms.spread
  const limitC = input.recipe.limits.spreadMaxC
  if (limitC === null) return unmeasured('spread', rule.unit, 'the recipe sets no limit for the spread')
  if (input.opposite === null)
    return unmeasured('spread', rule.unit, 'there was no probe on the opposite side')
  const spread = meanSpreadC(filled, input.opposite, input.rules.gaps.interpolateUpToS)
  const toastS = (filled.timeS.at(-1) ?? 0) - (filled.timeS[0] ?? 0)
  if (spread === null || spread.coveredS < rule.leastCoveredShare * toastS) {
    return unmeasured('spread', rule.unit, 'the opposite probe was read for less than half of the toast')
  }
  const lostShare = lostShareOf(spread.spreadC, rule.noLossTimes * limitC, rule.allLostTimes * limitC)
  return {
    key: 'spread',
    measured: spread.spreadC,
    allowed: limitC,
    unit: rule.unit,
    detail: null,
    lostShare,
  }
}

/** The worst of moisture, preheat minutes and pull minutes, of those that the recipe asks and the firing has. */
export function measurePreheatAndBend(
  ruleset: Ruleset,
  recipe: ScoreRecipe,
  firing: ScoreFiringFacts,
): MeasuredTerm {
  const parts = [
    measureMinutes(ruleset, 'bend', firing.bendMinutes, recipe.bend.minutesMin),
    measureMinutes(ruleset, 'preheat', firing.preheatMinutes, recipe.preheat.minutesMin),
    measureMoisture(ruleset, recipe, firing),
  ].filter((part) => part !== null)
  let worst = parts[0]
  for (const part of parts) {
    if (worst === undefined || (part.lostShare ?? 0) > (worst.lostShare ?? 0)) worst = part
  }
  const none = 'neither moisture, preheat nor bend was both asked for and measured'
  return worst ?? unmeasured('preheatAndBend', 'minutes', none)
}

function measureMinutes(
  ruleset: Ruleset,
  detail: 'bend' | 'preheat',
  minutes: number | null,
  leastMinutes: number | null,
): MeasuredTerm | null {
  if (minutes === null || leastMinutes === null || leastMinutes <= 0) return null
  const allLost = leastMinutes * ruleset.terms.preheatAndBend.allLostMinutesTimes
  const lostShare = lostShareOf(minutes, leastMinutes, allLost)
  return {
    key: 'preheatAndBend',
    measured: minutes,
    allowed: leastMinutes,
    unit: 'minutes',
    detail,
    lostShare,
  }
}

function measureMoisture(
  ruleset: Ruleset,
  recipe: ScoreRecipe,
  firing: ScoreFiringFacts,
): MeasuredTerm | null {
  const { moistureMinPercent, moistureMaxPercent } = recipe.preheat
  const measured = firing.moisturePercent
  if (measured === null || (moistureMinPercent === null && moistureMaxPercent === null)) return null
  const belowPercent = moistureMinPercent === null ? -Infinity : moistureMinPercent - measured
  const abovePercent = moistureMaxPercent === null ? -Infinity : measured - moistureMaxPercent
  const allowed = belowPercent >= abovePercent ? moistureMinPercent : moistureMaxPercent
  const outPercent = Math.max(0, belowPercent, abovePercent)
  const lostShare = lostShareOf(outPercent, 0, ruleset.terms.preheatAndBend.allLostMoisturePercent)
  return { key: 'preheatAndBend', measured, allowed, unit: 'percentMoisture', detail: 'moisture', lostShare }
}
