import fCdf from '@stdlib/stats-base-dists-f-cdf'
import { requireFinite, requireNotNegative, requireProbability, requireWhole } from './domain'
import type { Estimate } from './estimate'
import { USUAL_CONFIDENCE } from './estimate'
import { tQuantile } from './statistics'

/** A group by its count, mean and sample standard deviation. */
export type GroupSummary = { n: number; mean: number; sd: number }

export type TwoSampleResult = {
  /** First mean minus second, with its interval. */
  difference: Estimate
  t: number
  df: number
  /** Standard deviation that t was made with: pooled, or √(s₁² + s₂²) when the variances may differ. */
  sd: number
  /** Two-sided. */
  p: number
}

/**
 * Two means compared by Student's t with a pooled variance, or by Welch's when the variances may differ (degrees of
 * freedom after Satterthwaite). NIST/SEMATECH e-Handbook 1.3.5.3. On dose give log10.
 *
 * @throws RangeError for a count below 2, a mean that is not finite, a negative sd, two groups without spread, or a
 *   confidence outside (0, 1)
 */
export function twoSampleT(
  first: GroupSummary,
  second: GroupSummary,
  options: { hasEqualVariances: boolean; confidence?: number },
): TwoSampleResult {
  requireGroup('first', first)
  requireGroup('second', second)
  const confidence = requireProbability('confidence', options.confidence ?? USUAL_CONFIDENCE)
  if (first.sd === 0 && second.sd === 0) throw new RangeError('first.sd and second.sd must not both be 0')
  const { standardError, df, sd } = options.hasEqualVariances ? pooled(first, second) : welch(first, second)
  const value = first.mean - second.mean
  const t = value / standardError
  const reach = tQuantile(1 - (1 - confidence) / 2, df) * standardError
  // The tail of t² is the lower tail of its inverse with the degrees of freedom changed round: no digits cancel.
  const p = t === 0 ? 1 : fCdf(1 / (t * t), df, 1)
  return { difference: { value, low: value - reach, high: value + reach }, t, df, sd, p }
}

type Spread = { standardError: number; df: number; sd: number }

function pooled(first: GroupSummary, second: GroupSummary): Spread {
  const df = first.n + second.n - 2
  const sd = Math.sqrt(((first.n - 1) * first.sd ** 2 + (second.n - 1) * second.sd ** 2) / df)
  return { standardError: sd * Math.sqrt(1 / first.n + 1 / second.n), df, sd }
}

function welch(first: GroupSummary, second: GroupSummary): Spread {
  const a = first.sd ** 2 / first.n
  const b = second.sd ** 2 / second.n
  const df = (a + b) ** 2 / (a ** 2 / (first.n - 1) + b ** 2 / (second.n - 1))
  return { standardError: Math.sqrt(a + b), df, sd: Math.hypot(first.sd, second.sd) }
}

function requireGroup(name: string, group: GroupSummary): void {
  requireWhole(`${name}.n`, group.n, 2)
  requireFinite(`${name}.mean`, group.mean)
  requireNotNegative(`${name}.sd`, group.sd)
}
