import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { logDoseSummary } from '../../lib/science/log-dose-summary'
import { expectRangeError, expectWithin, notNumbers, propertyRun } from './published-checks'
import { normalValues, take } from './random-samples'

const doses = fc.array(fc.double({ min: 0.01, max: 500, noNaN: true }), { minLength: 2, maxLength: 40 })

describe('doses in common', () => {
  it('1, 10, 100 min: geometric mean 10, one sd a factor of 10 (closed form)', () => {
    const summary = logDoseSummary([1, 10, 100])
    expectWithin(summary.geometricMeanMin, 10, 1e-12)
    expectWithin(summary.sdLog10 ?? NaN, 1, 1e-12)
    expectWithin(summary.spreadPercent?.value ?? NaN, 900, 1e-9)
    // CV of a log-normal: √(exp(σ²) − 1), σ = ln 10.
    expectWithin(summary.cvPercent?.value ?? NaN, 100 * Math.sqrt(Math.exp(Math.LN10 ** 2) - 1), 1e-7)
    // Student's t at 97.5 % with 2 degrees of freedom is 4.3027; chi-square there 0.0506 and 7.3778 (any table).
    const reach = 4.302_652_73 / Math.sqrt(3)
    expectWithin(Math.log10(summary.geometricMeanIntervalMin?.low ?? NaN), 1 - reach, 1e-7)
    expectWithin(Math.log10(summary.geometricMeanIntervalMin?.high ?? NaN), 1 + reach, 1e-7)
    const low = Math.sqrt(2 / 7.377_758_91)
    expectWithin(summary.spreadPercent?.low ?? NaN, 100 * (10 ** low - 1), 1e-4)
  })
  it('one dose has a mean and nothing else, equal doses have no spread', () => {
    expect(logDoseSummary([10])).toEqual({
      n: 1,
      meanLog10: 1,
      sdLog10: null,
      geometricMeanMin: 10,
      geometricMeanIntervalMin: null,
      spreadPercent: null,
      cvPercent: null,
    })
    const equal = logDoseSummary([20, 20, 20])
    expect(equal.cvPercent).toEqual({ value: 0, low: 0, high: 0 })
    expectWithin(equal.geometricMeanIntervalMin?.high ?? NaN, 20, 1e-9)
  })
  it('a small spread and the CV are nearly the same: 7 % of dose a degree', () => {
    const summary = logDoseSummary([93.5, 100, 107])
    expectWithin(summary.spreadPercent?.value ?? NaN, 7, 0.1)
    expectWithin(summary.cvPercent?.value ?? NaN, 6.76, 0.05)
  })
  it('the intervals hold the truth as often as they say', () => {
    const normal = normalValues(7)
    let meanHeld = 0
    let spreadHeld = 0
    for (let trial = 0; trial < 600; trial += 1) {
      const { geometricMeanIntervalMin: mean, spreadPercent: spread } = logDoseSummary(
        take(6, normal).map((value) => 10 ** (1.3 + 0.08 * value)),
      )
      const truth = 10 ** 1.3
      if (mean && mean.low <= truth && truth <= mean.high) meanHeld += 1
      const truePercent = 100 * (10 ** 0.08 - 1)
      if (spread && spread.low <= truePercent && truePercent <= spread.high) spreadHeld += 1
    }
    // 95 % of 600 is 570, standard deviation 5.3: within four of them.
    for (const held of [meanHeld, spreadHeld]) expectWithin(held, 570, 22)
  })
})

describe('laws of the summary', () => {
  it('law: doses in another unit move the mean alone; the spread and the CV are those of the ratios', () => {
    fc.assert(
      fc.property(doses, fc.constantFrom(0.1, 3, 60), (dosesMin, factor) => {
        const summary = logDoseSummary(dosesMin)
        const scaled = logDoseSummary(dosesMin.map((dose) => factor * dose))
        expectWithin(
          scaled.geometricMeanMin,
          factor * summary.geometricMeanMin,
          1e-9 * scaled.geometricMeanMin,
        )
        expectWithin(scaled.sdLog10 ?? NaN, summary.sdLog10 ?? NaN, 1e-9)
      }),
      propertyRun,
    )
  })
  it('law: the geometric mean lies between the ends and not above the arithmetic mean; intervals hold their value', () => {
    fc.assert(
      fc.property(doses, (dosesMin) => {
        const { geometricMeanMin, geometricMeanIntervalMin, spreadPercent, cvPercent } =
          logDoseSummary(dosesMin)
        const slack = 1 + 1e-12
        expect(geometricMeanMin * slack).toBeGreaterThanOrEqual(Math.min(...dosesMin))
        const arithmetic = dosesMin.reduce((sum, dose) => sum + dose, 0) / dosesMin.length
        expect(geometricMeanMin).toBeLessThanOrEqual(arithmetic * slack)
        expect(geometricMeanIntervalMin?.low ?? NaN).toBeLessThanOrEqual(geometricMeanMin * slack)
        expect((geometricMeanIntervalMin?.high ?? NaN) * slack).toBeGreaterThanOrEqual(geometricMeanMin)
        for (const estimate of [spreadPercent, cvPercent]) {
          expect(estimate?.low ?? NaN).toBeLessThanOrEqual(estimate?.value ?? NaN)
          expect(estimate?.value ?? NaN).toBeLessThanOrEqual(estimate?.high ?? NaN)
        }
      }),
      propertyRun,
    )
  })
})

it('names a dose without a logarithm, none at all, and a confidence outside its domain', () => {
  expectRangeError('dosesMin', () => logDoseSummary([]))
  for (const value of [...notNumbers, 0, -1])
    expectRangeError('dosesMin[1]', () => logDoseSummary([1, value]))
  for (const value of [...notNumbers, 0, 1])
    expectRangeError('confidence', () => logDoseSummary([1, 2], value))
})
