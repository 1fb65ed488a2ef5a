import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { parseCues, printCues } from '@/lib/recipes/cue-text'
import type { PlannedContent } from '@/lib/recipes/plan-of'
import { planDoseAt, planDoseCurve, planIndices, planOf } from '@/lib/recipes/plan-of'
import { canonicalJson } from '@/lib/recipes/content-sha256'
import { smallestHonestTolerance } from '@/lib/recipes/honest-tolerance'
import { cueActions, recipeContentSchema } from '@/lib/recipes/schema'
import { startingContent, usualToasts } from '@/lib/recipes/starting-content'
import { ruleset1 } from '@/lib/science/score-ruleset'
import { planLegs } from '@/lib/science/score-stages'
import { defaultSiteRules } from '@/lib/science/site-rules'
import { sampleContent } from '@/tests/support/recipe-content'

const model = defaultSiteRules.dose
const seed = 20_260_202

/** A plan of one hold, reached without a ramp. */
function holdOf(minutes: number, tempC: number): PlannedContent {
  return {
    planStartTempC: tempC,
    stages: [{ name: 'Hold', kind: 'hold', targetTempC: tempC, minutes, bandC: 7 }],
    doseTargetMinutes: null,
    doseToleranceLog10: 0.12,
  }
}

const anyPlan: fc.Arbitrary<PlannedContent> = fc
  .record({
    planStartTempC: fc.double({ min: 20, max: 120, noNaN: true }),
    stages: fc.array(
      fc.record({
        isHold: fc.boolean(),
        targetTempC: fc.double({ min: 60, max: 240, noNaN: true }),
        minutes: fc.double({ min: 0.5, max: 60, noNaN: true }),
        bandC: fc.double({ min: 0.5, max: 20, noNaN: true }),
      }),
      { minLength: 1, maxLength: 8 },
    ),
  })
  .map(({ planStartTempC, stages }) => {
    let reachedC = planStartTempC
    return {
      planStartTempC,
      doseTargetMinutes: null,
      doseToleranceLog10: 0.12,
      stages: stages.map(({ isHold, targetTempC, minutes, bandC }, index) => {
        reachedC = isHold ? reachedC : targetTempC
        const kind = isHold ? ('hold' as const) : ('ramp' as const)
        return { name: `Stage ${index + 1}`, kind, targetTempC: reachedC, minutes, bandC }
      }),
    }
  })

describe('the plan of a recipe', () => {
  // SCIENCE §2, table of holds: minutes at °C → E in minutes at 200 °C, as printed there.
  it.each([
    [30, 125, 0.19, 0.005],
    [35, 165, 3.3, 0.05],
    [40, 185, 14.5, 0.05],
    [45, 205, 63, 0.5],
    [53, 220, 206, 0.9],
  ])('a hold of %i min at %i °C has the dose of the published table', (minutes, tempC, expected, within) => {
    expect(Math.abs(planOf(holdOf(minutes, tempC), model).doseMin - expected)).toBeLessThanOrEqual(within)
  })

  it('law: the doses of its stages add up to its own', () => {
    fc.assert(
      fc.property(anyPlan, (content) => {
        const plan = planOf(content, model)
        const sum = plan.stages.reduce((total, stage) => total + stage.doseMin, 0)
        expect(sum).toBeCloseTo(plan.doseMin, 9)
      }),
      { seed },
    )
  })

  it('law: the dose along it never falls, and ends at the whole', () => {
    fc.assert(
      fc.property(anyPlan, (content) => {
        const plan = planOf(content, model)
        const curve = planDoseCurve(plan.points, model)
        curve.forEach((point, i) => {
          expect(point.doseMin).toBeGreaterThanOrEqual(curve[i - 1]?.doseMin ?? 0)
          const alone = planDoseAt(plan.points, model, point.timeS)
          expect(Math.abs(alone - point.doseMin)).toBeLessThanOrEqual(1e-9 * Math.max(1, alone))
        })
        const end = curve.at(-1)?.doseMin ?? -1
        expect(Math.abs(end - plan.doseMin)).toBeLessThanOrEqual(1e-9 * Math.max(1, plan.doseMin))
      }),
      { seed },
    )
  })

  it('law: the band holds the plan in its middle and is never narrower than the stage’s ± °C', () => {
    fc.assert(
      fc.property(anyPlan, (content) => {
        const plan = planOf(content, model)
        expect(plan.band).toHaveLength(content.stages.length * 2)
        plan.stages.forEach((stage, i) => {
          expect(stage.bandHalfWidthC).toBeGreaterThanOrEqual(content.stages[i]?.bandC ?? Infinity)
        })
        for (const point of plan.band) {
          expect((point.lowC + point.highC) / 2).toBeCloseTo(point.midC, 9)
        }
      }),
      { seed },
    )
  })

  it('law: the band that is drawn is the band that is scored', () => {
    fc.assert(
      fc.property(anyPlan, (recipe) => {
        const drawn = planOf(recipe, model).stages.map((stage) => stage.bandHalfWidthC)
        const scored = planLegs(recipe.planStartTempC, recipe.stages, ruleset1.rampBandMin)
        drawn.forEach((halfWidthC, i) => expect(halfWidthC).toBeCloseTo(scored[i]?.halfWidthC ?? NaN, 9))
      }),
      { seed, numRuns: 200 },
    )
  })
  it('on a ramp the band is the wider of ± °C and 2 min along time (SCIENCE §5)', () => {
    const { stages } = planOf(sampleContent(), model)
    // 90 °C in 12 min is 7.5 °C a minute, 15 °C in 2 min; 34 °C in 9 min is 7.56; a hold keeps its ± 7.
    expect(stages.map((stage) => Math.round(stage.bandHalfWidthC * 100) / 100)).toEqual([15, 7.56, 7])
  })

  it('the target is the plan’s own unless one is set, and its tolerance is in log10 about it', () => {
    const own = planOf(sampleContent(), model)
    expect(own.targetDoseMin).toBe(own.doseMin)
    const set = planOf(sampleContent({ doseTargetMinutes: 10 }), model)
    expect(Math.log10(set.targetHighMin / set.targetDoseMin)).toBeCloseTo(0.12, 12)
    expect(Math.log10(set.targetDoseMin / set.targetLowMin)).toBeCloseTo(0.12, 12)
  })

  it('two plans of one dose differ in their indices: 45 min low and 20 min high (PRODUCT, "Same dose, other flavour")', () => {
    const low = planOf(holdOf(45, 180), model)
    const highC = 200 + 34 * Math.log10(low.doseMin / 20)
    const high = planOf(holdOf(20, highC), model)
    expect(high.doseMin).toBeCloseTo(low.doseMin, 9)
    const indices = (points: typeof low.points) => planIndices(points, defaultSiteRules.indices, 200)
    expect(indices(low.points).slowMin).toBeGreaterThan(indices(high.points).slowMin * 1.05)
    expect(indices(low.points).fastMin).toBeLessThan(indices(high.points).fastMin)
  })
})

