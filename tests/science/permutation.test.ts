import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { PermutationQuestion } from '../../lib/science/permutation'
import { permutationTest } from '../../lib/science/permutation'
import { oneWayAnova } from '../../lib/science/statistics'
import { expectRangeError, expectWithin, notNumbers, propertyRun } from './published-checks'
import { normalValues, take } from './random-samples'

const exactly = { question: 'f' } as const

/** Small groups of whole numbers, ties among them, that have few enough arrangements to count. */
const smallGroups = fc
  .array(fc.array(fc.integer({ min: -20, max: 20 }), { minLength: 1, maxLength: 4 }), {
    minLength: 2,
    maxLength: 3,
  })
  .filter((groups) => new Set(groups.flat()).size > 1 && groups.some((group) => group.length > 1))

describe('every arrangement counted (closed form)', () => {
  it.each([
    { sizes: [3, 3], f: 2 / 20, greater: 1 / 20 },
    { sizes: [4, 4], f: 2 / 70, greater: 1 / 70 },
    { sizes: [5, 5], f: 2 / 252, greater: 1 / 252 },
    { sizes: [8, 8], f: 2 / 12_870, greater: 1 / 12_870 },
  ])('two groups of $sizes wholly apart: one arrangement in C(N, n), two for two sides', (row) => {
    const [first = 0, second = 0] = row.sizes
    const groups = [take(first, counter(0)), take(second, counter(100))]
    const f = permutationTest(groups, exactly)
    expect(f.isExact).toBe(true)
    expect(f.p).toBe(row.f)
    expect([f.pLow, f.pHigh]).toEqual([f.p, f.p])
    expect(permutationTest(groups, { question: 'either' }).p).toBe(row.f)
    expect(permutationTest(groups, { question: 'greater' }).p).toBe(row.greater)
    expect(permutationTest(groups, { question: 'less' }).p).toBe(1)
  })
  it('three pairs wholly apart: 3! of the 90 arrangements are as far apart', () => {
    const groups = [
      [0, 1],
      [10, 11],
      [20, 21],
    ]
    const result = permutationTest(groups, exactly)
    expect(result.count).toBe(90)
    expect(result.p).toBe(6 / 90)
  })
  it('1, 2 against 3, 4: the six differences are ±2, ±1, 0, 0', () => {
    const groups = [
      [1, 2],
      [3, 4],
    ]
    const result = permutationTest(groups, { question: 'greater' })
    expect(result).toEqual({ observed: 2, p: 1 / 6, pLow: 1 / 6, pHigh: 1 / 6, isExact: true, count: 6 })
    expect(permutationTest([[1, 3], [2, 4]], { question: 'greater' }).p).toBe(2 / 6) // prettier-ignore
    expect(permutationTest([[1, 4], [2, 3]], { question: 'greater' }).p).toBe(4 / 6) // prettier-ignore
    expect(permutationTest([[1, 4], [2, 3]], { question: 'either' }).p).toBe(1) // prettier-ignore
  })
  it('what is observed is the share of the variance between groups, SSB/(SSB + SSW)', () => {
    const groups = [
      [1, 2, 4],
      [2, 6],
      [9, 8, 11],
    ]
    const { ssBetween, ssWithin } = oneWayAnova(groups)
    expectWithin(permutationTest(groups, exactly).observed, ssBetween / (ssBetween + ssWithin), 1e-12)
  })
})

describe('arrangements drawn', () => {
  it('the interval of a drawn p holds the exact p at least as often as it says', () => {
    const groups = [
      [1, 4, 3, 7, 6],
      [5, 9, 6, 10, 8],
    ]
    const exact = permutationTest(groups, exactly).p
    let held = 0
    for (let seed = 1; seed <= 200; seed += 1) {
      const drawn = permutationTest(groups, { ...exactly, mostCounted: 0, draws: 499, seed })
      expect(drawn.isExact).toBe(false)
      expect(drawn.pLow <= drawn.p && drawn.p <= drawn.pHigh).toBe(true)
      if (drawn.pLow <= exact && exact <= drawn.pHigh) held += 1
    }
    // 95 % of 200 is 190; four standard deviations below that is 177.
    expect(held).toBeGreaterThanOrEqual(178)
  })
  it('in large groups it agrees with the F test', () => {
    const normal = normalValues(20_260_311)
    for (const shift of [0, 0.25, 0.4]) {
      const groups = [take(60, normal), take(50, normal), take(55, normal).map((value) => value + shift)]
      const drawn = permutationTest(groups, exactly)
      const { p } = oneWayAnova(groups)
      // Four standard errors of the drawing, and what normal theory leaves at this size.
      expectWithin(drawn.p, p, 4 * Math.sqrt((p * (1 - p)) / drawn.count) + 0.005)
    }
  })
  it('p is never 0, the same seed gives the same p, and another seed another', () => {
    const groups = [take(15, counter(0)), take(15, counter(100))]
    const result = permutationTest(groups, exactly)
    expect(result.p).toBe(1 / 10_000)
    expect(result.pLow).toBe(0)
    const near = [take(15, counter(0)), take(15, counter(3))]
    const drawn = (seed: number) => permutationTest(near, { ...exactly, seed }).p
    expect(drawn(5)).toBe(drawn(5))
    expect(new Set([1, 2, 3, 4].map(drawn)).size).toBeGreaterThan(1)
  })
})

