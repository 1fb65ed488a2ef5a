import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import * as z from 'zod'
import { mean, oneWayAnova, sampleSd } from '../../lib/science/statistics'
import { twoSampleT } from '../../lib/science/two-sample'
import {
  expectClose,
  expectRangeError,
  expectWithin,
  notNumbers,
  propertyRun,
  testPublished,
} from './published-checks'

const summaryOf = (values: readonly number[]) => ({
  n: values.length,
  mean: mean(values),
  sd: sampleSd(values),
})

describe('two means', () => {
  testPublished('stats.t_two_sample_summary', (check) => {
    const inputs = z
      .object({
        n1: z.number(),
        mean1: z.number(),
        sd1: z.number(),
        n2: z.number(),
        mean2: z.number(),
        sd2: z.number(),
        equal_variance: z.boolean(),
      })
      .parse(check.inputs)
    const expected = z.object({ t: z.number(), df: z.number(), pooled_sd: z.number() }).parse(check.expected)
    const result = twoSampleT(
      { n: inputs.n1, mean: inputs.mean1, sd: inputs.sd1 },
      { n: inputs.n2, mean: inputs.mean2, sd: inputs.sd2 },
      { hasEqualVariances: inputs.equal_variance },
    )
    expectClose(check, result.t, expected.t)
    expect(result.df).toBe(expected.df)
    expectClose(check, result.sd, expected.pooled_sd)
    expect(result.p).toBeGreaterThan(0)
    expect(result.p).toBeLessThan(1e-25)
  })
  it('equal groups have no difference and a p of 1; the interval is t·s·√(2/n) on either side (closed form)', () => {
    const group = { n: 5, mean: 2, sd: 1 }
    const result = twoSampleT(group, group, { hasEqualVariances: true })
    expect([result.t, result.p, result.df]).toEqual([0, 1, 8])
    // t at 97.5 % with 8 degrees of freedom is 2.3060 (any table).
    expectWithin(result.difference.high, 2.306_004_13 * Math.sqrt(2 / 5), 1e-7)
    expectWithin(result.difference.low, -result.difference.high, 1e-12)
  })
  it('Welch with one group that does not vary has the other group’s degrees of freedom (closed form)', () => {
    const result = twoSampleT(
      { n: 6, mean: 3, sd: 2 },
      { n: 9, mean: 1, sd: 0 },
      { hasEqualVariances: false },
    )
    expectWithin(result.df, 5, 1e-9)
    expectWithin(result.t, 2 / (2 / Math.sqrt(6)), 1e-12)
  })
})

describe('laws of two means', () => {
  const group = fc
    .array(fc.double({ min: -100, max: 100, noNaN: true }), { minLength: 3, maxLength: 20 })
    .filter((values) => sampleSd(values) > 0.1)
  it('law: with pooled variance t² and p are those of the analysis of variance', () => {
    fc.assert(
      fc.property(group, group, (a, b) => {
        const { t, p } = twoSampleT(summaryOf(a), summaryOf(b), { hasEqualVariances: true })
        const anova = oneWayAnova([a, b])
        expectWithin(t * t, anova.f, 1e-9 * Math.max(1, anova.f))
        expectWithin(p, anova.p, 1e-7)
      }),
      propertyRun,
    )
  })
  it('law: the interval leaves 0 out exactly when p is below 1 − confidence; changed round, signs turn', () => {
    fc.assert(
      fc.property(group, group, fc.boolean(), (a, b, hasEqualVariances) => {
        const { difference, t, p, df } = twoSampleT(summaryOf(a), summaryOf(b), { hasEqualVariances })
        if (Math.abs(p - 0.05) > 1e-6) expect(difference.low > 0 || difference.high < 0).toBe(p < 0.05)
        const turned = twoSampleT(summaryOf(b), summaryOf(a), { hasEqualVariances })
        expectWithin(turned.t, -t, 1e-9 * (1 + Math.abs(t)))
        // Satterthwaite: not below the smaller group's degrees of freedom, not above both together.
        expect(df).toBeGreaterThanOrEqual(Math.min(a.length, b.length) - 1 - 1e-9)
        expect(df).toBeLessThanOrEqual(a.length + b.length - 2 + 1e-9)
      }),
      propertyRun,
    )
  })
})

it('names what is outside the domain', () => {
  const good = { n: 5, mean: 1, sd: 1 }
  const equal = { hasEqualVariances: true }
  for (const value of [...notNumbers, 1, 2.5])
    expectRangeError('first.n', () => twoSampleT({ ...good, n: value }, good, equal))
  for (const value of notNumbers)
    expectRangeError('second.mean', () => twoSampleT(good, { ...good, mean: value }, equal))
  for (const value of [...notNumbers, -1])
    expectRangeError('second.sd', () => twoSampleT(good, { ...good, sd: value }, equal))
  expectRangeError('first.sd', () => twoSampleT({ ...good, sd: 0 }, { ...good, sd: 0 }, equal))
  for (const value of [...notNumbers, 0, 1])
    expectRangeError('confidence', () => twoSampleT(good, good, { ...equal, confidence: value }))
})
