import chiSquareQuantileOf from '@stdlib/stats-base-dists-chisquare-quantile'
import fCdf from '@stdlib/stats-base-dists-f-cdf'
import fQuantileOf from '@stdlib/stats-base-dists-f-quantile'
import tQuantileOf from '@stdlib/stats-base-dists-t-quantile'
import { requireEqualLength, requireNumbers, requirePositive, requireProbability } from './domain'

/**
 * Arithmetic mean, in the values' own unit: a sum, then a second pass that adds the mean of what the first left over.
 *
 * @throws RangeError for no values or one that is not finite
 */
export function mean(values: readonly number[]): number {
  requireNumbers('values', values)
  return meanOf(values)
}

function meanOf(values: readonly number[]): number {
  let sum = 0
  for (const value of values) sum += value
  const first = sum / values.length
  let rest = 0
  for (const value of values) rest += value - first
  return first + rest / values.length
}

/** Σ(x − m)² with the rounding of m taken out again (Björck's corrected two-pass form). */
function squaresAround(values: readonly number[], centre: number): number {
  let squares = 0
  let rest = 0
  for (const value of values) {
    const deviation = value - centre
    squares += deviation * deviation
    rest += deviation
  }
  return Math.max(0, squares - (rest * rest) / values.length)
}

/**
 * Sample standard deviation, divisor n − 1, in the values' own unit: two-pass, to the certified digits of the NIST
 * StRD univariate sets.
 *
 * @throws RangeError for fewer than two values or one that is not finite
 */
export function sampleSd(values: readonly number[]): number {
  requireNumbers('values', values, 2)
  return Math.sqrt(squaresAround(values, meanOf(values)) / (values.length - 1))
}

/**
 * Lag-1 autocorrelation: Σ(xᵢ − m)(xᵢ₊₁ − m) / Σ(xᵢ − m)², as NIST StRD defines it.
 *
 * @throws RangeError for fewer than two values, one that is not finite, or values that do not vary
 */
export function lag1Autocorrelation(values: readonly number[]): number {
  requireNumbers('values', values, 2)
  const centre = meanOf(values)
  let squares = 0
  let products = 0
  let last: number | undefined
  for (const value of values) {
    const deviation = value - centre
    squares += deviation * deviation
    if (last !== undefined) products += last * deviation
    last = deviation
  }
  if (squares === 0)
    throw new RangeError('values must vary: the autocorrelation of a constant does not exist')
  return products / squares
}

function requireQuantile(name: string, value: number): number {
  if (!Number.isFinite(value)) throw new RangeError(`p: the ${name} quantile has no finite number there`)
  return value
}

/**
 * Quantile of Student's t distribution.
 *
 * @param p lower-tail probability, strictly between 0 and 1
 * @param df degrees of freedom, above 0, whole or not
 * @throws RangeError outside the domain
 */
export function tQuantile(p: number, df: number): number {
  return requireQuantile('t', tQuantileOf(requireProbability('p', p), requirePositive('df', df)))
}

/**
 * Quantile of the chi-square distribution.
 *
 * @param p lower-tail probability, strictly between 0 and 1
 * @param df degrees of freedom, above 0, whole or not
 * @throws RangeError outside the domain
 */
export function chiSquareQuantile(p: number, df: number): number {
  return requireQuantile(
    'chi-square',
    chiSquareQuantileOf(requireProbability('p', p), requirePositive('df', df)),
  )
}

/**
 * Quantile of the F distribution.
 *
 * @param p lower-tail probability, strictly between 0 and 1
 * @param df1 degrees of freedom of the numerator, above 0
 * @param df2 degrees of freedom of the denominator, above 0
 * @throws RangeError outside the domain
 */
export function fQuantile(p: number, df1: number, df2: number): number {
  requireProbability('p', p)
  return requireQuantile('F', fQuantileOf(p, requirePositive('df1', df1), requirePositive('df2', df2)))
}

