import {
  requireFinite,
  requireNotNegative,
  requireNumbers,
  requirePositive,
  requireProbability,
  requireWhole,
} from './domain'
import type { Estimate } from './estimate'
import { chiSquareQuantile, mean } from './statistics'

/** d2 for the moving range of two: mean range of two normal values in units of their standard deviation (ASTM E2587). */
const D2_OF_TWO = 1.128

/** D4 for ranges of two: the upper limit of a range chart in units of the mean range, 1 + 3·d3/d2 (ASTM E2587). */
const D4_OF_TWO = 3.267

/** Limits made from fewer values than this move a good deal with each new one: a chart calls them provisional. */
export const PROVISIONAL_LIMITS_BELOW = 20

/**
 * Individuals and moving range chart: centre = mean, limits = mean ± 3·(mean moving range)/1.128, the moving range
 * being |xᵢ − xᵢ₋₁|. NIST/SEMATECH e-Handbook 6.3.2.2. All in the values' own unit; give doses as log10.
 *
 * @param values in firing order, at least two
 * @throws RangeError for fewer than two values or one that is not finite
 */
export function individualsMovingRange(values: readonly number[]): {
  mean: number
  meanMovingRange: number
  ucl: number
  lcl: number
} {
  requireNumbers('values', values, 2)
  const centre = mean(values)
  const meanMovingRange = mean(rangesOf(values))
  const reach = (3 * meanMovingRange) / D2_OF_TWO
  return { mean: centre, meanMovingRange, ucl: centre + reach, lcl: centre - reach }
}

/** |xᵢ − xᵢ₋₁|, one fewer than the values. */
function rangesOf(values: readonly number[]): number[] {
  return values.slice(1).map((value, i) => Math.abs(value - (values[i] ?? value)))
}

/**
 * The moving range chart beside the individuals: the ranges |xᵢ − xᵢ₋₁| (the first belongs to the second value), their
 * mean as centre and 3.267·mean as upper limit; the lower one is 0. NIST/SEMATECH e-Handbook 6.3.2.2.
 *
 * @throws RangeError for fewer than two values or one that is not finite
 */
export function movingRanges(values: readonly number[]): { ranges: number[]; mean: number; ucl: number } {
  requireNumbers('values', values, 2)
  const ranges = rangesOf(values)
  const centre = mean(ranges)
  return { ranges, mean: centre, ucl: D4_OF_TWO * centre }
}

/**
 * Exponentially weighted moving average: z₀ = target, zᵢ = λ·xᵢ + (1 − λ)·zᵢ₋₁; n + 1 values. NIST/SEMATECH
 * e-Handbook 6.3.2.4.
 *
 * @throws RangeError for no values, a value or target that is not finite, or λ outside (0, 1]
 */
export function ewma(values: readonly number[], options: { lambda: number; target: number }): number[] {
  requireNumbers('values', values)
  const { lambda } = options
  if (!(lambda > 0 && lambda <= 1)) throw new RangeError(`lambda must lie above 0 and up to 1, not ${lambda}`)
  let average = requireFinite('target', options.target)
  const averages = [average]
  for (const value of values) {
    average = lambda * value + (1 - lambda) * average
    averages.push(average)
  }
  return averages
}

/**
 * Limits of an EWMA chart once it has run in: target ± width·sd·√(λ/(2 − λ)). NIST/SEMATECH e-Handbook 6.3.2.4.
 *
 * @param options.width in standard deviations, usually 3
 * @throws RangeError for a target that is not finite, a negative sd or width, or λ outside (0, 1]
 */
export function ewmaLimits(options: { lambda: number; target: number; sd: number; width: number }): {
  ucl: number
  lcl: number
} {
  const { lambda, target, sd, width } = options
  if (!(lambda > 0 && lambda <= 1)) throw new RangeError(`lambda must lie above 0 and up to 1, not ${lambda}`)
  requireFinite('target', target)
  const reach =
    requireNotNegative('width', width) * requireNotNegative('sd', sd) * Math.sqrt(lambda / (2 - lambda))
  return { ucl: target + reach, lcl: target - reach }
}