describe('laws of the permutation test', () => {
  it('law: p is the same after a shift, a change of unit, and with the groups in another order', () => {
    const scale = fc.constantFrom(-3, 0.5, 1.8, 100)
    fc.assert(
      fc.property(smallGroups, scale, fc.integer({ min: -1000, max: 1000 }), (groups, factor, shift) => {
        const { p } = permutationTest(groups, exactly)
        const moved = groups.map((group) => group.map((value) => factor * value + shift))
        expectWithin(permutationTest(moved, exactly).p, p, 1e-12)
        expectWithin(permutationTest([...groups].reverse(), exactly).p, p, 1e-12)
      }),
      propertyRun,
    )
  })
  it('law: p lies above 0 and up to 1, and no arrangement has a smaller p than the one farthest apart', () => {
    fc.assert(
      fc.property(smallGroups, (groups) => {
        const { p, count } = permutationTest(groups, exactly)
        expect(p).toBeGreaterThanOrEqual(1 / count)
        expect(p).toBeLessThanOrEqual(1)
        const inOrder = groups.flat().sort((a, b) => a - b)
        let at = 0
        const sorted = groups.map((group) => inOrder.slice(at, (at += group.length)))
        if (groups.length === 2)
          expect(permutationTest(sorted, { question: 'greater' }).p).toBeLessThanOrEqual(
            permutationTest(groups, { question: 'greater' }).p + 1e-12,
          )
      }),
      propertyRun,
    )
  })
  it('law: the chances of both sides make 1 and the chance of a tie', () => {
    const pairs = smallGroups.filter((groups) => groups.length === 2)
    fc.assert(
      fc.property(pairs, (groups) => {
        const of = (question: PermutationQuestion) => permutationTest(groups, { question }).p
        expect(of('greater') + of('less')).toBeGreaterThanOrEqual(1 - 1e-12)
        expect(of('either')).toBeGreaterThanOrEqual(Math.min(of('greater'), of('less')) - 1e-12)
        const [first = [], second = []] = groups
        expectWithin(permutationTest([second, first], { question: 'less' }).p, of('greater'), 1e-12)
      }),
      propertyRun,
    )
  })
})

it('names what is outside the domain', () => {
  const good = [
    [1, 2],
    [3, 4],
  ]
  expectRangeError('groups', () => permutationTest([[1, 2]], exactly))
  expectRangeError('groups', () => permutationTest([...good, [5]], { question: 'greater' }))
  expectRangeError('groups[1]', () => permutationTest([[1, 2], []], exactly))
  expectRangeError('groups', () => permutationTest([[1], [2], [3]], exactly))
  expectRangeError('groups', () => permutationTest([[1, 1], [1]], exactly))
  for (const value of notNumbers)
    expectRangeError('groups[0][1]', () => permutationTest([[1, value], [3]], exactly))
  for (const value of [...notNumbers, -1, 0.5])
    expectRangeError('mostCounted', () => permutationTest(good, { ...exactly, mostCounted: value }))
  for (const value of [...notNumbers, 98])
    expectRangeError('draws', () => permutationTest(good, { ...exactly, draws: value }))
  for (const value of [...notNumbers, 0, 1])
    expectRangeError('confidence', () => permutationTest(good, { ...exactly, confidence: value }))
  for (const value of notNumbers)
    expectRangeError('seed', () => permutationTest(good, { ...exactly, mostCounted: 0, seed: value }))
})

/** from + 1, from + 2, … */
function counter(from: number): () => number {
  let value = from
  return () => (value += 1)
}
