import { censoredRegression } from './censored-regression'
import { requireNumbers } from './domain'
import type { FamilyId, MarkerFamily, PredictorKey } from './marker-families'
import { curveStarts, markerFamilies, predictors } from './marker-families'
import { linearRegression, nonlinearLeastSquares, tQuantile } from './statistics'
import { threeDigits } from './three-digits'

/**
 * A marker's response fitted from results: parameters with intervals, residuals, and predictions with intervals inside
 * the range of the results. What the data cannot support is refused in a sentence.
 */

/** One result: its predictors in the family's order, and the value, or the limit that it lies below. */
export type MarkerResult = { x: readonly number[]; value: number; isBelowLimit: boolean }

export type FittedParameter = {
  name: string
  value: number
  standardError: number
  low: number
  high: number
}

/** A fit, as plain JSON: it is stored with the response and predicts without the results. */
export type MarkerFit = {
  family: FamilyId
  method: 'least squares' | 'maximum likelihood'
  confidence: number
  count: number
  belowLimitCount: number
  /** Of t for the intervals: measured results less parameters. */
  degreesOfFreedom: number
  parameters: FittedParameter[]
  covariance: number[][]
  residualSd: number
  /** Lowest and highest of each predictor among the results. */
  ranges: { key: PredictorKey; low: number; high: number }[]
  /** Largest g·C·g/s² among the results: a prediction beyond it lies outside them, though each predictor is inside. */
  mostLeverage: number
  /** In the order of the results. Residual null: the result lies below its limit. */
  residuals: { fitted: number; residual: number | null }[]
}

export type FitOutcome = { ok: true; fit: MarkerFit } | { ok: false; refusal: string }

export const fitLimits = {
  confidence: 0.95,
  /** Measured results needed beyond the parameters, and different predictors beyond them (judgement). */
  spareResults: 3,
  spareValues: 1,
  /** More than this share below the limit leaves the spread to a guess (judgement). */
  mostBelowShare: 0.5,
} as const

type Solved = {
  parameters: number[]
  covariance: number[][]
  residualSd: number
  method: MarkerFit['method']
}

/**
 * Fits a family to results. A family that is linear in its parameters counts results below their limit by maximum
 * likelihood (Tobit, normal errors); the curves refuse them. Intervals are t intervals.
 *
 * @throws RangeError for a value that is not finite, or a result with another number of predictors
 */
export function fitMarker(familyId: FamilyId, results: readonly MarkerResult[]): FitOutcome {
  const family = markerFamilies[familyId]
  for (const [i, result] of results.entries()) {
    requireNumbers(`results[${i}].value`, [result.value])
    requireNumbers(`results[${i}].x`, result.x, family.predictors.length)
  }
  const refusal = refusalOfData(family, results)
  if (refusal !== null) return { ok: false, refusal }
  const solved = solveFamily(family, results)
  if ('refusal' in solved) return { ok: false, refusal: solved.refusal }
  const fit = describe(family, results, solved)
  const unclear = refusalOfParameters(family, fit)
  return unclear === null ? { ok: true, fit } : { ok: false, refusal: unclear }
}

function count(n: number, noun: string): string {
  return `${n} ${noun}${n === 1 ? '' : 's'}`
}

function refusalOfData(family: MarkerFamily, results: readonly MarkerResult[]): string | null {
  const measured = results.filter((result) => !result.isBelowLimit)
  const below = results.length - measured.length
  const needed = family.parameters.length + fitLimits.spareResults
  if (results.length > 0 && measured.length === 0) {
    return 'Every result is below its limit: they say that there is little, not how it changes.'
  }
  if (below > 0 && !family.isLinear) {
    return `${count(below, 'result')} of ${results.length} ${below === 1 ? 'lies' : 'lie'} below the limit, which this curve cannot count. Take one of the straight lines, which can; do not leave ${below === 1 ? 'it' : 'them'} out.`
  }
  if (measured.length < needed) {
    return `${count(measured.length, 'measured result')} ${measured.length === 1 ? 'is' : 'are'} too few for ${family.parameters.length} parameters: give at least ${needed}.`
  }
  if (below > fitLimits.mostBelowShare * results.length) {
    return `${below} of ${results.length} results lie below their limit, more than half: a fit would rest on a guess of the spread.`
  }
  const wanted = family.parameters.length + fitLimits.spareValues
  for (const [j, key] of family.predictors.entries()) {
    const different = new Set(measured.map((result) => (result.x[j] ?? 0).toPrecision(3))).size
    if (different < wanted) {
      return `The results lie at ${count(different, 'different value')} of the ${predictors[key].name}: give at least ${wanted}.`
    }
  }
  const fault = results.map((result) => family.faultOf(result.x)).find((one) => one !== null)
  return fault ?? null
}

