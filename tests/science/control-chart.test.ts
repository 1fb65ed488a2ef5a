import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import * as z from 'zod'
import type { NelsonRule } from '../../lib/science/control-chart'
import {
  capabilityInterval,
  ewma,
  ewmaLimits,
  individualsMovingRange,
  movingRanges,
  nelsonRules,
  processCapability,
  tabularCusum,
} from '../../lib/science/control-chart'
import { mean, sampleSd } from '../../lib/science/statistics'
import {
  expectClose,
  expectRangeError,
  expectWithin,
  notNumbers,
  numberShape,
  numbersShape,
  propertyRun,
  publishedCheck,
  testPublished,
  toleranceOf,
} from './published-checks'
import { normalValues, take } from './random-samples'

const ruleNumbers: readonly NelsonRule[] = [1, 2, 3, 4, 5, 6, 7, 8]

/** A chart's values, and the same after a change of unit (`factor`) and of origin (`shift`). */
const shiftedAndScaled = fc
  .record({
    x: fc.array(fc.double({ min: -100, max: 100, noNaN: true }), { minLength: 2, maxLength: 50 }),
    shift: fc.double({ min: -500, max: 500, noNaN: true }),
    factor: fc.constantFrom(0.1, 1.8, 60),
  })
  .map((given) => ({
    ...given,
    moved: given.x.map((value) => given.factor * value + given.shift),
    size: 1 + Math.abs(given.shift) + 100 * given.factor,
  }))

describe('individuals chart', () => {
  testPublished('spc.individuals_moving_range', (check) => {
    const expected = z
      .object({ mean: z.number(), mean_moving_range: z.number(), UCL: z.number(), LCL: z.number() })
      .parse(check.expected)
    const chart = individualsMovingRange(numbersShape.parse(check.inputs.x))
    expectClose(check, chart.mean, expected.mean)
    expectClose(check, chart.meanMovingRange, expected.mean_moving_range)
    expectClose(check, chart.ucl, expected.UCL)
    expectClose(check, chart.lcl, expected.LCL)
  })
  it('d2 and D4 of two are the published ones: ASTM E2587, Montgomery appendix VI (spc.constants.a)', () => {
    const { d2, d3, D4 } = z
      .object({ '2': z.object({ d2: z.number(), d3: z.number(), D4: z.number() }) })
      .parse(publishedCheck('spc.constants.a').expected)['2']
    const { mean, ucl } = individualsMovingRange([0, 1])
    expectWithin(3 / (ucl - mean), d2, 1e-12)
    expectWithin(movingRanges([0, 1]).ucl, D4, 1e-12)
    // From d2 and d3 of three decimals.
    expectWithin(1 + (3 * d3) / d2, D4, 0.002)
  })
  it('law: the ranges are one fewer than the values, their mean is the chart’s, and their limit is never below it', () => {
    fc.assert(
      fc.property(shiftedAndScaled, ({ x, moved, factor, size }) => {
        const found = movingRanges(x)
        expect(found.ranges).toHaveLength(x.length - 1)
        expect(Math.min(...found.ranges)).toBeGreaterThanOrEqual(0)
        expect(found.mean).toBe(individualsMovingRange(x).meanMovingRange)
        expect(found.ucl).toBeGreaterThanOrEqual(found.mean)
        expectWithin(movingRanges(moved).ucl, factor * found.ucl, 1e-8 * size)
        // A chart that only rises has ranges that add up to its whole rise.
        const rising = movingRanges([...x].sort((a, b) => a - b))
        expectWithin(
          rising.ranges.reduce((sum, range) => sum + range, 0),
          Math.max(...x) - Math.min(...x),
          1e-9 * size,
        )
      }),
      propertyRun,
    )
  })
  it('law: a shift moves the centre and the limits, a change of unit takes them all along', () => {
    fc.assert(
      fc.property(shiftedAndScaled, ({ x, shift, factor, moved, size }) => {
        const chart = individualsMovingRange(x)
        const found = individualsMovingRange(moved)
        expectWithin(found.mean, factor * chart.mean + shift, 1e-9 * size)
        expectWithin(found.meanMovingRange, factor * chart.meanMovingRange, 1e-9 * size)
        expectWithin(found.ucl, factor * chart.ucl + shift, 1e-9 * size)
        expectWithin(found.lcl, factor * chart.lcl + shift, 1e-9 * size)
      }),
      propertyRun,
    )
  })
  it('law: the limits lie as far on either side, and played backwards the chart is the same', () => {
    fc.assert(
      fc.property(shiftedAndScaled, ({ x, size }) => {
        const chart = individualsMovingRange(x)
        expectWithin(chart.ucl - chart.mean, chart.mean - chart.lcl, 1e-9 * size)
        expect(chart.ucl).toBeGreaterThanOrEqual(chart.mean)
        const backwards = individualsMovingRange([...x].reverse())
        expectWithin(backwards.ucl, chart.ucl, 1e-9 * size)
        // Two values: the limits are 3/d2 of their distance away.
        const [a = 0, b = 0] = x
        const pair = individualsMovingRange([a, b])
        expectWithin(pair.ucl - pair.mean, (3 * Math.abs(a - b)) / 1.128, 1e-9 * size)
      }),
      propertyRun,
    )
  })
  it('names values that are too few or not numbers', () => {
    expectRangeError('values', () => individualsMovingRange([1]))
    expectRangeError('values', () => movingRanges([1]))
    for (const value of notNumbers) expectRangeError('values[1]', () => individualsMovingRange([1, value]))
  })
})

