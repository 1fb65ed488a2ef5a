import erfc from '@stdlib/math-base-special-erfc'
import jstat from 'jstat'
import * as simple from 'simple-statistics'
import { describe, expect, it } from 'vitest'
import { permutationTest } from '../../lib/science/permutation'
import { proportionInterval } from '../../lib/science/proportion-interval'
import { seededRandom } from '../../lib/science/seeded-random'
import {
  chiSquareQuantile,
  fQuantile,
  lag1Autocorrelation,
  linearRegression,
  mean,
  oneWayAnova,
  sampleSd,
  tQuantile,
} from '../../lib/science/statistics'
import { twoSampleT } from '../../lib/science/two-sample'
import { normalValues, take } from './random-samples'

/**
 * Our statistics beside two general packages (simple-statistics 7.12.1, jstat 1.9.6) on random data from a fixed seed.
 * Where they agree the bound is rounding. Where they do not, the test says by how much and why, and holds that it is so
 * still: an agreement that grew better would leave a false sentence here.
 */
const { jStat } = jstat
const SEED = 20_260_401
const next = seededRandom(SEED)
const normal = normalValues(SEED + 1)
const between = (low: number, high: number) => low + (high - low) * next()
const whole = (low: number, high: number) => Math.floor(between(low, high + 1))

type Sample = { x: number[]; y: number[]; groups: number[][]; p: number; df1: number; df2: number }

const samples: Sample[] = Array.from({ length: 300 }, () => {
  const offset = whole(0, 1000)
  const x = take(whole(5, 65), () => offset + normal())
  return {
    x,
    y: x.map((value) => 3 + 0.5 * value + normal()),
    groups: [0, 1, 2].map((g) => take(whole(4, 14), () => normal() + 0.5 * g)),
    p: between(0.001, 0.999),
    df1: whole(1, 200),
    df2: whole(1, 200),
  }
})

/** Largest relative difference over the samples of what they and we say. */
function largest(of: (sample: Sample) => readonly [theirs: number, ours: number]): number {
  return Math.max(
    ...samples.map((sample) => {
      const [theirs, ours] = of(sample)
      return theirs === ours ? 0 : Math.abs(theirs - ours) / Math.max(Math.abs(theirs), Math.abs(ours))
    }),
  )
}

/** Rounding of double precision over sums of this length. */
const ROUNDING = 1e-12

describe('where the packages agree with us to rounding', () => {
  it('mean and sample standard deviation: both packages', () => {
    expect(largest(({ x }) => [simple.mean(x), mean(x)])).toBeLessThan(ROUNDING)
    expect(largest(({ x }) => [jStat.mean(x), mean(x)])).toBeLessThan(ROUNDING)
    expect(largest(({ x }) => [simple.sampleStandardDeviation(x), sampleSd(x)])).toBeLessThan(ROUNDING)
    expect(largest(({ x }) => [jStat.stdev(x, true), sampleSd(x)])).toBeLessThan(ROUNDING)
  })
  it('slope, intercept and r² of a line: simple-statistics', () => {
    const slope = ({ x, y }: Sample) => simple.linearRegression(x.map((value, i) => [value, y[i] ?? NaN])).m
    expect(largest((s) => [slope(s), linearRegression(s.x, s.y).slope])).toBeLessThan(ROUNDING)
    // The intercept is ȳ − slope·x̄: its rounding is that of x̄, hundreds of times larger than it.
    const intercept = ({ x, y }: Sample) =>
      simple.linearRegression(x.map((value, i) => [value, y[i] ?? NaN])).b
    expect(largest((s) => [intercept(s), linearRegression(s.x, s.y).intercept])).toBeLessThan(1e-10)
    expect(
      largest((s) => [simple.sampleCorrelation(s.x, s.y) ** 2, linearRegression(s.x, s.y).rSquared]),
    ).toBeLessThan(1e-10)
  })
  it('standard errors of a line: jstat', () => {
    const ols = ({ x, y }: Sample) =>
      jStat.models.ols(
        y,
        x.map((value) => [1, value]),
      ).t
    expect(largest((s) => [ols(s).se[0] ?? NaN, linearRegression(s.x, s.y).interceptSd])).toBeLessThan(1e-11)
    expect(largest((s) => [ols(s).se[1] ?? NaN, linearRegression(s.x, s.y).slopeSd])).toBeLessThan(ROUNDING)
    expect(largest((s) => [ols(s).sigmaHat, linearRegression(s.x, s.y).residualSd])).toBeLessThan(ROUNDING)
  })
  it('F of an analysis of variance: jstat; t² of two groups: simple-statistics', () => {
    expect(largest(({ groups }) => [jStat.anovafscore(...groups), oneWayAnova(groups).f])).toBeLessThan(
      ROUNDING,
    )
    const summary = (values: readonly number[] = []) => ({
      n: values.length,
      mean: mean(values),
      sd: sampleSd(values),
    })
    expect(
      largest(({ groups: [a = [], b = []] }) => [
        simple.tTestTwoSample(a, b, 0) ?? NaN,
        twoSampleT(summary(a), summary(b), { hasEqualVariances: true }).t,
      ]),
    ).toBeLessThan(1e-11)
  })
  it('chi-square quantiles: jstat, and the table of simple-statistics', () => {
    expect(largest(({ p, df1 }) => [jStat.chisquare.inv(p, df1), chiSquareQuantile(p, df1)])).toBeLessThan(
      1e-10,
    )
    for (const [df, row] of Object.entries(simple.chiSquaredDistributionTable)) {
      for (const [upperTail, value] of Object.entries(row)) {
        // Printed with two decimals, some of them cut and not rounded.
        expect(Math.abs(chiSquareQuantile(1 - Number(upperTail), Number(df)) - Number(value))).toBeLessThan(
          0.0101,
        )
      }
    }
  })
  it('the exact interval of a share, from jstat’s beta quantiles', () => {
    for (const [k, n] of [
      [24, 30],
      [1, 12],
      [80, 90],
    ] as const) {
      const { low, high } = proportionInterval(k, n)
      expect(Math.abs(jStat.beta.inv(0.025, k, n - k + 1) - low)).toBeLessThan(1e-7)
      expect(Math.abs(jStat.beta.inv(0.975, k + 1, n - k) - high)).toBeLessThan(1e-7)
    }
  })
})