function solveFamily(family: MarkerFamily, results: readonly MarkerResult[]): Solved | { refusal: string } {
  try {
    if (results.some((result) => result.isBelowLimit)) return solveCensored(family, results)
    if (family.isLinear && family.parameters.length === 2) return solveLine(family, results)
    return solveCurve(family, results)
  } catch (error) {
    if (!(error instanceof Error) || error.name !== 'FitError') throw error
    return {
      refusal: /determine|say nothing/.test(error.message)
        ? 'These results do not determine all parameters: two of them do the same to the curve. Take a simpler family or add toasts that differ more.'
        : 'No curve of this family was found that fits these results. Take another family.',
    }
  }
}

function solveCensored(family: MarkerFamily, results: readonly MarkerResult[]): Solved {
  const fit = censoredRegression({
    design: results.map((result) => family.gradient([], result.x)),
    y: results.map((result) => result.value),
    isBelow: results.map((result) => result.isBelowLimit),
  })
  const { coefficients, covariance, residualSd } = fit
  return { parameters: coefficients, covariance, residualSd, method: 'maximum likelihood' }
}

function solveLine(family: MarkerFamily, results: readonly MarkerResult[]): Solved {
  const columns = results.map((result) => family.gradient([], result.x)[1] ?? 0)
  const line = linearRegression(
    columns,
    results.map((result) => result.value),
  )
  const mean = columns.reduce((sum, value) => sum + value, 0) / columns.length
  const shared = -mean * line.slopeSd ** 2
  return {
    parameters: [line.intercept, line.slope],
    covariance: [
      [line.interceptSd ** 2, shared],
      [shared, line.slopeSd ** 2],
    ],
    residualSd: line.residualSd,
    method: 'least squares',
  }
}

function solveCurve(family: MarkerFamily, results: readonly MarkerResult[]): Solved {
  const x = results.map((result) => result.x)
  const y = results.map((result) => result.value)
  const starts = family.isLinear
    ? [family.parameters.map(() => 0)]
    : curveStarts(
        family,
        x.map(([dose = 0]) => dose),
        y,
      )
  let best: (Solved & { rss: number }) | null = null
  let failure: unknown = null
  for (const start of starts) {
    try {
      const found = nonlinearLeastSquares({ model: family.value, start, x, y })
      if (best === null || found.residualSumOfSquares < best.rss) {
        const { parameters, covariance, residualSd, residualSumOfSquares: rss } = found
        best = { parameters, covariance, residualSd, rss, method: 'least squares' }
      }
    } catch (error) {
      failure = error
    }
  }
  if (best === null) throw failure
  return best
}

function describe(family: MarkerFamily, results: readonly MarkerResult[], solved: Solved): MarkerFit {
  const belowLimitCount = results.filter((result) => result.isBelowLimit).length
  const degreesOfFreedom = results.length - belowLimitCount - family.parameters.length
  const t = tQuantile((1 + fitLimits.confidence) / 2, degreesOfFreedom)
  const fitted = results.map((result) => family.value(solved.parameters, result.x))
  return {
    family: family.id,
    method: solved.method,
    confidence: fitLimits.confidence,
    count: results.length,
    belowLimitCount,
    degreesOfFreedom,
    parameters: family.parameters.map(({ name }, j) => {
      const value = solved.parameters[j] ?? Number.NaN
      const standardError = Math.sqrt(solved.covariance[j]?.[j] ?? 0)
      return { name, value, standardError, low: value - t * standardError, high: value + t * standardError }
    }),
    covariance: solved.covariance,
    residualSd: solved.residualSd,
    ranges: family.predictors.map((key, j) => {
      const values = results.map((result) => result.x[j] ?? 0)
      return { key, low: Math.min(...values), high: Math.max(...values) }
    }),
    mostLeverage: Math.max(
      ...results.map((result) => varianceAt(family, solved, result.x) / solved.residualSd ** 2 || 0),
    ),
    residuals: results.map((result, i) => ({
      fitted: fitted[i] ?? Number.NaN,
      residual: result.isBelowLimit ? null : result.value - (fitted[i] ?? Number.NaN),
    })),
  }
}

