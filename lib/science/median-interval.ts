import { requireFinite, requireProbability } from './domain'
import type { Estimate } from './estimate'
import { USUAL_CONFIDENCE } from './estimate'

/**
 * The median with the interval that the sign test gives: the k-th smallest to the k-th largest value, k the largest for
 * which 2·P(X < k) ≤ 1 − confidence, X binomial(n, ½). It asks nothing of the values' distribution (Conover, Practical
 * Nonparametric Statistics, "confidence interval for a quantile"). Null when no two of the values are that sure: with
 * n values at most 1 − 2^(1 − n) can be had, so 5 give 93.75 %.
 *
 * @throws RangeError for a value that is not finite, no values, or a confidence outside (0, 1)
 */
export function medianInterval(
  values: readonly number[],
  confidence: number = USUAL_CONFIDENCE,
): Estimate | null {
  const tail = (1 - requireProbability('confidence', confidence)) / 2
  if (values.length === 0) throw new RangeError('values must hold at least one number')
  const sorted = values.map((value, i) => requireFinite(`values[${i}]`, value)).sort((a, b) => a - b)
  const rank = largestRank(sorted.length, tail)
  const low = sorted[rank - 1]
  const high = sorted[sorted.length - rank]
  if (low === undefined || high === undefined) return null
  return { value: medianOf(sorted), low, high }
}

/** The largest k with P(X < k) ≤ tail, X binomial(n, ½); 0 when there is none. */
function largestRank(n: number, tail: number): number {
  let term = 0.5 ** n
  let below = 0
  for (let k = 0; k <= n; k += 1) {
    below += term
    if (below > tail) return k
    term *= (n - k) / (k + 1)
  }
  return n
}

function medianOf(sorted: readonly number[]): number {
  const middle = sorted.length >> 1
  const upper = sorted[middle] ?? NaN
  return sorted.length % 2 === 1 ? upper : ((sorted[middle - 1] ?? NaN) + upper) / 2
}
