import fc from 'fast-check'
import { describe, expect, test } from 'vitest'

import type { ReadingSeries } from '../../lib/science/gaps'
import { equivalentMinutes } from '../../lib/science/heat-dose'
import { planCurve, planTempCAt } from '../../lib/science/plan'
import { ruleset1, scoreFiring } from '../../lib/science/score'
import { climbsCPerMin, findHeldAbove } from '../../lib/science/score-limits'
import { describeScore, describeTerm } from '../../lib/science/score-sentences'
import { bandHalfWidthC } from '../../lib/science/plan-band'
import { matchStages } from '../../lib/science/score-stages'
import type { Score, ScoreInput, ScoreRecipe, ScoreTermKey } from '../../lib/science/score-types'
import { defaultSiteRules, siteRulesSchema } from '../../lib/science/site-rules'

const place = { height: 'bilge', side: 'A', depthMm: 2, mounting: 'drilled from the face' }

const recipe: ScoreRecipe = {
  planStartTempC: 60,
  stages: [
    { name: 'Warm', kind: 'ramp', targetTempC: 140, minutes: 12, bandC: 7 },
    { name: 'Climb', kind: 'ramp', targetTempC: 188, minutes: 8, bandC: 7 },
    { name: 'Hold', kind: 'hold', targetTempC: 188, minutes: 18, bandC: 7 },
    { name: 'Deepen', kind: 'ramp', targetTempC: 198, minutes: 7, bandC: 7 },
  ],
  doseTargetMin: null,
  doseToleranceLog10: 0.12,
  leadPlace: place,
  thicknessMm: 27,
  limits: { woodMaxTempC: 230, climbMaxCPerMin: 15, spreadMaxC: 8 },
  preheat: { moistureMinPercent: 15, moistureMaxPercent: 25, minutesMin: 15 },
  bend: { minutesMin: 10 },
}

const stages = recipe.stages.map(({ kind, targetTempC, minutes }) => ({
  kind,
  targetTempC,
  durationS: minutes * 60,
}))
const plan = planCurve(recipe.planStartTempC, stages)
const planEndS = 45 * 60

function planC(timeS: number): number {
  return planTempCAt(plan, Math.min(Math.max(timeS, 0), planEndS)) ?? NaN
}

/** Readings from `fromS` to `toS` by a curve; the plan by default. */
function readings(
  tempCAt: (timeS: number) => number = planC,
  { fromS = 0, toS = planEndS, spacingS = 1 } = {},
): ReadingSeries {
  const count = Math.round((toS - fromS) / spacingS) + 1
  const timeS = Float64Array.from({ length: count }, (_, i) => fromS + i * spacingS)
  return { timeS, tempC: timeS.map(tempCAt), spacingS }
}

function firing(change: Partial<ScoreInput> = {}, facts: Partial<ScoreInput['firing']> = {}): ScoreInput {
  return {
    recipe,
    firing: {
      restStartS: planEndS,
      stageMarks: [
        { stageIndex: 1, timeS: 720 },
        { stageIndex: 2, timeS: 1200 },
        { stageIndex: 3, timeS: 2280 },
      ],
      preheatMinutes: 15,
      moisturePercent: 20,
      moistureMethod: 'meter',
      bendMinutes: 12,
      roomTempC: 18,
      specificGravity: null,
      leadSwaps: [],
      ...facts,
    },
    lead: readings(),
    opposite: readings((timeS) => planC(timeS) - 3),
    leadProbe: { type: 'K', iecClass: 1, place, check: null },
    rules: defaultSiteRules,
    ...change,
  }
}

function term(score: Score, key: ScoreTermKey) {
  const found = score.terms.find((entry) => entry.key === key)
  if (found === undefined) throw new Error(`no term ${key}`)
  return found
}

/** The uniform offset, °C, that moves the dose by a log10 step: z · step, away from the base. */
const offsetC = (log10Step: number) => 34 * log10Step