/**
 * Tabular CUSUM: highᵢ = max(0, highᵢ₋₁ + xᵢ − target − k), lowᵢ = max(0, lowᵢ₋₁ + target − k − xᵢ); both of length n,
 * from 0, never reset after a signal. A sum above `h` is a signal; h does not change the sums. NIST/SEMATECH
 * e-Handbook 6.3.2.3.
 *
 * @param options k and h in the values' own unit
 * @throws RangeError for no values, a value that is not finite, or k or h below 0
 */
export function tabularCusum(
  values: readonly number[],
  options: { target: number; k: number; h: number },
): { high: number[]; low: number[] } {
  requireNumbers('values', values)
  const target = requireFinite('target', options.target)
  const k = requireNotNegative('k', options.k)
  requireNotNegative('h', options.h)
  let highSum = 0
  let lowSum = 0
  const high: number[] = []
  const low: number[] = []
  for (const value of values) {
    highSum = Math.max(0, highSum + value - target - k)
    lowSum = Math.max(0, lowSum + target - k - value)
    high.push(highSum)
    low.push(lowSum)
  }
  return { high, low }
}

/** Nelson's tests by their number. */
export type NelsonRule = 1 | 2 | 3 | 4 | 5 | 6 | 7 | 8

/** What each rule says, for a chart's words. Nelson, Journal of Quality Technology 16 (1984) 237. */
export const NELSON_RULE_WORDS: Readonly<Record<NelsonRule, string>> = {
  1: 'one point beyond 3 sigma',
  2: 'nine points in a row on one side of the centre',
  3: 'six points in a row, each higher (or each lower) than the one before',
  4: 'fourteen points in a row, up and down by turns',
  5: 'two of three points beyond 2 sigma on one side',
  6: 'four of five points beyond 1 sigma on one side',
  7: 'fifteen points in a row within 1 sigma of the centre',
  8: 'eight points in a row beyond 1 sigma, on either side',
}

/** Rules that a chart watches unless the site says otherwise; each further one brings false alarms of its own. */
export const NELSON_RULES_ON: readonly NelsonRule[] = [1, 2]

function indicesWhere(
  count: number,
  window: number,
  isMet: (first: number, last: number) => boolean,
): number[] {
  const indices: number[] = []
  for (let last = window - 1; last < count; last += 1) {
    if (isMet(last - window + 1, last)) indices.push(last)
  }
  return indices
}

/**
 * Nelson's eight tests on standardised values: for each rule every 0-based index at which the last n points, a full
 * window, satisfy it, also while a run goes on, and for rules 5 and 6 when the point itself is inside. Comparisons are
 * strict: a point on a line or on the centre is on no side. Nelson, Journal of Quality Technology 16 (1984) 237.
 *
 * @param z (value − centre)/sigma, in firing order
 * @throws RangeError for no values or one that is not finite
 */
