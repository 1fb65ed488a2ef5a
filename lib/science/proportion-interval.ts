import { requireProbability, requireWhole } from './domain'
import type { Estimate } from './estimate'
import { USUAL_CONFIDENCE } from './estimate'
import { fQuantile } from './statistics'

/**
 * A share k/n with its exact interval (Clopper and Pearson, Biometrika 26 (1934) 404), written with F quantiles: low =
 * k/(k + (n − k + 1)·F(1 − α/2; 2(n − k + 1), 2k)), high the same for the other outcome. It covers at least what it
 * says, whatever the true share.
 *
 * @param k how many of the n, a whole number from 0 to n
 * @param n how many in all, a whole number from 1
 * @throws RangeError outside the domain
 */
export function proportionInterval(k: number, n: number, confidence: number = USUAL_CONFIDENCE): Estimate {
  requireWhole('n', n, 1)
  if (requireWhole('k', k, 0) > n) throw new RangeError(`k must be at most n: ${k} against ${n}`)
  const tail = (1 - requireProbability('confidence', confidence)) / 2
  const lowOf = (count: number) =>
    count === 0 ? 0 : count / (count + (n - count + 1) * fQuantile(1 - tail, 2 * (n - count + 1), 2 * count))
  return { value: k / n, low: lowOf(k), high: 1 - lowOf(n - k) }
}