/** Readings with a silence taken out of them. */
function without(series: ReadingSeries, fromS: number, toS: number): ReadingSeries {
  const tempC = Float64Array.from(series.tempC, (temp, i) => {
    const time = series.timeS[i] ?? NaN
    return time > fromS && time < toS ? NaN : temp
  })
  return { ...series, tempC }
}

describe('a perfect firing', () => {
  test('has 100 points, loses none in any term, and is in tolerance', () => {
    const score = scoreFiring(firing())
    expect(score.verdict).toBe('in tolerance')
    expect(score.points).toBe(100)
    expect(score.terms.map((entry) => [entry.key, entry.pointsLost])).toEqual([
      ['dose', 0],
      ['inBand', 0],
      ['shape', 0],
      ['stageLengths', 0],
      ['spread', 0],
      ['preheatAndBend', 0],
    ])
    expect(score.terms.reduce((sum, entry) => sum + entry.pointsOf, 0)).toBe(100)
  })

  test('has the plan’s dose, exactly integrated, and its toast depth as a model’s range', () => {
    const score = scoreFiring(firing())
    expect(score.planDoseMin).toBe(equivalentMinutes(defaultSiteRules.dose, plan))
    expect(Math.abs((score.dose?.doseMin ?? 0) / score.planDoseMin - 1)).toBeLessThan(1e-9)
    expect(score.dose?.isAssumed).toBe(true)
    expect(score.dose?.sameMount.log10Half).toBe(0.045)
    // SCIENCE §2: class 1, mount 3 °C and cold junction 0.5 °C as squares are about 26 % (10^0.1).
    expect(score.dose?.absolute?.log10High).toBeCloseTo(0.1, 2)
    const depth = score.toastDepthMm
    expect(depth?.low).toBeLessThan(depth?.value ?? 0)
    expect(depth?.value).toBeLessThan(depth?.high ?? 0)
  })

  test('is scored from its readings bit for bit, and survives JSON unchanged', () => {
    const first = scoreFiring(firing())
    const again = scoreFiring(firing())
    expect(JSON.stringify(again)).toBe(JSON.stringify(first))
    expect(JSON.parse(JSON.stringify(first))).toEqual(first)
    expect(siteRulesSchema.parse(JSON.parse(JSON.stringify(defaultSiteRules)))).toEqual(defaultSiteRules)
  })
})

describe('a stored score', () => {
  /** What a seal and a row keep: everything as JSON text, numbers in their shortest form. */
  const stored = (input: ScoreInput) =>
    JSON.stringify({
      ...input,
      lead: { ...input.lead, timeS: Array.from(input.lead.timeS), tempC: Array.from(input.lead.tempC) },
      opposite: null,
    })
  // The text was made from a ScoreInput two lines above.
  const read = (text: string): ScoreInput => JSON.parse(text) as ScoreInput

  test('law: is deep equal, to the last bit, to the one made again from its stored inputs', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -9, max: 9, noNaN: true }),
        fc.double({ min: 5, max: 200, noNaN: true }),
        fc.double({ min: 0, max: 8, noNaN: true }),
        (offC, wavesS, swingC) => {
          const base = firing()
          const tempC = Float64Array.from(
            base.lead.tempC,
            (value, i) => value + offC + swingC * Math.sin((base.lead.timeS[i] ?? 0) / wavesS),
          )
          const input: ScoreInput = { ...base, opposite: null, lead: { ...base.lead, tempC } }
          const row = JSON.stringify(scoreFiring(input))
          const again = scoreFiring(read(stored(input)))
          expect(JSON.stringify(again)).toBe(row)
          expect(JSON.parse(JSON.stringify(again))).toStrictEqual(JSON.parse(row))
          const figures: number[] = []
          JSON.parse(row, (_, value: unknown) => {
            if (typeof value === 'number') figures.push(value)
            return value
          })
          expect(figures.length).toBeGreaterThan(40)
          expect(figures.every((figure) => Object.is(Number(String(figure)), figure))).toBe(true)
        },
      ),
      { seed: 20260330, numRuns: 25 },
    )
  })

  test('depends on the rules that it names: another z gives another score', () => {
    const base = firing()
    const rules = { ...base.rules, dose: { ...base.rules.dose, zC: 30 } }
    expect(scoreFiring({ ...base, rules }).dose?.doseMin).not.toBe(scoreFiring(base).dose?.doseMin)
  })
})

