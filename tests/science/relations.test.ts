import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { straightBetween, lastIndexAtOrBefore, valueAt } from '../../lib/science/straight-line'
import {
  doseFactorFromOffset,
  log10FromOffset,
  percentAboveFromLog10,
  percentBelowFromLog10,
  percentOfDosePerC,
  ratioFromLog10,
  toleranceBoundsMin,
} from '../../lib/science/dose-ratio'
import { equivalentMinutes } from '../../lib/science/heat-dose'
import { recordSpacingS, usualSpacingS } from '../../lib/science/record-spacing'
import {
  celsiusDifferenceFromF,
  celsiusFromF,
  fahrenheitDifferenceFromC,
  fahrenheitFromC,
} from '../../lib/science/temperature'
import { expectRangeError, expectWithin, notNumbers, propertyRun } from './published-checks'

const model = { refTempC: 200, zC: 34 }

describe('ratios of doses', () => {
  it('0.12 in log10 is from 24.1 % below to 31.8 % above, 0.045 a tenth either way', () => {
    expectWithin(percentAboveFromLog10(0.12), 31.826, 1e-3)
    expectWithin(percentBelowFromLog10(0.12), 24.142, 1e-3)
    expectWithin(percentAboveFromLog10(0.045), 10.917, 1e-3)
    expect(toleranceBoundsMin(10, 0)).toEqual({ lowMin: 10, highMin: 10 })
    expectWithin(ratioFromLog10(1), 10, 0)
  })
  it('one degree all along is 7 % of dose, and 1.5 °C about 11 % (SCIENCE §2)', () => {
    expectWithin(percentOfDosePerC(model), 7.0, 0.01)
    expectWithin(100 * (doseFactorFromOffset(model, 1.5) - 1), 10.7, 0.05)
  })
  it('law: the factor of an offset is what shifting the whole curve does to its dose', () => {
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: 90, max: 230, noNaN: true }), { minLength: 2, maxLength: 20 }),
        fc.double({ min: -8, max: 8, noNaN: true }),
        (temps, offsetC) => {
          const dose = (shiftC: number) =>
            equivalentMinutes(
              model,
              temps.map((tempC, i) => ({ timeS: 60 * i, tempC: tempC + shiftC })),
            )
          expectWithin(dose(offsetC) / dose(0) / doseFactorFromOffset(model, offsetC), 1, 1e-11)
          expectWithin(
            Math.log10(doseFactorFromOffset(model, offsetC)),
            log10FromOffset(model, offsetC),
            1e-12,
          )
        },
      ),
      propertyRun,
    )
  })
  it('names what is no number', () => {
    for (const value of notNumbers) expectRangeError('offsetC', () => doseFactorFromOffset(model, value))
    expectRangeError('targetDoseMin', () => toleranceBoundsMin(-1, 0.1))
    expectRangeError('toleranceLog10', () => toleranceBoundsMin(1, -0.1))
  })
})

describe('scales of temperature', () => {
  it('0, 100 and −40 °C are 32, 212 and −40 °F; 5 °C of difference are 9 °F', () => {
    expect([0, 100, -40].map(fahrenheitFromC)).toEqual([32, 212, -40])
    expect(fahrenheitDifferenceFromC(5)).toBe(9)
  })
  it('law: back again is the same, and differences are differences', () => {
    const temp = fc.double({ min: -300, max: 1400, noNaN: true })
    fc.assert(
      fc.property(temp, temp, (a, b) => {
        expectWithin(celsiusFromF(fahrenheitFromC(a)), a, 1e-10)
        expectWithin(celsiusDifferenceFromF(fahrenheitDifferenceFromC(a)), a, 1e-10)
        expectWithin(fahrenheitFromC(a) - fahrenheitFromC(b), fahrenheitDifferenceFromC(a - b), 1e-9)
      }),
      propertyRun,
    )
  })
})

describe('straight lines', () => {
  it('law: a curve read between its points stays between its neighbours and meets them', () => {
    fc.assert(
      fc.property(
        fc.array(fc.tuple(fc.integer({ min: 0, max: 20 }), fc.double({ min: 0, max: 250, noNaN: true })), {
          minLength: 1,
          maxLength: 30,
        }),
        fc.double({ min: -5, max: 300, noNaN: true }),
        (steps, at) => {
          let x = 0
          const xs = steps.map(([width]) => (x += width))
          const ys = steps.map(([, y]) => y)
          const value = valueAt(xs, ys, at)
          const last = xs.at(-1) ?? 0
          expect(Number.isNaN(value)).toBe(at < (xs[0] ?? 0) || at > last)
          if (Number.isNaN(value)) return
          const before = lastIndexAtOrBefore(xs, at)
          expect(before).toBe(xs.findLastIndex((other) => other <= at))
          const pair = [ys[before] ?? NaN, ys[Math.min(before + 1, ys.length - 1)] ?? NaN]
          expect(value).toBeGreaterThanOrEqual(Math.min(...pair) - 1e-9)
          expect(value).toBeLessThanOrEqual(Math.max(...pair) + 1e-9)
        },
      ),
      propertyRun,
    )
  })
  it('a gap beside it is no value, a step has the later one, and the line itself goes on', () => {
    expect(valueAt([0, 1, 2], [5, NaN, 7], 0.5)).toBeNaN()
    expect(valueAt([0, 1, 2], [5, NaN, 7], 2)).toBe(7)
    expect(valueAt([0, 1, 1, 2], [5, 6, 9, 9], 1)).toBe(9)
    expect(straightBetween(0, 10, 2, 20, 3)).toBe(25)
  })
})

describe('the spacing of a record that does not state it', () => {
  const record = (steps: readonly number[]) =>
    steps.reduce<number[]>((at, step) => [...at, (at.at(-1) ?? 0) + step], [0])
  it('is the median step of its slowest twelfth, so that a slow beginning is no gap', () => {
    const slowThenFast = record([...new Array<number>(300).fill(1000), ...new Array<number>(6000).fill(200)])
    expect(recordSpacingS(slowThenFast)).toBe(1)
    expect(recordSpacingS(record(new Array<number>(600).fill(200)))).toBe(0.2)
  })
  it('a long silence is not it, and a record too short to tell has the room’s usual one', () => {
    expect(recordSpacingS(record([200, 200, 200, 60_000, 200, 200, 200]))).toBe(0.2)
    expect(recordSpacingS([])).toBe(usualSpacingS)
    expect(recordSpacingS([5])).toBe(usualSpacingS)
  })
})
