import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import * as z from 'zod'
import { tabularCusum } from '../../lib/science/control-chart'
import { cusumAverageRunLength } from '../../lib/science/cusum-run-length'
import {
  expectClose,
  expectRangeError,
  expectWithin,
  notNumbers,
  numberShape,
  numbersShape,
  propertyRun,
  testPublished,
} from './published-checks'
import { normalValues } from './random-samples'

describe('run length of a CUSUM', () => {
  testPublished('spc.cusum_arl_two_sided', (check) => {
    const expected = z.object({ ARL0: numbersShape, ARL_1sigma: numbersShape }).parse(check.expected)
    const k = numberShape.parse(check.inputs.k)
    numbersShape.parse(check.inputs.h).forEach((h, i) => {
      expectClose(check, cusumAverageRunLength({ k, h, shiftSigma: 0 }), expected.ARL0[i] ?? NaN)
      expectClose(check, cusumAverageRunLength({ k, h, shiftSigma: 1 }), expected.ARL_1sigma[i] ?? NaN)
    })
  })
  it('the chart itself signals after that many values', () => {
    const normal = normalValues(3)
    const k = 0.5
    const h = 4
    const runs = 3000
    let total = 0
    for (let run = 0; run < runs; run += 1) {
      const values = Array.from({ length: 200 }, () => 1 + normal())
      const { high, low } = tabularCusum(values, { target: 0, k, h })
      total += high.findIndex((sum, i) => sum > h || (low[i] ?? 0) > h) + 1
    }
    // A run length of about 8.4 varies by about 4.4 from run to run: four standard errors of 3,000.
    expectWithin(total / runs, cusumAverageRunLength({ k, h, shiftSigma: 1 }), 0.33)
  })
})

it('law: a wider limit, a larger allowance and a smaller shift let more values pass; a shift has no side', () => {
  const options = fc.record({
    k: fc.double({ min: 0.1, max: 1, noNaN: true }),
    h: fc.double({ min: 1, max: 6, noNaN: true }),
    shiftSigma: fc.double({ min: 0, max: 3, noNaN: true }),
  })
  fc.assert(
    fc.property(options, (given) => {
      const length = cusumAverageRunLength(given)
      expect(length).toBeGreaterThanOrEqual(1)
      expect(cusumAverageRunLength({ ...given, h: given.h + 0.5 })).toBeGreaterThan(length)
      expect(cusumAverageRunLength({ ...given, k: given.k + 0.1 })).toBeGreaterThan(length)
      expect(cusumAverageRunLength({ ...given, shiftSigma: given.shiftSigma + 0.2 })).toBeLessThan(length)
      expectWithin(cusumAverageRunLength({ ...given, shiftSigma: -given.shiftSigma }), length, 1e-6 * length)
    }),
    { ...propertyRun, numRuns: 60 },
  )
})

it('names what is outside the domain', () => {
  const good = { k: 0.5, h: 4, shiftSigma: 0 }
  for (const value of [...notNumbers, -1])
    expectRangeError('k', () => cusumAverageRunLength({ ...good, k: value }))
  for (const value of [...notNumbers, 0])
    expectRangeError('h', () => cusumAverageRunLength({ ...good, h: value }))
  for (const value of notNumbers)
    expectRangeError('shiftSigma', () => cusumAverageRunLength({ ...good, shiftSigma: value }))
})