describe('the dose term and the verdict', () => {
  const shifted = (log10Step: number) =>
    scoreFiring(firing({ lead: readings((timeS) => planC(timeS) + offsetC(log10Step)) }))

  test('loss is linear from the tolerance to three times it', () => {
    const at = (log10Step: number) => {
      const entry = term(shifted(log10Step), 'dose')
      const measured = Math.abs(entry.measured ?? NaN)
      expect(entry.pointsLost).toBeCloseTo(45 * Math.min(1, Math.max(0, (measured - 0.12) / 0.24)), 1)
      return entry.pointsLost
    }
    expect(at(0.11)).toBe(0)
    expect(at(-0.11)).toBe(0)
    expect(at(0.24)).toBeGreaterThan(22)
    expect(at(0.24)).toBeLessThan(23.5)
    expect(at(0.37)).toBe(45)
    expect(at(-0.4)).toBe(45)
  })

  test('is in tolerance, cannot tell, or out by where the same-mount interval lies', () => {
    expect(shifted(0.06).verdict).toBe('in tolerance')
    expect(shifted(-0.07).verdict).toBe('in tolerance')
    expect(shifted(0.1).verdict).toBe('cannot tell')
    expect(shifted(-0.14).verdict).toBe('cannot tell')
    expect(shifted(0.18).verdict).toBe('out of tolerance')
    expect(shifted(-0.18).verdict).toBe('out of tolerance')
  })

  test('a given dose target replaces the plan’s', () => {
    const target = scoreFiring(firing()).planDoseMin * 2
    const score = scoreFiring(firing({ recipe: { ...recipe, doseTargetMin: target } }))
    expect(score.targetDoseMin).toBe(target)
    expect(score.deltaLog10).toBeCloseTo(-Math.log10(2), 9)
  })

  test('wood that never passed the base has no dose, loses all of it, and is out of tolerance', () => {
    const score = scoreFiring(firing({ lead: readings((timeS) => 60 + timeS / 100) }))
    expect(score.dose?.doseMin).toBe(0)
    expect(term(score, 'dose').pointsLost).toBe(45)
    expect(term(score, 'inBand').pointsLost).toBe(15)
    expect(term(score, 'shape').isMeasured).toBe(false)
    expect(score.verdict).toBe('out of tolerance')
    expect(JSON.parse(JSON.stringify(score))).toEqual(score)
  })

  test('the site’s own repeatability replaces the assumed one and takes drift with it', () => {
    const errors = { ...defaultSiteRules.errors, sameMountLog10: 0.03, isSameMountAssumed: false, driftC: 1 }
    const score = scoreFiring(firing({ rules: { ...defaultSiteRules, errors } }))
    expect(score.dose?.isAssumed).toBe(false)
    expect(score.dose?.sameMount.log10High).toBeCloseTo(Math.hypot(0.03, 1 / 34), 3)
  })
})