export function nelsonRules(z: readonly number[]): Record<NelsonRule, number[]> {
  requireNumbers('z', z)
  const at = (i: number) => z[i] ?? 0
  const count = (first: number, last: number, isCounted: (value: number, i: number) => boolean) => {
    let counted = 0
    for (let i = first; i <= last; i += 1) if (isCounted(at(i), i)) counted += 1
    return counted
  }
  const reaches = (window: number, needed: number, isHigh: (value: number) => boolean) =>
    indicesWhere(
      z.length,
      window,
      (first, last) =>
        count(first, last, isHigh) >= needed || count(first, last, (value) => isHigh(-value)) >= needed,
    )
  const all = (window: number, isCounted: (value: number) => boolean) =>
    indicesWhere(z.length, window, (first, last) => count(first, last, isCounted) === window)
  const riseAt = (i: number) => at(i) - at(i - 1)

  return {
    1: all(1, (value) => Math.abs(value) > 3),
    2: reaches(9, 9, (value) => value > 0),
    3: indicesWhere(
      z.length,
      6,
      (first, last) =>
        count(first + 1, last, (_, i) => riseAt(i) > 0) === 5 ||
        count(first + 1, last, (_, i) => riseAt(i) < 0) === 5,
    ),
    4: indicesWhere(
      z.length,
      14,
      (first, last) =>
        count(first + 2, last, (_, i) => Math.sign(riseAt(i)) * Math.sign(riseAt(i - 1)) < 0) === 12,
    ),
    5: reaches(3, 2, (value) => value > 2),
    6: reaches(5, 4, (value) => value > 1),
    7: all(15, (value) => Math.abs(value) < 1),
    8: all(8, (value) => Math.abs(value) > 1),
  }
}

/** Specification limits and what was measured against them, all in one unit (doses as log10). */
export type CapabilityInput = { usl: number; lsl: number; mean: number; sd: number }

function requireCapability(input: CapabilityInput): void {
  requireFinite('usl', input.usl)
  requireFinite('lsl', input.lsl)
  if (input.usl <= input.lsl)
    throw new RangeError(`usl must lie above lsl: ${input.usl} against ${input.lsl}`)
  requireFinite('mean', input.mean)
  requirePositive('sd', input.sd)
}

/**
 * Process capability: Cp = (USL − LSL)/6s, Cpu = (USL − mean)/3s, Cpl = (mean − LSL)/3s, Cpk = the smaller of the two.
 * NIST/SEMATECH e-Handbook 6.1.6.
 *
 * @throws RangeError for a value that is not finite, usl not above lsl, or sd not above 0
 */
export function processCapability(input: CapabilityInput): {
  cp: number
  cpk: number
  cpu: number
  cpl: number
} {
  requireCapability(input)
  const { usl, lsl, mean: centre, sd } = input
  const cpu = (usl - centre) / (3 * sd)
  const cpl = (centre - lsl) / (3 * sd)
  return { cp: (usl - lsl) / (6 * sd), cpk: Math.min(cpu, cpl), cpu, cpl }
}

/** Below this many firings a capability says too little, and the product refuses to show one. */
export const CAPABILITY_LEAST_COUNT = 30

/**
 * Cp and Cpk with confidence intervals for normal data. Cp: Cp·√(χ²(α/2; n − 1)/(n − 1)) to the same with 1 − α/2
 * (Montgomery, Statistical Quality Control, chapter 8). Cpk: Cpk ± z·√(1/(9n) + Cpk²/(2(n − 1))) (Bissell, Applied
 * Statistics 39 (1990) 331; from memory). Ask `CAPABILITY_LEAST_COUNT` first whether to show it.
 *
 * @param input with `n`, the count behind `sd`, at least 2, and `alpha`, 1 − confidence
 * @throws RangeError as `processCapability`, for n below 2 or not whole, or alpha outside (0, 1)
 */
export function capabilityInterval(input: CapabilityInput & { n: number; alpha: number }): {
  cp: Estimate
  cpk: Estimate
} {
  const { cp, cpk } = processCapability(input)
  const n = requireWhole('n', input.n, 2)
  const alpha = requireProbability('alpha', input.alpha)
  const df = n - 1
  const normalQuantile = Math.sqrt(chiSquareQuantile(1 - alpha, 1))
  const reach = normalQuantile * Math.sqrt(1 / (9 * n) + (cpk * cpk) / (2 * df))
  return {
    cp: {
      value: cp,
      low: cp * Math.sqrt(chiSquareQuantile(alpha / 2, df) / df),
      high: cp * Math.sqrt(chiSquareQuantile(1 - alpha / 2, df) / df),
    },
    cpk: { value: cpk, low: cpk - reach, high: cpk + reach },
  }
}