/** A curve's parameters are all above 0 by their meaning, a slope may have either sign; no interval may take in 0. */
function refusalOfParameters(family: MarkerFamily, fit: MarkerFit): string | null {
  for (const [j, parameter] of fit.parameters.entries()) {
    const { whenUnclear, name } = family.parameters[j] ?? {}
    if (whenUnclear === undefined || whenUnclear === null) continue
    const isClear = parameter.low > 0 || (family.isLinear && parameter.high < 0)
    if (!isClear) {
      return `${whenUnclear} (${name ?? ''} is ${threeDigits(parameter.value)}, 95 % interval ${threeDigits(parameter.low)} to ${threeDigits(parameter.high)}.)`
    }
  }
  return null
}

/** Variance of the fitted value at x: g·C·g, g the derivatives by the parameters. */
function varianceAt(
  family: MarkerFamily,
  solved: Pick<Solved, 'covariance' | 'parameters'>,
  x: readonly number[],
): number {
  const gradient = family.gradient(solved.parameters, x)
  return Math.max(
    0,
    gradient.reduce(
      (sum, left, i) =>
        sum +
        left * gradient.reduce((inner, right, j) => inner + right * (solved.covariance[i]?.[j] ?? 0), 0),
      0,
    ),
  )
}

const tFactors = new Map<string, number>()

/** The t quantile of a fit's intervals, kept: a curve asks for it at every point, and there are few different ones. */
function tFactor({
  confidence,
  degreesOfFreedom,
}: Pick<MarkerFit, 'confidence' | 'degreesOfFreedom'>): number {
  const key = `${confidence} ${degreesOfFreedom}`
  const kept = tFactors.get(key)
  if (kept !== undefined) return kept
  const t = tQuantile((1 + confidence) / 2, degreesOfFreedom)
  tFactors.set(key, t)
  return t
}

/** A prediction: where a further result would lie, `low` to `high`, and where the mean of many would. */
export type MarkerPrediction =
  | { ok: true; value: number; low: number; high: number; meanLow: number; meanHigh: number }
  | { ok: false; refusal: string }

/**
 * Predicts a further result at x, with the interval of the fit's confidence: parameters, their covariance and the
 * residual spread together, by the delta method for the curves. Refuses x outside the range of the results.
 *
 * @param x the predictors in the family's order
 * @throws RangeError for a value that is not finite
 */
export function predictMarker(fit: MarkerFit, x: readonly number[]): MarkerPrediction {
  const family = markerFamilies[fit.family]
  requireNumbers('x', x, family.predictors.length)
  for (const [j, range] of fit.ranges.entries()) {
    const value = x[j] ?? 0
    if (value >= range.low && value <= range.high) continue
    const { name, unit } = predictors[range.key]
    return {
      ok: false,
      refusal: `A ${name} of ${threeDigits(value)} ${unit} lies outside the ${threeDigits(range.low)} to ${threeDigits(range.high)} ${unit} that the results cover. The fit says nothing there.`,
    }
  }
  const parameters = fit.parameters.map((parameter) => parameter.value)
  const variance = varianceAt(family, { parameters, covariance: fit.covariance }, x)
  // For a curve the leverage is no measure of being outside: its gradient rises inside the range too.
  if (family.isLinear && variance > fit.mostLeverage * fit.residualSd ** 2 * (1 + 1e-9)) {
    return {
      ok: false,
      refusal:
        'No result was like this: each index is inside the range, the two together are not. The fit says nothing there.',
    }
  }
  const value = family.value(parameters, x)
  const t = tFactor(fit)
  const half = t * Math.sqrt(variance + fit.residualSd ** 2)
  const meanHalf = t * Math.sqrt(variance)
  return {
    ok: true,
    value,
    low: value - half,
    high: value + half,
    meanLow: value - meanHalf,
    meanHigh: value + meanHalf,
  }
}