describe('band and shape', () => {
  test('on a ramp the band is the wider of ±°C and ±2 min along time', () => {
    const band = (kind: 'ramp' | 'hold', startTempC: number, endTempC: number, minutes: number) =>
      bandHalfWidthC({ kind, startTempC, endTempC, durationS: minutes * 60, bandC: 7 })
    expect(band('ramp', 140, 188, 8)).toBe(12)
    expect(band('ramp', 188, 198, 7)).toBe(7)
    expect(band('hold', 188, 188, 18)).toBe(7)
    // Moved along time the line never leaves the ramp's ends.
    expect(band('ramp', 140, 188, 1)).toBe(48)
    expect(band('ramp', 140, 188, 0)).toBe(48)
  })

  test('a share of 60 % in band loses 9 of 15', () => {
    // Out of band by 20 °C for the last part: the share is measured, the loss follows from it.
    const score = scoreFiring(firing({ lead: readings((timeS) => planC(timeS) + (timeS > 1896 ? 20 : 0)) }))
    const entry = term(score, 'inBand')
    const aboveS = planEndS - 12 * 45
    expect(entry.measured).toBeCloseTo((100 * (1896 - 540)) / aboveS, 0)
    expect(entry.pointsLost).toBeCloseTo((15 * (90 - (entry.measured ?? 0))) / 50, 1)
  })

  test('wet wood that lingers near 100 °C is not punished for it by band or shape', () => {
    // Ten minutes behind in drying, then on the plan again before 120 °C is passed.
    const wet = (timeS: number) => (planC(timeS) <= 119 ? Math.min(planC(timeS), 95) : planC(timeS))
    const score = scoreFiring(firing({ lead: readings(wet) }))
    expect(term(score, 'inBand').pointsLost).toBe(0)
    expect(term(score, 'shape').pointsLost).toBe(0)
  })

  test('a curve just inside its band is all in it, one just outside not at all', () => {
    const off = (bands: number) => (timeS: number) =>
      planC(timeS) + bands * (timeS < 720 ? 80 / 6 : timeS < 1200 ? 12 : 7)
    expect(term(scoreFiring(firing({ lead: readings(off(0.98)) })), 'inBand').measured).toBeGreaterThan(99)
    expect(term(scoreFiring(firing({ lead: readings(off(-0.98)) })), 'inBand').measured).toBeGreaterThan(99)
    expect(term(scoreFiring(firing({ lead: readings(off(1.04)) })), 'inBand').measured).toBeLessThan(1)
    expect(term(scoreFiring(firing({ lead: readings(off(-1.04)) })), 'inBand').measured).toBeLessThan(1)
  })

  test('a constant deviation of two bands is a shape of 2 and loses half', () => {
    const deviation = (timeS: number) => {
      const half = timeS < 720 ? 80 / 6 : timeS < 1200 ? 12 : 7
      return planC(timeS) + 2 * half
    }
    const entry = term(scoreFiring(firing({ lead: readings(deviation) })), 'shape')
    expect(entry.measured).toBeCloseTo(2, 2)
    expect(entry.pointsLost).toBeCloseTo(5, 1)
  })

  test('a stage that took longer, marked, is aligned: the curve is in band, its length is what loses', () => {
    const slowC = (timeS: number) =>
      planC(timeS <= 720 ? timeS : timeS <= 1320 ? 720 + (timeS - 720) * 0.8 : timeS - 120)
    const score = scoreFiring(
      firing(
        { lead: readings(slowC, { toS: planEndS + 120 }), opposite: null },
        {
          restStartS: planEndS + 120,
          stageMarks: [
            { stageIndex: 1, timeS: 720 },
            { stageIndex: 2, timeS: 1320 },
            { stageIndex: 3, timeS: 2400 },
          ],
        },
      ),
    )
    expect(term(score, 'shape').measured).toBeCloseTo(0, 6)
    expect(term(score, 'inBand').measured).toBeCloseTo(100, 6)
    const lengths = term(score, 'stageLengths')
    expect(lengths.detail).toBe('Climb')
    expect(lengths.measured).toBeCloseTo(25, 9)
    expect(lengths.pointsLost).toBeCloseTo((10 * 15) / 40, 1)
  })
})