/** A straight line fitted by least squares; the sd are standard errors, residualSd has divisor n − 2. */
export type LinearFit = {
  intercept: number
  slope: number
  interceptSd: number
  slopeSd: number
  residualSd: number
  rSquared: number
}

/**
 * Least squares line y = intercept + slope·x, by the centred two-pass form, to the certified digits of NIST StRD Norris.
 * rSquared is 1 − Σ(residual)²/Σ(y − ȳ)², and 1 when all y are equal, since nothing is left unexplained.
 *
 * @throws RangeError for fewer than three points, unequal lengths, a value that is not finite, or x that do not vary
 */
export function linearRegression(x: readonly number[], y: readonly number[]): LinearFit {
  requireNumbers('x', x, 3)
  requireNumbers('y', y, 3)
  requireEqualLength('x', x, 'y', y)
  const n = x.length
  const xMean = meanOf(x)
  const yMean = meanOf(y)
  const yAt = (i: number) => y[i] ?? 0
  const xSquares = squaresAround(x, xMean)
  if (xSquares === 0) throw new RangeError('x must vary: a line through one x does not exist')
  let products = 0
  x.forEach((value, i) => {
    products += (value - xMean) * (yAt(i) - yMean)
  })
  const slope = products / xSquares
  let residualSquares = 0
  x.forEach((value, i) => {
    const residual = yAt(i) - yMean - slope * (value - xMean)
    residualSquares += residual * residual
  })
  const ySquares = squaresAround(y, yMean)
  const residualSd = Math.sqrt(residualSquares / (n - 2))
  return {
    intercept: yMean - slope * xMean,
    slope,
    interceptSd: residualSd * Math.sqrt(1 / n + (xMean * xMean) / xSquares),
    slopeSd: residualSd / Math.sqrt(xSquares),
    residualSd,
    rSquared: ySquares === 0 ? 1 : 1 - residualSquares / ySquares,
  }
}

/** A line through the origin fitted by least squares; slopeSd is a standard error, residualSd has divisor n − 1. */
export type LineThroughOrigin = {
  slope: number
  slopeSd: number
  residualSd: number
  /** 1 − Σ(residual)²/Σy²: of y itself, not of its spread; not to be compared with that of another kind of line. */
  rSquaredUncentred: number
}

/**
 * Least squares line y = slope·x, where x of 0 can only give y of 0: to the certified digits of NIST StRD NoInt2.
 *
 * @throws RangeError for fewer than two points, unequal lengths, a value that is not finite, or all x or all y 0
 */
export function linearRegressionThroughOrigin(x: readonly number[], y: readonly number[]): LineThroughOrigin {
  requireNumbers('x', x, 2)
  requireNumbers('y', y, 2)
  requireEqualLength('x', x, 'y', y)
  const yAt = (i: number) => y[i] ?? 0
  const xSquares = x.reduce((sum, value) => sum + value * value, 0)
  const ySquares = y.reduce((sum, value) => sum + value * value, 0)
  if (xSquares === 0) throw new RangeError('x must not all be 0: that says nothing about a slope')
  if (ySquares === 0) throw new RangeError('y must not all be 0: there is nothing to explain')
  const slope = x.reduce((sum, value, i) => sum + value * yAt(i), 0) / xSquares
  const residualSquares = x.reduce((sum, value, i) => sum + (yAt(i) - slope * value) ** 2, 0)
  const residualSd = Math.sqrt(residualSquares / (x.length - 1))
  return {
    slope,
    slopeSd: residualSd / Math.sqrt(xSquares),
    residualSd,
    rSquaredUncentred: 1 - residualSquares / ySquares,
  }
}

/** One-way analysis of variance: sums of squares, degrees of freedom, mean squares, F and its upper-tail p. */
export type OneWayAnova = {
  ssBetween: number
  ssWithin: number
  dfBetween: number
  dfWithin: number
  msBetween: number
  msWithin: number
  f: number
  p: number
}

