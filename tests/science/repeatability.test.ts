import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { checkUncertaintyC } from '@/lib/science/check-uncertainty'
import { repeatabilityOf } from '@/lib/science/repeatability'

const seed = 20270215
const model = { refTempC: 200, zC: 34, baseTempC: 120 }

describe('repeat placements', () => {
  test('of five give the closed form, with the table’s chi-square points of four degrees of freedom', () => {
    // d = −2…2: s = √2.5. χ²(0.025; 4) = 0.484 and χ²(0.975; 4) = 11.143, printed in any table (from memory).
    const made = repeatabilityOf([-2, -1, 0, 1, 2], model)
    expect(made.sdC).toBeCloseTo(Math.sqrt(2.5), 12)
    expect(made.halfWidthC).toBeCloseTo(2 * Math.sqrt(2.5), 12)
    expect(made.halfWidthLog10).toBeCloseTo((2 * Math.sqrt(2.5)) / 34, 12)
    expect(made.halfWidthLowC / made.halfWidthC).toBeCloseTo(Math.sqrt(4 / 11.143), 4)
    expect(made.halfWidthHighC / made.halfWidthC).toBeCloseTo(Math.sqrt(4 / 0.484), 2)
  })

  test('of a hundred have the interval of NIST’s gear example', () => {
    // NIST/SEMATECH e-Handbook 1.3.5.8, N = 100: critical values of χ² with 99 degrees of freedom 73.361 and 128.422.
    const alternating = Array.from({ length: 100 }, (_, i) => (i % 2 === 0 ? 1 : -1))
    const made = repeatabilityOf(alternating, model)
    expect(made.sdC).toBeCloseTo(Math.sqrt(100 / 99), 12)
    expect(made.halfWidthLowC / made.halfWidthC).toBeCloseTo(Math.sqrt(99 / 128.422), 5)
    expect(made.halfWidthHighC / made.halfWidthC).toBeCloseTo(Math.sqrt(99 / 73.361), 5)
  })

  test('below five, all alike, or not a number are refused', () => {
    expect(() => repeatabilityOf([1, 2, 3, 4], model)).toThrow(RangeError)
    expect(() => repeatabilityOf([1, 1, 1, 1, 1], model)).toThrow('alike')
    expect(() => repeatabilityOf([1, 2, 3, 4, NaN], model)).toThrow(RangeError)
    expect(() => repeatabilityOf([1, 2, 3, 4, 5], { ...model, zC: 0 })).toThrow('zC')
  })

  test('law: a fixed offset between the two places does not count, the order does not, and twice the spread is twice the figure', () => {
    const differences = fc
      .array(fc.double({ min: -5, max: 5, noNaN: true }), { minLength: 5, maxLength: 30 })
      .filter((list) => Math.max(...list) - Math.min(...list) > 0.01)
    fc.assert(
      fc.property(differences, fc.double({ min: -30, max: 30, noNaN: true }), (list, offsetC) => {
        const made = repeatabilityOf(list, model)
        expect(
          repeatabilityOf(
            list.map((one) => one + offsetC),
            model,
          ).halfWidthC,
        ).toBeCloseTo(made.halfWidthC, 8)
        expect(repeatabilityOf(list.toReversed(), model).halfWidthC).toBeCloseTo(made.halfWidthC, 8)
        const doubled = repeatabilityOf(
          list.map((one) => 2 * one),
          model,
        )
        expect(doubled.halfWidthC).toBeCloseTo(2 * made.halfWidthC, 8)
        expect(made.halfWidthLowC).toBeLessThan(made.halfWidthC)
        expect(made.halfWidthHighC).toBeGreaterThan(made.halfWidthC)
      }),
      { seed, numRuns: 200 },
    )
  })
})

describe('the uncertainty of a check', () => {
  test('adds reference, scatter and resolution as squares', () => {
    // 0.3² + (2·0.2)² = 0.5²; resolution 0.1 alone is 2·0.1/√12 = 0.0577.
    expect(checkUncertaintyC(0.3, 0.2, 0)).toBeCloseTo(0.5, 12)
    expect(checkUncertaintyC(0, 0, 0.1)).toBeCloseTo(0.057_735, 6)
    expect(checkUncertaintyC(0.4, 0, 0)).toBe(0.4)
    expect(() => checkUncertaintyC(-0.1, 0, 0)).toThrow('referenceC')
  })
})