describe('stages', () => {
  test('without marks they are matched by the plan’s times, the last one to rest start', () => {
    const matched = matchStages(recipe.stages, [], planEndS + 60)
    expect(matched.map((stage) => stage.startS)).toEqual([0, 720, 1200, 2280])
    expect(matched[3]?.actualMinutes).toBe(8)
    expect(matched.every((stage) => !stage.isMarked)).toBe(true)
  })

  test('a stage without a mark begins after the plan’s minutes, or at the next mark if that is sooner', () => {
    const matched = matchStages(recipe.stages, [{ stageIndex: 2, timeS: 600 }], planEndS)
    expect(matched.map((stage) => stage.startS)).toEqual([0, 600, 600, 1680])
  })

  test('law: whatever the marks, stages are in order and fill the toast', () => {
    fc.assert(
      fc.property(
        fc.array(
          fc.record({
            stageIndex: fc.integer({ min: -2, max: 6 }),
            timeS: fc.double({ min: -500, max: 5000 }),
          }),
        ),
        fc.double({ min: 1, max: 6000, noNaN: true }),
        (marks, restStartS) => {
          const matched = matchStages(recipe.stages, marks, restStartS)
          expect(matched[0]?.startS).toBe(0)
          expect(matched.at(-1)?.endS).toBe(restStartS)
          matched.forEach((stage, i) => {
            expect(stage.endS).toBeGreaterThanOrEqual(stage.startS)
            if (i > 0) expect(stage.startS).toBe(matched[i - 1]?.endS)
          })
        },
      ),
      { seed: 20260303, numRuns: 300 },
    )
  })
})

describe('spread, preheat and bend', () => {
  test('a mean spread of twice the limit loses half', () => {
    const entry = term(scoreFiring(firing({ opposite: readings((timeS) => planC(timeS) + 16) })), 'spread')
    expect(entry.measured).toBeCloseTo(16, 9)
    expect(entry.pointsLost).toBe(5)
  })

  test('an opposite probe read at other moments is compared straight between its readings', () => {
    const opposite = readings((timeS) => planC(timeS) - 4, { fromS: -5.3, toS: planEndS + 7, spacingS: 1.7 })
    expect(term(scoreFiring(firing({ opposite })), 'spread').measured).toBeCloseTo(4, 2)
  })

  test('the worst of moisture, preheat and pull counts, with half the minimum or 5 % points losing all', () => {
    const lost = (facts: Partial<ScoreInput['firing']>) => {
      const entry = term(scoreFiring(firing({}, facts)), 'preheatAndBend')
      return [entry.detail, entry.pointsLost]
    }
    expect(lost({ bendMinutes: 7.5 })).toEqual(['bend', 5])
    expect(lost({ bendMinutes: 5 })).toEqual(['bend', 10])
    expect(lost({ preheatMinutes: 9, bendMinutes: 8 })).toEqual(['preheat', 8])
    expect(lost({ moisturePercent: 27 })).toEqual(['moisture', 4])
    expect(lost({ moisturePercent: 9 })).toEqual(['moisture', 10])
  })

  test('a term that cannot be measured is left out, said, and the rest rescaled', () => {
    const score = scoreFiring(
      firing(
        { opposite: null, lead: readings((timeS) => planC(timeS) + offsetC(0.24)) },
        { bendMinutes: null },
      ),
    )
    const spread = term(score, 'spread')
    expect(spread.isMeasured).toBe(false)
    expect(spread.pointsLost).toBeNull()
    expect(spread.sentence).toContain('left out')
    const lost = score.terms.reduce((sum, entry) => sum + (entry.pointsLost ?? 0), 0)
    expect(lost).toBeGreaterThan(20)
    expect(score.points).toBeCloseTo((100 * (90 - lost)) / 90, 1)
  })
})

