import fc from 'fast-check'
import { describe, expect, test } from 'vitest'

import type { ReadingSeries } from '../../lib/science/gaps'
import { fillGaps, gapExtremes } from '../../lib/science/gaps'
import { equivalentMinutes } from '../../lib/science/heat-dose'
import { defaultSiteRules, siteRulesSchema } from '../../lib/science/site-rules'

const rules = defaultSiteRules.gaps
const model = defaultSiteRules.dose
const window = { fromS: 0, toS: 2700 }

/** One reading a second at `tempCAt`, silent where `isSilent`. */
function series(
  isSilent: (timeS: number) => boolean,
  tempCAt = (timeS: number) => 150 + timeS / 60,
): ReadingSeries {
  const timeS = Array.from({ length: 2701 }, (_, i) => i)
  return { timeS, tempC: timeS.map((time) => (isSilent(time) ? NaN : tempCAt(time))), spacingS: 1 }
}

/** `count` readings missing from `atS` on. */
const silence = (atS: number, count: number) => (timeS: number) => timeS >= atS && timeS < atS + count

describe('the gap policy of SCIENCE §5', () => {
  test.each([
    [1, []],
    [2, []],
    [3, ['interpolated']],
    [30, ['interpolated']],
    [31, ['widened']],
    [180, ['widened']],
    [181, ['incomplete']],
  ])('%i readings missing, one a second: %j', (count, treatments) => {
    const filled = fillGaps(series(silence(1000, count)), window, { ...rules, incompleteAboveShare: 1 })
    expect(filled?.gaps.map((gap) => gap.treatment)).toEqual(treatments)
    if (treatments.length > 0)
      expect(filled?.gaps[0]).toMatchObject({ startS: 999, endS: 1000 + count, missingS: count })
    expect(filled?.isIncomplete).toBe(treatments[0] === 'incomplete')
  })

  test('many short gaps are incomplete above 5 % of the toast in all', () => {
    const every = (count: number) => series((timeS) => timeS % 400 >= 300 && timeS % 400 < 300 + count)
    expect(fillGaps(every(19), window, rules)?.isIncomplete).toBe(false)
    expect(fillGaps(every(26), window, rules)?.isIncomplete).toBe(true)
  })

  test('a gap is joined by a straight line, marked, at the nominal spacing', () => {
    const filled = fillGaps(series(silence(1000, 20)), window, rules)
    expect(filled?.timeS).toHaveLength(2701)
    expect(filled?.isInterpolated.reduce((sum, mark) => sum + mark, 0)).toBe(20)
    filled?.tempC.forEach((tempC, i) => expect(tempC).toBeCloseTo(150 + (filled.timeS[i] ?? 0) / 60, 9))
  })

  test('a window’s edges are read between readings, or held at the nearest after a silence', () => {
    const between = fillGaps(
      { timeS: [-1, 1, 2, 3], tempC: [100, 120, 130, 140], spacingS: 1 },
      { fromS: 0, toS: 3 },
      rules,
    )
    expect(between?.tempC[0]).toBe(110)
    expect(between?.gaps).toEqual([])
    const held = fillGaps(
      series((timeS) => timeS < 50 || timeS > 2680),
      window,
      rules,
    )
    expect(held?.tempC[0]).toBe(150 + 50 / 60)
    expect(held?.gaps.map((gap) => [gap.startS, gap.endS, gap.missingS, gap.treatment])).toEqual([
      [0, 50, 50, 'widened'],
      [2680, 2700, 20, 'interpolated'],
    ])
  })

  test('nothing read is null, and a series that is none is refused by name', () => {
    expect(
      fillGaps(
        series(() => true),
        window,
        rules,
      ),
    ).toBeNull()
    expect(() => fillGaps({ timeS: [0, 2, 1], tempC: [1, 1, 1], spacingS: 1 }, window, rules)).toThrow(
      /^timeS\[2\]/,
    )
    expect(() => fillGaps({ timeS: [0], tempC: [], spacingS: 1 }, window, rules)).toThrow(/^tempC/)
    expect(() =>
      fillGaps(
        series(() => false),
        { fromS: 5, toS: 5 },
        rules,
      ),
    ).toThrow(/^toS/)
  })

  test('the extremes hold the lower end, and follow the higher of the plan and the ends', () => {
    const filled = fillGaps(
      series(silence(1000, 100), (timeS) => (timeS < 1050 ? 180 : 190)),
      window,
      rules,
    )
    if (filled === null) throw new Error('nothing read')
    const extremes = gapExtremes(filled, model, (timeS) => (timeS < 1050 ? 200 : 150))
    const lowMin = equivalentMinutes(model, [
      { timeS: 0, tempC: 180 },
      { timeS: 101, tempC: 180 },
    ])
    expect(extremes.lowMin).toBeCloseTo(lowMin, 9)
    // 51 s at the plan's 200 °C, then the higher end's 190 °C; the step lies between two joined points.
    const highMin = equivalentMinutes(model, [
      { timeS: 0, tempC: 200 },
      { timeS: 50, tempC: 200 },
      { timeS: 51, tempC: 190 },
      { timeS: 101, tempC: 190 },
    ])
    expect(extremes.highMin).toBeCloseTo(highMin, 9)
    expect(extremes.joinedMin).toBeGreaterThan(extremes.lowMin)
    expect(extremes.joinedMin).toBeLessThan(extremes.highMin)
  })
})