describe('a new recipe', () => {
  it('begins valid, with a tolerance that the site can ask, from every usual toast', () => {
    for (const toast of usualToasts) {
      for (const piece of ['barrel', 'head'] as const) {
        const content = startingContent(toast, piece)
        expect(recipeContentSchema.parse(content)).toEqual(content)
        expect(content.doseToleranceLog10).toBeGreaterThanOrEqual(smallestHonestTolerance(defaultSiteRules))
      }
    }
  })

  it('has more dose the heavier its toast', () => {
    const doses = usualToasts.map((toast) => planOf(startingContent(toast, 'barrel'), model).doseMin)
    expect([...doses].sort((a, b) => a - b)).toEqual(doses)
  })
})

describe('the smallest honest tolerance', () => {
  it('is twice the same-mount interval; drift joins once it is measured', () => {
    expect(smallestHonestTolerance(defaultSiteRules)).toBe(0.09)
    const measured = {
      ...defaultSiteRules,
      errors: { ...defaultSiteRules.errors, sameMountLog10: 0.04, driftC: 0.5, isSameMountAssumed: false },
    }
    // 2·√(0.04² + (0.5/34)²) = 0.0852, rounded up.
    expect(smallestHonestTolerance(measured)).toBe(0.086)
  })
})

describe('cues as a typed line', () => {
  const anyCue = fc.record({
    action: fc.constantFrom(...cueActions),
    minute: fc.oneof(
      fc.constant(0),
      fc.integer({ min: 1, max: 240 }),
      fc.double({ min: 0, max: 240, noNaN: true }),
    ),
    words: fc.string({ maxLength: 30 }).map((words) => words.trim()),
  })

  it('law: parse after print is identity', () => {
    fc.assert(
      fc.property(fc.array(anyCue, { maxLength: 12 }), (cues) => {
        // −0 is the stage's start like 0.
        const plain = cues.map((cue) => ({ ...cue, minute: cue.minute + 0 }))
        expect(parseCues(printCues(plain))).toEqual({ cues: plain, fault: null })
      }),
      { seed, numRuns: 500 },
    )
  })

  it('takes what a person would type', () => {
    expect(parseCues('Feed at 6; LID ON at 11,5 ;; stir').cues).toEqual([
      { action: 'feed', minute: 6, words: '' },
      { action: 'lid on', minute: 11.5, words: '' },
      { action: 'stir', minute: 0, words: '' },
    ])
    expect(parseCues('turn over first "two people; slowly"').cues).toEqual([
      { action: 'turn over', minute: 0, words: 'two people; slowly' },
    ])
    expect(parseCues('').cues).toEqual([])
  })

  it('says what it does not understand, and what would do', () => {
    expect(parseCues('fan at 3').fault).toContain('does not begin with an action')
    expect(parseCues('feed at six').fault).toContain('“six” is no minute')
    expect(parseCues('feed 6').fault).toContain('feed at 6')
    expect(parseCues('turning at 3').fault).toContain('does not begin with an action')
  })
})

describe('canonical JSON', () => {
  it('law: is one text whatever order the keys came in', () => {
    fc.assert(
      fc.property(fc.dictionary(fc.string(), fc.jsonValue()), (object) => {
        const turned = Object.fromEntries(Object.entries(object).reverse())
        expect(canonicalJson(turned)).toBe(canonicalJson(object))
        expect(canonicalJson(JSON.parse(canonicalJson(object)))).toBe(canonicalJson(object))
      }),
      { seed },
    )
  })
})
