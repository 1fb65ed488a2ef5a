import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { forecastRecord, isForecastRight } from '@/lib/science/forecast-record'
import { medianInterval } from '@/lib/science/median-interval'
import { commonDeviation, firstReachS, milestoneTempC, MINUTES_RULE } from '@/lib/science/next-piece'

const options = { seed: 20270201, numRuns: 300 }
const value = fc.double({ min: -60, max: 60, noNaN: true })
const counted = (n: number) => Array.from({ length: n }, (_, i) => i + 1)

describe('the interval of a median', () => {
  /** P(X < k) of binomial(n, ½), counted out here by Pascal's triangle; the ranks follow from the definition. */
  function ranksByHand(n: number, confidence: number): number {
    let row = [1]
    for (let i = 0; i < n; i += 1) row = [...row, 0].map((own, k) => own + (row[k - 1] ?? 0))
    let below = 0
    let rank = 0
    for (const count of row) {
      below += count
      if ((2 * below) / 2 ** n > 1 - confidence) return rank
      rank += 1
    }
    return rank
  }

  test.each([
    // Ranks of the table of confidence intervals for the median that textbooks of rank tests print (95 %).
    [6, 0.95, 1],
    [8, 0.95, 1],
    [9, 0.95, 2],
    [12, 0.95, 3],
    [15, 0.95, 4],
    [20, 0.95, 6],
    [25, 0.95, 8],
    [5, 0.9, 1],
    [12, 0.9, 3],
  ])('of %i values at %d runs from the %i. smallest to the same from above', (n, confidence, rank) => {
    expect(ranksByHand(n, confidence)).toBe(rank)
    const interval = medianInterval(counted(n), confidence)
    expect(interval).toMatchObject({ low: rank, high: n + 1 - rank, value: (n + 1) / 2 })
  })

  test('cannot be had from five values at 95 %, and can at 90 %', () => {
    expect(medianInterval(counted(5))).toBeNull()
    expect(medianInterval(counted(5), 0.9)).toEqual({ value: 3, low: 1, high: 5 })
  })

  test('law: it holds the median, moves with the values and does not know their order', () => {
    fc.assert(
      fc.property(fc.array(value, { minLength: 6, maxLength: 40 }), value, (values, shift) => {
        const interval = medianInterval(values)
        if (interval === null) throw new Error('six values give one')
        expect(interval.low).toBeLessThanOrEqual(interval.value)
        expect(interval.high).toBeGreaterThanOrEqual(interval.value)
        expect(medianInterval(values.toReversed())).toEqual(interval)
        const moved = medianInterval(values.map((one) => one + shift))
        expect(moved?.value).toBeCloseTo(interval.value + shift, 9)
        expect(moved?.low).toBeCloseTo(interval.low + shift, 9)
      }),
      options,
    )
  })

  test('refuses what is no number, no value, or no confidence', () => {
    expect(() => medianInterval([1, NaN])).toThrow(/values\[1\]/)
    expect(() => medianInterval([])).toThrow(/values/)
    expect(() => medianInterval([1, 2], 1)).toThrow(/confidence/)
  })
})

describe('what the last firings had in common', () => {
  test('is said from five on, when the interval leaves out zero', () => {
    expect(commonDeviation([4, 5, 3, 6], MINUTES_RULE)).toBeNull()
    expect(commonDeviation([4, 5, 3, 6, 4], MINUTES_RULE)).toEqual({ n: 5, value: 4, low: 3, high: 6 })
    expect(commonDeviation([4, 5, -1, 6, 4], MINUTES_RULE)).toBeNull()
    expect(commonDeviation([-4, -5, -3, -6, -4], MINUTES_RULE)).toMatchObject({ value: -4, high: -3 })
  })

  test('is not said when it is too small to be worth a word', () => {
    expect(
      commonDeviation(
        Array.from({ length: 12 }, () => 0.8),
        MINUTES_RULE,
      ),
    ).toBeNull()
  })

  test('law: it never speaks of fewer, never across zero, and says the contrary of contrary values', () => {
    fc.assert(
      fc.property(fc.array(value, { maxLength: 14 }), (values) => {
        const common = commonDeviation(values, MINUTES_RULE)
        const mirrored = commonDeviation(
          values.map((one) => -one),
          MINUTES_RULE,
        )
        expect(mirrored === null).toBe(common === null)
        if (common === null) return
        expect(values.length).toBeGreaterThanOrEqual(5)
        expect(common.low * common.high).toBeGreaterThan(0)
        expect(mirrored?.value).toBeCloseTo(-common.value, 9)
      }),
      options,
    )
  })

  test('law: values that lie about zero by chance are spoken of seldom', () => {
    let spoken = 0
    fc.assert(
      fc.property(fc.array(value, { minLength: 12, maxLength: 12 }), (values) => {
        // Signs by the fair coin of the generator; what is measured is how often the rule is taken in.
        if (commonDeviation(values, MINUTES_RULE) !== null) spoken += 1
      }),
      { seed: 7, numRuns: 400 },
    )
    expect(spoken / 400).toBeLessThan(0.1)
  })
})

describe('when a curve reaches a temperature', () => {
  test('is between the readings, straight, and by none that is missing', () => {
    const curve = { timeS: [0, 60, 120, 180], tempC: [20, 100, null, 160] }
    expect(firstReachS(curve, 130)).toBeCloseTo(120, 9)
    expect(firstReachS(curve, 20)).toBe(0)
    expect(firstReachS(curve, 161)).toBeNull()
    expect(firstReachS({ timeS: [], tempC: [] }, 100)).toBeNull()
  })

  test('the milestone is 150 °C where the plan passes it, else a ten that it does', () => {
    expect(milestoneTempC(215)).toBe(150)
    expect(milestoneTempC(155)).toBe(150)
    expect(milestoneTempC(154)).toBe(140)
    expect(milestoneTempC(120)).toBe(110)
  })
})

describe('a forecast', () => {
  const outcome = { forecastMinutes: 16, reachedMinutes: 17, restedMinutes: 20, withinMinutes: 1.5 }

  test('was right when the target came within the minutes, either way', () => {
    expect(isForecastRight(outcome)).toBe(true)
    expect(isForecastRight({ ...outcome, reachedMinutes: 17.5 })).toBe(true)
    expect(isForecastRight({ ...outcome, reachedMinutes: 17.6 })).toBe(false)
    expect(isForecastRight({ ...outcome, reachedMinutes: 14.4 })).toBe(false)
  })

  test('was wrong when the target should have come well before the rest and never did', () => {
    expect(isForecastRight({ ...outcome, reachedMinutes: null })).toBe(false)
  })

  test('cannot be told when the rest came first', () => {
    expect(isForecastRight({ ...outcome, reachedMinutes: null, restedMinutes: 12 })).toBeNull()
    expect(isForecastRight({ ...outcome, reachedMinutes: null, restedMinutes: 17 })).toBeNull()
  })

  test('the record counts what could be told, with the exact interval of its share, from five on', () => {
    expect(forecastRecord([true, true, null, false, true])).toBeNull()
    const record = forecastRecord([
      ...Array.from({ length: 24 }, () => true),
      ...Array.from({ length: 6 }, () => false),
      null,
    ])
    // Clopper and Pearson for 24 of 30.
    expect(record).toMatchObject({ n: 30, rightCount: 24, share: { value: 0.8 } })
    expect(record?.share.low).toBeCloseTo(0.6143, 3)
    expect(record?.share.high).toBeCloseTo(0.9229, 3)
  })
})
