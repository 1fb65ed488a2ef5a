import { requireNumbers, requirePositive, requireProbability } from './domain'
import { ratioFromLog10 } from './dose-ratio'
import type { Estimate } from './estimate'
import { USUAL_CONFIDENCE } from './estimate'
import { chiSquareQuantile, mean, sampleSd, tQuantile } from './statistics'

/** What several doses have in common, computed on log10 dose, because dose is log-normal in practice. */
export type LogDoseSummary = {
  n: number
  /** Mean and sample standard deviation of log10 dose (dose in min); no sd for one dose. */
  meanLog10: number
  sdLog10: number | null
  /** 10^mean, min. */
  geometricMeanMin: number
  /** The rest needs two doses, and is null for one. */
  geometricMeanIntervalMin: { low: number; high: number } | null
  /** One sd of log10 upward, in per cent of the dose: 100·(10^sd − 1). Downward it is the smaller 100·(1 − 10^−sd). */
  spreadPercent: Estimate | null
  /** Coefficient of variation of a log-normal dose: 100·√(exp((sd·ln 10)²) − 1). */
  cvPercent: Estimate | null
}

/**
 * Geometric mean and spread of doses with confidence intervals: of the mean by Student's t, mean ± t·sd/√n; of the sd by
 * chi-square, sd·√((n − 1)/χ²); both on log10 dose and then taken back, so the intervals are not symmetric. The
 * coefficient of variation is that of the log-normal distribution (Johnson and Kotz 1970).
 *
 * @param dosesMin doses above 0, min; a dose of 0 has no logarithm and is the caller's to leave out and to say so
 * @throws RangeError for no doses, one that is not finite or not above 0, or a confidence outside (0, 1)
 */
export function logDoseSummary(
  dosesMin: readonly number[],
  confidence: number = USUAL_CONFIDENCE,
): LogDoseSummary {
  requireNumbers('dosesMin', dosesMin)
  requireProbability('confidence', confidence)
  const logs = dosesMin.map((doseMin, i) => Math.log10(requirePositive(`dosesMin[${i}]`, doseMin)))
  const n = logs.length
  const meanLog10 = mean(logs)
  const one = { n, meanLog10, geometricMeanMin: ratioFromLog10(meanLog10) }
  if (n === 1)
    return { ...one, sdLog10: null, geometricMeanIntervalMin: null, spreadPercent: null, cvPercent: null }
  const sdLog10 = sampleSd(logs)
  const tail = (1 - confidence) / 2
  const reach = (tQuantile(1 - tail, n - 1) * sdLog10) / Math.sqrt(n)
  const sd: Estimate = {
    value: sdLog10,
    low: sdLog10 * Math.sqrt((n - 1) / chiSquareQuantile(1 - tail, n - 1)),
    high: sdLog10 * Math.sqrt((n - 1) / chiSquareQuantile(tail, n - 1)),
  }
  return {
    ...one,
    sdLog10,
    geometricMeanIntervalMin: {
      low: ratioFromLog10(meanLog10 - reach),
      high: ratioFromLog10(meanLog10 + reach),
    },
    spreadPercent: mapEstimate(sd, (value) => 100 * Math.expm1(value * Math.LN10)),
    cvPercent: mapEstimate(sd, (value) => 100 * Math.sqrt(Math.expm1((value * Math.LN10) ** 2))),
  }
}

/** An estimate through a rising function: its ends go along. */
function mapEstimate(estimate: Estimate, rising: (value: number) => number): Estimate {
  return { value: rising(estimate.value), low: rising(estimate.low), high: rising(estimate.high) }
}