describe('EWMA', () => {
  testPublished('spc.ewma', (check) => {
    const inputs = z
      .object({ x: numbersShape, lambda: z.number(), target: z.number(), s: z.number(), k: z.number() })
      .parse(check.inputs)
    const expected = z
      .object({ ewma_incl_start: numbersShape, UCL: z.number(), LCL: z.number() })
      .parse(check.expected)
    const averages = ewma(inputs.x, inputs)
    expect(averages).toHaveLength(inputs.x.length + 1)
    averages.forEach((average, i) =>
      expectWithin(average, expected.ewma_incl_start[i] ?? NaN, toleranceOf(check, 'ewma_abs')),
    )
    const limits = ewmaLimits({ lambda: inputs.lambda, target: inputs.target, sd: inputs.s, width: inputs.k })
    expectWithin(limits.ucl, expected.UCL, toleranceOf(check, 'limits_abs'))
    expectWithin(limits.lcl, expected.LCL, toleranceOf(check, 'limits_abs'))
  })
  it('law: the average and its limits go along with a shift and a change of unit', () => {
    const lambda = fc.double({ min: 0.01, max: 1, noNaN: true })
    fc.assert(
      fc.property(shiftedAndScaled, lambda, ({ x, shift, factor, moved, size }, share) => {
        const plain = ewma(x, { lambda: share, target: 1 })
        const found = ewma(moved, { lambda: share, target: factor + shift })
        found.forEach((average, i) => expectWithin(average, factor * (plain[i] ?? NaN) + shift, 1e-9 * size))
        const limits = ewmaLimits({ lambda: share, target: 1, sd: 2, width: 3 })
        const wide = ewmaLimits({ lambda: share, target: factor + shift, sd: 2 * factor, width: 3 })
        expectWithin(wide.ucl, factor * limits.ucl + shift, 1e-9 * size)
        expectWithin(wide.lcl, factor * limits.lcl + shift, 1e-9 * size)
      }),
      propertyRun,
    )
  })
  it('law: the average stays among the values and the target; a new value moves it by λ of the distance', () => {
    const lambda = fc.double({ min: 0.01, max: 1, noNaN: true })
    fc.assert(
      fc.property(shiftedAndScaled, lambda, ({ x }, share) => {
        const averages = ewma(x, { lambda: share, target: 0 })
        expect(Math.max(...averages)).toBeLessThanOrEqual(Math.max(0, ...x) + 1e-9)
        expect(Math.min(...averages)).toBeGreaterThanOrEqual(Math.min(0, ...x) - 1e-9)
        x.forEach((value, i) => {
          const before = averages[i] ?? NaN
          expectWithin((averages[i + 1] ?? NaN) - before, share * (value - before), 1e-9)
        })
      }),
      propertyRun,
    )
  })
  it('λ of 1 gives the values themselves', () => {
    expect(ewma([3, 1, 2], { lambda: 1, target: 9 })).toEqual([9, 3, 1, 2])
  })
  it('names a λ, target or value outside the domain', () => {
    for (const lambda of [...notNumbers, 0, 1.1])
      expectRangeError('lambda', () => ewma([1], { lambda, target: 0 }))
    for (const value of notNumbers) {
      expectRangeError('target', () => ewma([1], { lambda: 0.2, target: value }))
      expectRangeError('values[0]', () => ewma([value], { lambda: 0.2, target: 0 }))
      expectRangeError('sd', () => ewmaLimits({ lambda: 0.2, target: 0, sd: value, width: 3 }))
    }
    expectRangeError('values', () => ewma([], { lambda: 0.2, target: 0 }))
  })
})

