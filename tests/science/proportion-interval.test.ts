import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { proportionInterval } from '../../lib/science/proportion-interval'
import { expectRangeError, expectWithin, notNumbers, propertyRun } from './published-checks'

/** Chance of at most k successes in n, each of chance p, summed term by term through logarithms. */
function binomialCdf(k: number, n: number, p: number): number {
  let logTerm = n * Math.log1p(-p)
  let sum = Math.exp(logTerm)
  for (let i = 1; i <= k; i += 1) {
    logTerm += Math.log((n - i + 1) / i) + Math.log(p) - Math.log1p(-p)
    sum += Math.exp(logTerm)
  }
  return sum
}

describe('share of successes', () => {
  it('none of n: 0 to 1 − (α/2)^(1/n), and all of n the same from above (closed form)', () => {
    for (const n of [1, 10, 9999]) {
      const high = 1 - 0.025 ** (1 / n)
      expect(proportionInterval(0, n).low).toBe(0)
      expectWithin(proportionInterval(0, n).high, high, 1e-12)
      expectWithin(proportionInterval(n, n).low, 1 - high, 1e-12)
    }
  })
  it('24 of 30 within: at its low end 24 or more, at its high end 24 or fewer, have a chance of 2.5 % each', () => {
    const { value, low, high } = proportionInterval(24, 30)
    expect(value).toBe(0.8)
    expectWithin(1 - binomialCdf(23, 30, low), 0.025, 1e-9)
    expectWithin(binomialCdf(24, 30, high), 0.025, 1e-9)
  })
})

describe('laws of the share', () => {
  const counts = fc
    .integer({ min: 1, max: 400 })
    .chain((n) => fc.tuple(fc.integer({ min: 0, max: n }), fc.constant(n)))
  it('law: each end leaves out α/2 of the binomial distribution (independent sum)', () => {
    fc.assert(
      fc.property(counts, ([k, n]) => {
        const { low, high } = proportionInterval(k, n)
        if (k > 0) expectWithin(1 - binomialCdf(k - 1, n, low), 0.025, 1e-7)
        if (k < n) expectWithin(binomialCdf(k, n, high), 0.025, 1e-7)
      }),
      propertyRun,
    )
  })
  it('law: the interval holds k/n, mirrors for the other outcome, and is wider for more confidence', () => {
    fc.assert(
      fc.property(counts, ([k, n]) => {
        const { value, low, high } = proportionInterval(k, n)
        expect(0 <= low && low <= value && value <= high && high <= 1).toBe(true)
        expectWithin(proportionInterval(n - k, n).low, 1 - high, 1e-9)
        expect(proportionInterval(k, n, 0.99).low).toBeLessThanOrEqual(low)
      }),
      propertyRun,
    )
  })
})

it('names counts and a confidence outside the domain', () => {
  for (const value of [...notNumbers, 0, 1.5]) expectRangeError('n', () => proportionInterval(0, value))
  for (const value of [...notNumbers, -1, 0.5, 11]) expectRangeError('k', () => proportionInterval(value, 10))
  for (const value of [...notNumbers, 0, 1])
    expectRangeError('confidence', () => proportionInterval(1, 2, value))
})