describe('limits', () => {
  const peak = (heldS: number) => (timeS: number) =>
    timeS >= 2000 && timeS <= 2000 + heldS ? 235 : planC(timeS)

  test('the wood maximum is broken when exceeded for longer than 10 s, and only then', () => {
    const short = scoreFiring(
      firing({
        recipe: { ...recipe, limits: { ...recipe.limits, climbMaxCPerMin: null } },
        lead: readings(peak(8)),
      }),
    )
    expect(short.limitsBroken).toEqual([])
    const long = scoreFiring(
      firing({
        recipe: { ...recipe, limits: { ...recipe.limits, climbMaxCPerMin: null } },
        lead: readings(peak(12)),
      }),
    )
    expect(long.limitsBroken.map((limit) => limit.limit)).toEqual(['wood maximum'])
    expect(long.verdict).toBe('limit broken')
    expect(long.points).not.toBeNull()
  })

  test('readings that touch the limit do not break it', () => {
    const series = { timeS: [0, 20, 40, 60], tempC: [230, 230, 230, 230] }
    expect(findHeldAbove(series, 230, { fromS: 0, toS: 100 }, 10, 30)).toBeNull()
  })

  test('a silence between two high readings proves nothing', () => {
    const series = { timeS: [0, 5, 300, 305], tempC: [240, 240, 240, 240] }
    expect(findHeldAbove(series, 230, { fromS: 0, toS: 400 }, 10, 30)).toBeNull()
  })

  test('the climb is taken over a minute: a steady climb is exact, noise does not break it', () => {
    const steady = {
      timeS: Array.from({ length: 200 }, (_, i) => i),
      tempC: Array.from({ length: 200 }, (_, i) => 20 + i / 5),
    }
    const climbs = climbsCPerMin(steady, 60)
    expect(climbs[59]).toBeNaN()
    expect(climbs[60]).toBeCloseTo(12, 9)
    expect(climbs[199]).toBeCloseTo(12, 9)
    const noisy = scoreFiring(
      firing({ lead: readings((timeS) => planC(timeS) + (timeS % 2 === 0 ? 1 : -1)) }),
    )
    expect(noisy.limitsBroken).toEqual([])
    const fast = scoreFiring(
      firing({ recipe: { ...recipe, limits: { ...recipe.limits, climbMaxCPerMin: 6 } } }),
    )
    expect(fast.limitsBroken.map((limit) => limit.limit)).toEqual(['climb maximum'])
    expect(fast.limitsBroken[0]?.measured).toBeCloseTo(80 / 12, 6)
  })
})

describe('incomplete', () => {
  const cases: [string, ScoreInput][] = [
    ['a gap of more than 3 min', firing({ lead: without(readings(), 1500, 1700) })],
    [
      'gaps of more than 5 % of the toast in all',
      firing({
        lead: [600, 900, 1200, 1500, 1800, 2100].reduce(
          (lead, atS) => without(lead, atS, atS + 27),
          readings(),
        ),
      }),
    ],
    ['no rest start', firing({}, { restStartS: null })],
    [
      'a lead probe at another depth',
      firing({ leadProbe: { type: 'K', iecClass: 1, check: null, place: { ...place, depthMm: 3 } } }),
    ],
    [
      'a lead probe at the head end',
      firing({ leadProbe: { type: 'K', iecClass: 1, check: null, place: { ...place, height: 'head' } } }),
    ],
    ['a swap to another place', firing({}, { leadSwaps: [{ timeS: 900, isSamePlace: false }] })],
    ['no reading at all', firing({ lead: { timeS: [], tempC: [], spacingS: 1 } })],
  ]

  test.each(cases)('%s leaves the firing unscored and says why', (_, input) => {
    const score = scoreFiring(input)
    expect(score.verdict).toBe('incomplete')
    expect(score.points).toBeNull()
    expect(score.deltaLog10).toBeNull()
    expect(score.terms.every((entry) => entry.pointsLost === null)).toBe(true)
    expect(score.incompleteReasons.length).toBeGreaterThan(0)
    expect(JSON.parse(JSON.stringify(score))).toEqual(score)
  })

  test('incomplete wins over a broken limit', () => {
    const lead = without(
      readings((timeS) => (timeS > 2000 ? 240 : planC(timeS))),
      1200,
      1500,
    )
    const score = scoreFiring(firing({ lead }))
    expect(score.limitsBroken.length).toBeGreaterThan(0)
    expect(score.verdict).toBe('incomplete')
  })

  test('a swap at the same place goes on', () => {
    expect(scoreFiring(firing({}, { leadSwaps: [{ timeS: 900, isSamePlace: true }] })).points).toBe(100)
  })

  test('a gap of 1 to 2 min is joined and the interval is wider than without it', () => {
    const whole = scoreFiring(firing())
    const gapped = scoreFiring(firing({ lead: without(readings(), 1200, 1300) }))
    expect(gapped.gaps.map((gap) => gap.treatment)).toEqual(['widened'])
    expect(gapped.verdict).toBe('in tolerance')
    const climbing = scoreFiring(firing({ lead: without(readings(), 1000, 1110) }))
    expect(climbing.dose?.sameMount.log10Low).toBeGreaterThan(whole.dose?.sameMount.log10Low ?? 1)
    expect(climbing.dose?.sameMount.log10High).toBeGreaterThan(whole.dose?.sameMount.log10High ?? 1)
  })
})