describe('where they disagree, by how much and why', () => {
  const expectAbout = (size: number, least: number, most: number) => {
    expect(size).toBeGreaterThan(least)
    expect(size).toBeLessThan(most)
  }
  it('slope and r²: up to 1e-7 with jstat, which does not centre x: far from 0 its columns 1 and x are nearly alike', () => {
    const ols = ({ x, y }: Sample) =>
      jStat.models.ols(
        y,
        x.map((value) => [1, value]),
      )
    expectAbout(
      largest((s) => [ols(s).coef[1] ?? NaN, linearRegression(s.x, s.y).slope]),
      1e-12,
      1e-7,
    )
    expect(largest((s) => [ols(s).R2, linearRegression(s.x, s.y).rSquared])).toBeLessThan(1e-7)
  })
  it('t and F quantiles: up to 1e-6 with jstat, whose inverse incomplete beta ends its search at 1e-8', () => {
    expectAbout(
      largest(({ p, df1 }) => [jStat.studentt.inv(p, df1), tQuantile(p, df1)]),
      1e-12,
      1e-6,
    )
    expectAbout(
      largest(({ p, df1, df2 }) => [jStat.centralF.inv(p, df1, df2), fQuantile(p, df1, df2)]),
      1e-12,
      1e-6,
    )
    // Taken back by jstat's own distribution function, our quantiles give p again.
    const back = largest(({ p, df1, df2 }) => [jStat.centralF.cdf(fQuantile(p, df1, df2), df1, df2), p])
    expect(back).toBeLessThan(1e-6)
  })
  it('p of an analysis of variance: up to 1e-6 with jstat, whose incomplete beta is that coarse, and 0 where p is below 1e-16', () => {
    expectAbout(
      largest(({ groups }) => [jStat.anovaftest(...groups), oneWayAnova(groups).p]),
      1e-13,
      1e-6,
    )
    const apart = [
      [0, 0.001, 0.002, 0.001],
      [10, 10.001, 10.002, 10.001],
    ]
    // It takes 1 minus the lower tail, and no digit is left of it.
    expect(jStat.anovaftest(...apart)).toBe(0)
    expect(oneWayAnova(apart).p).toBeGreaterThan(0)
  })
  it('erf: 8e-8 with simple-statistics, a polynomial of ten terms; jstat agrees to all digits', () => {
    const points = take(200, () => between(0.05, 3))
    const worst = (of: (x: number) => number) =>
      Math.max(...points.map((x) => Math.abs(of(x) - (1 - erfc(x)))))
    expect(worst(jStat.erf)).toBeLessThan(1e-14)
    expectAbout(worst(simple.errorFunction), 1e-9, 1.2e-7)
  })
  it('permutation test: simple-statistics draws where ours counts, so it differs by the chance of drawing', () => {
    const draws = 4000
    const randomOf = seededRandom(SEED + 2)
    samples.slice(0, 12).forEach(({ groups: [first = [], second = []] }) => {
      const [a, b] = [first.slice(0, 6), second.slice(0, 6)]
      const exact = permutationTest([b, a], { question: 'greater' })
      expect(exact.isExact).toBe(true)
      const drawn = simple.permutationTest(a, b, 'greater', draws, randomOf)
      // Five standard errors of the drawing.
      const allowed = 5 * Math.sqrt((exact.p * (1 - exact.p)) / draws) + 1 / draws
      expect(Math.abs(Math.min(drawn, 1) - exact.p)).toBeLessThan(allowed)
    })
  })
  it('lag-1 autocorrelation has no counterpart in either; it is the slope of each value on the one before, nearly', () => {
    // Over 400 values the two definitions differ by the ends alone.
    let last = 0
    const values = take(400, () => (last = 0.6 * last + normal()))
    const lagged = simple.linearRegression(values.slice(1).map((value, i) => [values[i] ?? NaN, value])).m
    expect(Math.abs(lagged - lag1Autocorrelation(values))).toBeLessThan(0.01)
  })
})