const anySeries = fc
  .record({
    spacingS: fc.constantFrom(0.2, 1, 5, 10),
    readings: fc.array(
      fc.tuple(fc.integer({ min: 1, max: 40 }), fc.option(fc.double({ min: 20, max: 260, noNaN: true }))),
      {
        minLength: 1,
        maxLength: 120,
      },
    ),
    startS: fc.integer({ min: -200, max: 200 }),
  })
  .map(({ spacingS, readings, startS }): ReadingSeries => {
    let timeS = startS
    const times = readings.map(([spacings]) => (timeS += spacings * spacingS))
    return { timeS: times, tempC: readings.map(([, tempC]) => tempC ?? NaN), spacingS }
  })

describe('laws of the gaps', () => {
  test('law: a filled window starts and ends on its edges, rises in time, and keeps every reading', () => {
    fc.assert(
      fc.property(anySeries, fc.integer({ min: 1, max: 3000 }), (any, toS) => {
        const filled = fillGaps(any, { fromS: 0, toS }, rules)
        const inside = Array.from(any.timeS).flatMap((timeS, i) => {
          const tempC = any.tempC[i] ?? NaN
          return timeS >= 0 && timeS <= toS && !Number.isNaN(tempC) ? [[timeS, tempC]] : []
        })
        expect(filled === null).toBe(inside.length === 0)
        if (filled === null) return
        expect(filled.timeS[0]).toBe(0)
        expect(filled.timeS.at(-1)).toBe(toS)
        const read = Array.from(filled.timeS).flatMap((timeS, i) =>
          filled.isInterpolated[i] === 0 ? [[timeS, filled.tempC[i]]] : [],
        )
        expect(read).toEqual(inside)
        for (let i = 1; i < filled.timeS.length; i += 1) {
          expect(filled.timeS[i]).toBeGreaterThan(filled.timeS[i - 1] ?? Infinity)
        }
        expect(filled.missingShare).toBeGreaterThanOrEqual(0)
        expect(filled.missingShare).toBeLessThanOrEqual(1 + 1e-9)
      }),
      { seed: 20260309, numRuns: 400 },
    )
  })

  test('law: the joined dose of wide gaps lies between its extremes', () => {
    fc.assert(
      fc.property(anySeries, fc.double({ min: 20, max: 260, noNaN: true }), (any, planC) => {
        const filled = fillGaps(any, { fromS: 0, toS: 2000 }, rules)
        if (filled === null) return
        const { lowMin, joinedMin, highMin } = gapExtremes(filled, model, () => planC)
        expect(lowMin).toBeLessThanOrEqual(joinedMin * (1 + 1e-9))
        expect(joinedMin).toBeLessThanOrEqual(highMin * (1 + 1e-9))
      }),
      { seed: 20260310, numRuns: 400 },
    )
  })
})

describe('the site rules', () => {
  test('the defaults are valid, and a rule outside its bounds is named', () => {
    expect(siteRulesSchema.parse(defaultSiteRules)).toEqual(defaultSiteRules)
    const wrong = { ...defaultSiteRules, gaps: { ...rules, widenUpToS: 10 } }
    expect(siteRulesSchema.safeParse(wrong).error?.issues[0]?.path).toEqual(['gaps', 'widenUpToS'])
    const cold = { ...defaultSiteRules, dose: { ...model, zC: 0 } }
    expect(siteRulesSchema.safeParse(cold).success).toBe(false)
    expect(siteRulesSchema.safeParse({ ...defaultSiteRules, more: 1 }).success).toBe(false)
  })
})