describe('doses beside the toast', () => {
  test('bend and rest dose are shown beside the score and are no part of it', () => {
    const lead = readings((timeS) => (timeS < 0 ? 130 : timeS > planEndS ? 180 : planC(timeS)), {
      fromS: -600,
      toS: planEndS + 300,
    })
    const beside = scoreFiring(firing({ lead }))
    expect(beside.bendDoseMin).toBeCloseTo((599 / 60) * 10 ** (-70 / 34), 2)
    expect(beside.restDoseMin).toBeGreaterThan(1)
    expect(beside.dose?.doseMin).toBe(scoreFiring(firing()).dose?.doseMin)
  })

  test('slow and fast index of a firing on plan are the plan’s', () => {
    const score = scoreFiring(firing())
    expect(Math.abs((score.slowIndexMin ?? 0) / score.planSlowIndexMin - 1)).toBeLessThan(1e-7)
    expect(Math.abs((score.fastIndexMin ?? 0) / score.planFastIndexMin - 1)).toBeLessThan(1e-7)
  })
})

describe('sentences', () => {
  test('say each term’s figures and points, in °F with differences converted as differences', () => {
    const score = scoreFiring(firing({ opposite: readings((timeS) => planC(timeS) + 16) }))
    expect(term(score, 'spread').sentence).toBe(
      'The two opposite probes differed by 16.0 °C on average; the recipe allows 8.0 °C. 5.0 of 10 points lost.',
    )
    const context = {
      doseMin: score.dose?.doseMin ?? null,
      targetDoseMin: score.targetDoseMin,
      refTempC: 200,
    }
    expect(describeTerm(term(score, 'spread'), context, 'F')).toContain(
      '28.8 °F on average; the recipe allows 14.4 °F',
    )
    expect(describeTerm(term(score, 'dose'), context, 'F')).toContain('min at 392 °F')
    expect(score.sentences[0]).toMatch(/^In tolerance/)
    expect(describeScore(score, 200)).toEqual(score.sentences)
  })
})