/**
 * One-way analysis of variance over groups of any sizes. Deviations are taken from the first value, exactly, before
 * anything is summed, which holds the certified digits of NIST StRD SiRstv and AtmWtAg. On dose give log10.
 *
 * @throws RangeError for fewer than two groups, an empty group, a value that is not finite, no group with two values,
 *   or groups that do not vary inside (F does not exist)
 */
export function oneWayAnova(groups: readonly (readonly number[])[]): OneWayAnova {
  if (groups.length < 2) throw new RangeError(`groups must hold at least two groups, not ${groups.length}`)
  groups.forEach((group, i) => requireNumbers(`groups[${i}]`, group))
  const origin = groups[0]?.[0] ?? 0
  const shifted = groups.map((group) => group.map((value) => value - origin))
  const all = shifted.flat()
  const dfBetween = groups.length - 1
  const dfWithin = all.length - groups.length
  if (dfWithin < 1) throw new RangeError('groups must hold at least one group of two values')
  const grandMean = meanOf(all)
  let ssBetween = 0
  let ssWithin = 0
  for (const group of shifted) {
    const groupMean = meanOf(group)
    ssBetween += group.length * (groupMean - grandMean) ** 2
    ssWithin += squaresAround(group, groupMean)
  }
  if (ssWithin === 0) throw new RangeError('groups must vary inside: without that F does not exist')
  const msBetween = ssBetween / dfBetween
  const msWithin = ssWithin / dfWithin
  const f = msBetween / msWithin
  // The upper tail of F is the lower tail of 1/F with the degrees of freedom changed round: no digits cancel.
  const p = f === 0 ? 1 : fCdf(1 / f, dfWithin, dfBetween)
  return { ssBetween, ssWithin, dfBetween, dfWithin, msBetween, msWithin, f, p }
}

/** The value farthest from the mean, how far it is in standard deviations, and what that may be at `alpha`. */
export type GrubbsResult = {
  index: number
  value: number
  g: number
  /** Critical G when the farthest value may lie on either side; `isOutlier` uses it. */
  criticalTwoSided: number
  /** Critical G when only one side was in question beforehand. */
  criticalOneSided: number
  isOutlier: boolean
}

/**
 * Grubbs' test for one outlier: G = max|x − m|/s against (n − 1)/√n · √(t²/(n − 2 + t²)), t the upper α/2n (two-sided)
 * or α/n (one-sided) quantile with n − 2 degrees of freedom. NIST/SEMATECH e-Handbook 1.3.5.17.1. Values that do not
 * vary have no outlier.
 *
 * @throws RangeError for fewer than three values, one that is not finite, or alpha outside (0, 1)
 */
export function grubbsTest(values: readonly number[], alpha: number): GrubbsResult {
  requireNumbers('values', values, 3)
  requireProbability('alpha', alpha)
  const n = values.length
  const centre = meanOf(values)
  const sd = sampleSd(values)
  let index = 0
  values.forEach((value, i) => {
    if (Math.abs(value - centre) > Math.abs((values[index] ?? centre) - centre)) index = i
  })
  const value = values[index] ?? centre
  const g = sd === 0 ? 0 : Math.abs(value - centre) / sd
  const critical = (tail: number) => {
    const t = tQuantile(1 - tail, n - 2)
    return ((n - 1) / Math.sqrt(n)) * Math.sqrt((t * t) / (n - 2 + t * t))
  }
  const criticalTwoSided = critical(alpha / (2 * n))
  return {
    index,
    value,
    g,
    criticalTwoSided,
    criticalOneSided: critical(alpha / n),
    isOutlier: g > criticalTwoSided,
  }
}

export { nonlinearLeastSquares } from './nonlinear-fit'
export type { NonlinearFit, NonlinearFitInput } from './nonlinear-fit'
