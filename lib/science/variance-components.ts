import { requireProbability } from './domain'
import type { Estimate } from './estimate'
import { USUAL_CONFIDENCE } from './estimate'
import type { OneWayAnova } from './statistics'
import { chiSquareQuantile, fQuantile, oneWayAnova } from './statistics'

/** Variances between and within groups, in the square of the values' unit, and the share that lies between. */
export type VarianceComponents = {
  between: number
  within: number
  betweenShare: number
  effectiveGroupSize: number
}

function componentsOf(groups: readonly (readonly number[])[], anova: OneWayAnova): VarianceComponents {
  const { msBetween, msWithin, dfBetween } = anova
  const total = groups.reduce((sum, group) => sum + group.length, 0)
  const squares = groups.reduce((sum, group) => sum + group.length * group.length, 0)
  const effectiveGroupSize = (total - squares / total) / dfBetween
  const between = Math.max(0, (msBetween - msWithin) / effectiveGroupSize)
  return { between, within: msWithin, betweenShare: between / (between + msWithin), effectiveGroupSize }
}

/**
 * Variance components of a one-way random model: within = MSW, between = max(0, (MSB − MSW)/n₀), where n₀ =
 * (N − Σn²/N)/(k − 1) is the group size, or its like for unequal groups. Montgomery, Design and Analysis of Experiments.
 *
 * @throws RangeError as `oneWayAnova`
 */
export function varianceComponents(groups: readonly (readonly number[])[]): VarianceComponents {
  return componentsOf(groups, oneWayAnova(groups))
}

/** Variance components with their intervals; `intraclass` is the intraclass correlation, the share between groups. */
export type VarianceComponentEstimates = {
  between: Estimate
  within: Estimate
  intraclass: Estimate
  effectiveGroupSize: number
}

/**
 * Variance components with confidence intervals. Within: SSW/χ². Intraclass correlation: (F/Fq − 1)/(F/Fq − 1 + n₀) for
 * the two quantiles Fq of F(k − 1, N − k). Both exact for normal values and equal groups (Montgomery, Design and
 * Analysis of Experiments, random-effects chapter). Between: SSB·(1 − Fq/F)/(n₀·χ²) (Williams, Biometrika 49 (1962)
 * 278; it covers at least 2·confidence − 1 and in practice about `confidence`). With unequal groups n₀ makes all but the
 * first an approximation. Ends below 0 are 0, since a variance is not below it.
 *
 * @throws RangeError as `oneWayAnova`, or for a confidence outside (0, 1)
 */
export function varianceComponentEstimates(
  groups: readonly (readonly number[])[],
  confidence: number = USUAL_CONFIDENCE,
): VarianceComponentEstimates {
  const tail = (1 - requireProbability('confidence', confidence)) / 2
  const anova = oneWayAnova(groups)
  const { ssBetween, ssWithin, dfBetween, dfWithin, f } = anova
  const { between, within, betweenShare, effectiveGroupSize: size } = componentsOf(groups, anova)
  const betweenEnd = (p: number) =>
    Math.max(
      0,
      (ssBetween - dfBetween * anova.msWithin * fQuantile(p, dfBetween, dfWithin)) /
        (size * chiSquareQuantile(p, dfBetween)),
    )
  const shareEnd = (p: number) => {
    const ratio = f / fQuantile(p, dfBetween, dfWithin) - 1
    return Math.max(0, ratio / (ratio + size))
  }
  return {
    between: { value: between, low: betweenEnd(1 - tail), high: betweenEnd(tail) },
    within: {
      value: within,
      low: ssWithin / chiSquareQuantile(1 - tail, dfWithin),
      high: ssWithin / chiSquareQuantile(tail, dfWithin),
    },
    intraclass: { value: betweenShare, low: shareEnd(1 - tail), high: shareEnd(tail) },
    effectiveGroupSize: size,
  }
}