describe('CUSUM', () => {
  testPublished('spc.cusum_tabular', (check) => {
    const inputs = z
      .object({ x: numbersShape, target: z.number(), k: z.number(), h: z.number() })
      .parse(check.inputs)
    const expected = z
      .object({
        S_hi_13_to_20: numbersShape,
        S_lo_nonzero: z.record(z.string(), z.number()),
        cusum_20: z.number(),
        first_signal_1based: z.number(),
      })
      .parse(check.expected)
    const { high, low } = tabularCusum(inputs.x, inputs)
    expect(high).toHaveLength(inputs.x.length)
    expected.S_hi_13_to_20.forEach((sum, i) => expectClose(check, high[12 + i] ?? NaN, sum))
    low.forEach((sum, i) => expectClose(check, sum, expected.S_lo_nonzero[String(i + 1)] ?? 0))
    expect(high.findIndex((sum) => sum > inputs.h) + 1).toBe(expected.first_signal_1based)
    const total = inputs.x.reduce((sum, x) => sum + x - inputs.target, 0)
    expectClose(check, total, expected.cusum_20)
  })
  it('law: the sums are never below 0, change sides with the values, and do not depend on h', () => {
    const series = fc.array(fc.integer({ min: -10, max: 10 }), { minLength: 1, maxLength: 60 })
    fc.assert(
      fc.property(series, fc.integer({ min: 0, max: 3 }), (x, k) => {
        const { high, low } = tabularCusum(x, { target: 0, k, h: 4 })
        expect(Math.min(...high, ...low)).toBeGreaterThanOrEqual(0)
        const turned = tabularCusum(
          x.map((value) => 0 - value),
          { target: 0, k, h: 5 },
        )
        expect(turned).toEqual({ high: low, low: high })
      }),
      propertyRun,
    )
  })
  it('law: the sums do not see a shift of values and target, and take a change of unit along', () => {
    fc.assert(
      fc.property(shiftedAndScaled, ({ x, shift, factor, moved, size }) => {
        const plain = tabularCusum(x, { target: 1, k: 0.5, h: 4 })
        const found = tabularCusum(moved, { target: factor + shift, k: 0.5 * factor, h: 4 * factor })
        for (const side of ['high', 'low'] as const)
          found[side].forEach((sum, i) =>
            expectWithin(sum, factor * (plain[side][i] ?? NaN), 1e-8 * size * x.length),
          )
      }),
      propertyRun,
    )
  })
  it('law: each sum is the largest excess of any run that ends there (closed form)', () => {
    const series = fc.array(fc.integer({ min: -10, max: 10 }), { minLength: 1, maxLength: 25 })
    fc.assert(
      fc.property(series, fc.integer({ min: 0, max: 3 }), (x, k) => {
        const { high } = tabularCusum(x, { target: 0, k, h: 4 })
        high.forEach((sum, end) => {
          let run = 0
          let most = 0
          for (let i = end; i >= 0; i -= 1) {
            run += (x[i] ?? NaN) - k
            most = Math.max(most, run)
          }
          expect(sum).toBe(most)
        })
      }),
      propertyRun,
    )
  })
  it('names what is outside the domain', () => {
    expectRangeError('values', () => tabularCusum([], { target: 0, k: 0.5, h: 4 }))
    for (const value of notNumbers) {
      expectRangeError('values[0]', () => tabularCusum([value], { target: 0, k: 0.5, h: 4 }))
      expectRangeError('target', () => tabularCusum([1], { target: value, k: 0.5, h: 4 }))
      expectRangeError('k', () => tabularCusum([1], { target: 0, k: value, h: 4 }))
      expectRangeError('h', () => tabularCusum([1], { target: 0, k: 0.5, h: value }))
    }
  })
})

/** Charts of runs: on one side, rising, up and down by turns, near the centre. Chance alone seldom makes long ones. */
const runsOf = fc
  .array(
    fc.record({
      length: fc.integer({ min: 1, max: 18 }),
      level: fc.integer({ min: -7, max: 7 }).map((n) => n / 2),
      step: fc.constantFrom(-0.25, 0, 0, 0.25),
      swing: fc.constantFrom(0, 0, 0.5, 1.5),
    }),
    { minLength: 1, maxLength: 4 },
  )
  .map((runs) =>
    runs.flatMap(({ length, level, step, swing }) =>
      Array.from({ length }, (_, i) => level + step * i + (i % 2 === 0 ? swing : -swing)),
    ),
  )

