import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import * as z from 'zod'
import type { NelsonRule } from '../../lib/science/control-chart'
import {
  capabilityInterval,
  ewma,
  ewmaLimits,
  individualsMovingRange,
  nelsonRules,
  processCapability,
  tabularCusum,
} from '../../lib/science/control-chart'
import {
  expectClose,
  expectRangeError,
  expectWithin,
  notNumbers,
  numberShape,
  numbersShape,
  propertyRun,
  testPublished,
  toleranceOf,
} from './published-checks'

const ruleNumbers: readonly NelsonRule[] = [1, 2, 3, 4, 5, 6, 7, 8]

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
  it('names values that are too few or not numbers', () => {
    expectRangeError('values', () => individualsMovingRange([1]))
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