describe('laws of the score', () => {
  const anyFiring = fc
    .record({
      offset: fc.double({ min: -40, max: 40, noNaN: true }),
      wave: fc.double({ min: 0, max: 25, noNaN: true }),
      period: fc.double({ min: 60, max: 1500, noNaN: true }),
      restStartS: fc.integer({ min: 300, max: 4000 }),
      spacingS: fc.constantFrom(0.5, 1, 2, 5),
      gapAtS: fc.integer({ min: 0, max: 3000 }),
      gapS: fc.constantFrom(0, 20, 100, 400),
      bendMinutes: fc.option(fc.double({ min: 0, max: 30, noNaN: true })),
      moisturePercent: fc.option(fc.double({ min: 0, max: 40, noNaN: true })),
      marks: fc.array(
        fc.record({ stageIndex: fc.integer({ min: 1, max: 3 }), timeS: fc.integer({ min: 0, max: 4000 }) }),
      ),
    })
    .map((any) => {
      const curve = (timeS: number) => planC(timeS) + any.offset + any.wave * Math.sin(timeS / any.period)
      const lead = without(
        readings(curve, { toS: any.restStartS + 30, spacingS: any.spacingS }),
        any.gapAtS,
        any.gapAtS + any.gapS,
      )
      return firing(
        { lead },
        {
          restStartS: any.restStartS,
          bendMinutes: any.bendMinutes,
          moisturePercent: any.moisturePercent,
          stageMarks: any.marks,
        },
      )
    })

  test('law: points lie between 0 and 100, the verdict follows the order, and the score is the same again', () => {
    fc.assert(
      fc.property(anyFiring, (input) => {
        const score = scoreFiring(input)
        if (score.points !== null) {
          expect(score.points).toBeGreaterThanOrEqual(0)
          expect(score.points).toBeLessThanOrEqual(100)
        }
        expect(score.points === null).toBe(score.verdict === 'incomplete')
        if (score.incompleteReasons.length > 0) expect(score.verdict).toBe('incomplete')
        else if (score.limitsBroken.length > 0) expect(score.verdict).toBe('limit broken')
        else {
          const delta = Math.abs(score.deltaLog10 ?? Infinity)
          if (score.verdict === 'in tolerance') expect(delta).toBeLessThanOrEqual(0.12)
          if (score.verdict === 'out of tolerance') expect(delta).toBeGreaterThan(0.12)
        }
        for (const entry of score.terms) {
          if (entry.pointsLost === null) continue
          expect(entry.pointsLost).toBeGreaterThanOrEqual(0)
          expect(entry.pointsLost).toBeLessThanOrEqual(entry.pointsOf)
        }
        expect(JSON.stringify(scoreFiring(input))).toBe(JSON.stringify(score))
      }),
      { seed: 20260304, numRuns: 120 },
    )
  })

  test('law: the further the dose is shifted, the more of it is lost, and never a point is won', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0, max: 30, noNaN: true }),
        fc.double({ min: 0, max: 10, noNaN: true }),
        fc.constantFrom(1, -1),
        (shiftC, moreC, sign) => {
          const at = (deltaC: number) =>
            scoreFiring(firing({ lead: readings((timeS) => planC(timeS) + sign * deltaC, { spacingS: 5 }) }))
          const near = at(shiftC)
          const far = at(shiftC + moreC)
          expect(term(far, 'dose').pointsLost).toBeGreaterThanOrEqual(term(near, 'dose').pointsLost ?? 99)
          expect(far.points).toBeLessThanOrEqual(near.points ?? -1)
        },
      ),
      { seed: 20260305, numRuns: 60 },
    )
  })

  test('the ruleset adds up to 100 and names every verdict once', () => {
    expect(ruleset1.termOrder.reduce((sum, key) => sum + ruleset1.terms[key].points, 0)).toBe(100)
    expect(new Set(ruleset1.verdictOrder).size).toBe(5)
  })

  test('a target or tolerance that is no number is refused by its name', () => {
    expect(() => scoreFiring(firing({ recipe: { ...recipe, doseTargetMin: 0 } }))).toThrow(/^doseTargetMin/)
    expect(() => scoreFiring(firing({ recipe: { ...recipe, doseToleranceLog10: NaN } }))).toThrow(
      /^doseToleranceLog10/,
    )
    expect(() => scoreFiring(firing({ lead: { timeS: [0, 2, 1], tempC: [1, 2, 3], spacingS: 1 } }))).toThrow(
      /^timeS/,
    )
  })
})