describe('Nelson rules', () => {
  testPublished('spc.nelson_rules', (check) => {
    const found = nelsonRules(numbersShape.parse(check.inputs.z))
    const expected = z.record(z.string(), numbersShape).parse(check.expected)
    // The set names the rules that it is about; each of those is compared whole.
    for (const rule of ruleNumbers) {
      const wanted = expected[String(rule)]
      if (wanted !== undefined) expect(found[rule]).toEqual(wanted)
    }
    if (Object.keys(expected).length === 0) expect(found[1].concat(found[2], found[5])).toEqual([])
  })
  it('law: a mirrored chart breaks the same rules at the same points', () => {
    const series = fc.array(
      fc.integer({ min: -7, max: 7 }).map((n) => n / 2),
      { minLength: 1, maxLength: 80 },
    )
    fc.assert(
      fc.property(series, (chart) => {
        expect(nelsonRules(chart.map((value) => 0 - value))).toEqual(nelsonRules(chart))
      }),
      propertyRun,
    )
  })
  it('law: every rule agrees with its own words, counted out point by point', () => {
    const series = fc.array(
      fc.integer({ min: -7, max: 7 }).map((n) => n / 2),
      { minLength: 1, maxLength: 60 },
    )
    const inWords: Record<NelsonRule, (window: readonly number[]) => boolean> = {
      1: (w) => w.every((v) => v > 3) || w.every((v) => v < -3),
      2: (w) => w.every((v) => v > 0) || w.every((v) => v < 0),
      3: (w) => isRising(w) || isRising(w.map((v) => -v)),
      4: (w) => w.slice(2).every((v, i) => (v - (w[i + 1] ?? NaN)) * ((w[i + 1] ?? NaN) - (w[i] ?? NaN)) < 0),
      5: (w) => w.filter((v) => v > 2).length >= 2 || w.filter((v) => v < -2).length >= 2,
      6: (w) => w.filter((v) => v > 1).length >= 4 || w.filter((v) => v < -1).length >= 4,
      7: (w) => w.every((v) => v > -1 && v < 1),
      8: (w) => w.every((v) => v > 1 || v < -1),
    }
    const isRising = (w: readonly number[]) => w.slice(1).every((v, i) => v > (w[i] ?? NaN))
    const windows: Record<NelsonRule, number> = { 1: 1, 2: 9, 3: 6, 4: 14, 5: 3, 6: 5, 7: 15, 8: 8 }
    fc.assert(
      fc.property(fc.oneof(series, runsOf), (chart) => {
        const found = nelsonRules(chart)
        for (const rule of ruleNumbers) {
          const wanted = chart.flatMap((_, i) => {
            const window = chart.slice(Math.max(0, i + 1 - windows[rule]), i + 1)
            return window.length === windows[rule] && inWords[rule](window) ? [i] : []
          })
          expect(found[rule]).toEqual(wanted)
        }
      }),
      propertyRun,
    )
  })
  it('a run that goes on is named at every further point', () => {
    const rising = Array.from({ length: 9 }, (_, i) => i / 10 - 0.4)
    expect(nelsonRules(rising)[3]).toEqual([5, 6, 7, 8])
    expect(nelsonRules(Array.from({ length: 11 }, () => 0.5))[2]).toEqual([8, 9, 10])
  })
  it('a point on a line is not beyond it', () => {
    expect(nelsonRules([3, -3])[1]).toEqual([])
    expect(nelsonRules([2, 2, 2])[5]).toEqual([])
    expect(nelsonRules([0, 0, 0, 0, 0, 0, 0, 0, 0])[2]).toEqual([])
    expect(nelsonRules(Array.from({ length: 15 }, () => 1))[7]).toEqual([])
  })
  it('names values that are missing or not numbers', () => {
    expectRangeError('z', () => nelsonRules([]))
    for (const value of notNumbers) expectRangeError('z[1]', () => nelsonRules([0, value]))
  })
})

