import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import {
  coveredHours,
  dayMean8hPpm,
  foldToMinutes,
  heldSegments,
  hottestMeanC,
  meanWithin,
} from '@/lib/science/exposure-record'

const fixed = { seed: 20270314, numRuns: 200 }
const hour = 3_600_000
const END = 24 * hour

const points = fc.array(
  fc.record({
    atMs: fc.integer({ min: 0, max: 20 * 60 }).map((minute) => minute * 60_000),
    value: fc.double({ min: 0, max: 400, noNaN: true }),
  }),
  { minLength: 1, maxLength: 30 },
)
const rule = { holdsMin: 60, untilMs: END }

describe('readings that stand for a time', () => {
  test('29 CFR 1910.1000(d)(1), the text’s own example: 2 h at 150, 2 h at 75 and 4 h at 50 ppm are 81.25 ppm', () => {
    const held = heldSegments(
      [
        { atMs: 0, value: 150 },
        { atMs: 2 * hour, value: 75 },
        { atMs: 4 * hour, value: 50 },
      ],
      { holdsMin: 240, untilMs: 8 * hour },
    )
    expect(coveredHours(held)).toBe(8)
    expect(dayMean8hPpm(held)).toBeCloseTo(81.25, 12)
  })

  test('a reading stands no longer than it may, and what is not covered counts as nothing', () => {
    const held = heldSegments([{ atMs: 0, value: 80 }], rule)
    expect(held).toEqual([{ fromMs: 0, untilMs: hour, value: 80 }])
    expect(dayMean8hPpm(held)).toBeCloseTo(10, 12)
  })

  test('nothing stands beyond now', () => {
    expect(coveredHours(heldSegments([{ atMs: 0, value: 5 }], { holdsMin: 60, untilMs: hour / 2 }))).toBe(0.5)
    expect(heldSegments([{ atMs: hour, value: 5 }], { holdsMin: 60, untilMs: hour })).toEqual([])
  })

  test('law: segments never overlap, and their order is that of time whatever the order they came in', () => {
    fc.assert(
      fc.property(points, (given) => {
        const held = heldSegments(given, rule)
        held.forEach((segment, i) => {
          expect(segment.untilMs).toBeGreaterThan(segment.fromMs)
          expect(segment.untilMs - segment.fromMs).toBeLessThanOrEqual(hour)
          const next = held[i + 1]
          if (next !== undefined) expect(next.fromMs).toBeGreaterThanOrEqual(segment.untilMs)
        })
      }),
      fixed,
    )
  })

  test('law: twice the concentration is twice the mean; a constant over covered time is that constant times hours by 8', () => {
    fc.assert(
      fc.property(points, (given) => {
        const held = heldSegments(given, rule)
        const doubled = held.map((segment) => ({ ...segment, value: 2 * segment.value }))
        expect(dayMean8hPpm(doubled) ?? 0).toBeCloseTo(2 * (dayMean8hPpm(held) ?? 0), 9)
        const flat = held.map((segment) => ({ ...segment, value: 40 }))
        expect(dayMean8hPpm(flat) ?? 0).toBeCloseTo((40 * coveredHours(held)) / 8, 9)
      }),
      fixed,
    )
  })

  test('law: cutting a segment in two changes no mean', () => {
    fc.assert(
      fc.property(points, fc.double({ min: 0.1, max: 0.9, noNaN: true }), (given, share) => {
        const held = heldSegments(given, rule)
        const cut = held.flatMap(({ fromMs, untilMs, value }) => {
          const middleMs = fromMs + share * (untilMs - fromMs)
          return [
            { fromMs, untilMs: middleMs, value },
            { fromMs: middleMs, untilMs, value },
          ]
        })
        expect(dayMean8hPpm(cut) ?? 0).toBeCloseTo(dayMean8hPpm(held) ?? 0, 9)
        expect(meanWithin(cut, 0, END) ?? 0).toBeCloseTo(meanWithin(held, 0, END) ?? 0, 9)
      }),
      fixed,
    )
  })

  test('refuse times and values that are none', () => {
    expect(() => heldSegments([{ atMs: Number.NaN, value: 1 }], rule)).toThrow(RangeError)
    expect(() => heldSegments([{ atMs: 0, value: Number.NaN }], rule)).toThrow(/value/)
    expect(() => heldSegments([], { ...rule, holdsMin: 0 })).toThrow(/holdsMin/)
  })
})

describe('the hottest hour', () => {
  test('is the mean of the hour in which it was hottest, not the hottest reading', () => {
    const held = heldSegments(
      [
        { atMs: 0, value: 24 },
        { atMs: 0.5 * hour, value: 32 },
        { atMs: hour, value: 28 },
      ],
      { holdsMin: 30, untilMs: END },
    )
    // 30 min at 32 and 30 min at 28.
    expect(hottestMeanC(held, 60)).toEqual({ meanC: 30, untilMs: 1.5 * hour })
  })

  test('law: lies between the coolest and the hottest reading, and no covered hour is hotter', () => {
    const steady = fc.array(fc.double({ min: 10, max: 40, noNaN: true }), { minLength: 2, maxLength: 12 })
    fc.assert(
      fc.property(steady, fc.double({ min: 0, max: 1, noNaN: true }), (values, share) => {
        // A reading each half hour, so that every window inside is covered.
        const given = values.map((value, i) => ({ atMs: (i * hour) / 2, value }))
        const held = heldSegments(given, { holdsMin: 30, untilMs: END })
        const found = hottestMeanC(held, 60)
        const lastMs = held.at(-1)?.untilMs ?? 0
        expect(found?.meanC).toBeGreaterThanOrEqual(Math.min(...values) - 1e-9)
        expect(found?.meanC).toBeLessThanOrEqual(Math.max(...values) + 1e-9)
        const fromMs = share * (lastMs - hour)
        expect(found?.meanC).toBeGreaterThanOrEqual((meanWithin(held, fromMs, fromMs + hour) ?? 0) - 1e-9)
      }),
      fixed,
    )
  })

  test('of nothing is nothing', () => {
    expect(hottestMeanC([], 60)).toBeNull()
    expect(dayMean8hPpm([])).toBeNull()
  })
})

describe('a meter that writes each second', () => {
  test('law: folded to minutes it keeps its mean over whole minutes and its peak', () => {
    const minute = fc.array(fc.double({ min: 0, max: 300, noNaN: true }), { minLength: 60, maxLength: 60 })
    fc.assert(
      fc.property(fc.array(minute, { minLength: 1, maxLength: 4 }), (minutes) => {
        const given = minutes.flat().map((value, i) => ({ atMs: i * 1000, value }))
        const folded = foldToMinutes(given)
        expect(folded).toHaveLength(minutes.length)
        expect(Math.max(...folded.map((point) => point.peak))).toBe(Math.max(...minutes.flat()))
        const mean = (values: number[]) => values.reduce((sum, value) => sum + value, 0) / values.length
        expect(mean(folded.map((point) => point.value))).toBeCloseTo(mean(minutes.flat()), 9)
      }),
      { ...fixed, numRuns: 60 },
    )
  })

  test('law: readings a minute or more apart stay as they are', () => {
    fc.assert(
      fc.property(points, (given) => {
        const once = [...new Map(given.map((point) => [point.atMs, point])).values()]
        expect(foldToMinutes(once).map(({ atMs, value }) => ({ atMs, value }))).toEqual(
          once.sort((a, b) => a.atMs - b.atMs),
        )
      }),
      fixed,
    )
  })
})