describe('capability', () => {
  testPublished('capability', (check) => {
    const inputs = z
      .object({ USL: z.number(), LSL: z.number(), mean: z.number(), s: z.number() })
      .parse(check.inputs)
    const expected = z
      .object({ Cp: z.number(), Cpk: z.number(), Cpu: z.number(), Cpl: z.number() })
      .parse(check.expected)
    const found = processCapability({ usl: inputs.USL, lsl: inputs.LSL, mean: inputs.mean, sd: inputs.s })
    expectClose(check, found.cp, expected.Cp)
    expectClose(check, found.cpk, expected.Cpk)
    expectClose(check, found.cpu, expected.Cpu)
    expectClose(check, found.cpl, expected.Cpl)
  })
  testPublished('capability.cp_ci', (check) => {
    const inputs = z
      .object({ USL: z.number(), LSL: z.number(), s: z.number(), n: z.number(), alpha: z.number() })
      .parse(check.inputs)
    const expected = z.object({ Cp: z.number(), lower: z.number(), upper: z.number() }).parse(check.expected)
    const middle = (inputs.USL + inputs.LSL) / 2
    const { cp, cpk } = capabilityInterval({
      usl: inputs.USL,
      lsl: inputs.LSL,
      mean: middle,
      sd: inputs.s,
      n: inputs.n,
      alpha: inputs.alpha,
    })
    expectClose(check, cp.value, expected.Cp)
    expectClose(check, cp.low, expected.lower)
    expectClose(check, cp.high, expected.upper)
    expect(cpk.value).toBe(cp.value)
    expect(cpk.low < cpk.value && cpk.value < cpk.high).toBe(true)
  })
  it('law: capability does not see where zero lies nor the unit; Cpk is at most Cp, and equal in the middle', () => {
    const process = fc.record({
      lsl: fc.double({ min: -50, max: 50, noNaN: true }),
      width: fc.double({ min: 0.1, max: 50, noNaN: true }),
      place: fc.double({ min: -0.5, max: 1.5, noNaN: true }),
      sd: fc.double({ min: 0.01, max: 20, noNaN: true }),
      shift: fc.integer({ min: -100, max: 100 }),
      factor: fc.constantFrom(0.1, 1.8, 60),
    })
    fc.assert(
      fc.property(process, ({ lsl, width, place, sd, shift, factor }) => {
        const given = { lsl, usl: lsl + width, mean: lsl + place * width, sd }
        const found = processCapability(given)
        const moved = processCapability({
          lsl: factor * given.lsl + shift,
          usl: factor * given.usl + shift,
          mean: factor * given.mean + shift,
          sd: factor * sd,
        })
        for (const key of ['cp', 'cpk', 'cpu', 'cpl'] as const)
          expectWithin(moved[key], found[key], 1e-6 * (1 + Math.abs(found[key])))
        // Cp is the mean of its two sides, and 6 sd of it fill the width.
        expectWithin((found.cpu + found.cpl) / 2, found.cp, 1e-6 * (1 + found.cp))
        expectWithin(found.cp * 6 * sd, width, 1e-9 * (1 + width))
        expect(found.cpk).toBeLessThanOrEqual(found.cp * (1 + 1e-9))
        const middle = processCapability({ ...given, mean: lsl + width / 2 })
        expectWithin(middle.cpk, middle.cp, 1e-6 * (1 + middle.cp))
      }),
      propertyRun,
    )
  })
  it('Cp’s interval holds the truth as often as it says, Cpk’s nearly so (normal values)', () => {
    const normal = normalValues(5)
    const held = { cp: 0, cpk: 0 }
    // True values: width 6 of sd 1 and a mean half an sd off the middle.
    const truth = { cp: 1, cpk: 2.5 / 3 }
    for (let trial = 0; trial < 500; trial += 1) {
      const values = take(40, normal).map((value) => value + 0.5)
      const found = capabilityInterval({
        usl: 3,
        lsl: -3,
        mean: mean(values),
        sd: sampleSd(values),
        n: 40,
        alpha: 0.05,
      })
      for (const key of ['cp', 'cpk'] as const)
        if (found[key].low <= truth[key] && truth[key] <= found[key].high) held[key] += 1
    }
    // 95 % of 500 is 475, standard deviation 4.9: within four of them; Bissell's form is an approximation.
    expectWithin(held.cp, 475, 20)
    expectWithin(held.cpk, 475, 25)
  })
  it('names limits out of order, no spread, and what is not a number', () => {
    const good = { usl: 2, lsl: 1, mean: 1.5, sd: 0.1 }
    expectRangeError('usl', () => processCapability({ ...good, usl: 1 }))
    for (const value of [...notNumbers, 0, -1])
      expectRangeError('sd', () => processCapability({ ...good, sd: value }))
    for (const value of notNumbers) {
      expectRangeError('usl', () => processCapability({ ...good, usl: value }))
      expectRangeError('lsl', () => processCapability({ ...good, lsl: value }))
      expectRangeError('mean', () => processCapability({ ...good, mean: value }))
    }
    for (const n of [...notNumbers, 1, 2.5])
      expectRangeError('n', () => capabilityInterval({ ...good, n, alpha: 0.05 }))
    for (const alpha of [...notNumbers, 0, 1])
      expectRangeError('alpha', () => capabilityInterval({ ...good, n: 30, alpha }))
    expectWithin(numberShape.parse(processCapability(good).cp), 1 / 0.6, 1e-12)
  })
})
