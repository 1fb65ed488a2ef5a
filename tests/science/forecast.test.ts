import fc from 'fast-check'
import { describe, expect, test } from 'vitest'

import type { ForecastInput } from '../../lib/science/forecast'
import { forecastDose, planFrom } from '../../lib/science/forecast'
import { equivalentMinutes } from '../../lib/science/heat-dose'
import { defaultSiteRules } from '../../lib/science/site-rules'

const model = defaultSiteRules.dose

const atHold: ForecastInput = {
  doseMin: 4,
  tempC: 200,
  climbCPerMin: 0,
  planRemaining: [
    { timeS: 0, tempC: 200 },
    { timeS: 600, tempC: 200 },
  ],
  targetDoseMin: 14,
  toleranceLog10: 0.12,
  woodMaxTempC: 230,
  climbMaxCPerMin: 12,
  intervalLog10: 0.045,
  model,
  rules: defaultSiteRules.forecast,
}

describe('a forecast', () => {
  test('at the reference temperature minutes to target are the minutes missing', () => {
    const forecast = forecastDose(atHold)
    expect(forecast.held.minutesToTarget).toBeCloseTo(10, 6)
    expect(forecast.plan.minutesToTarget).toBeCloseTo(10, 6)
    expect(forecast.climb.minutesToTarget).toBeCloseTo(10, 6)
    expect(forecast.plan.doseAtPlannedEndMin).toBeCloseTo(14, 9)
    expect(forecast.advice).toMatchObject({ kind: 'no extra time', minutes: 0 })
  })

  test('the interval of the dose becomes an interval of minutes', () => {
    const { plan } = forecastDose(atHold)
    expect(plan.earliestMinutes).toBeCloseTo(14 / 10 ** 0.045 - 4, 6)
    expect(plan.latestMinutes).toBeCloseTo(14 * 10 ** 0.045 - 4, 6)
  })

  test('a present climb is kept to the wood maximum and held there', () => {
    const forecast = forecastDose({ ...atHold, climbCPerMin: 10 })
    // 200 to 230 °C in 3 min, then 230: closed form of SCIENCE §2.
    const ramp = equivalentMinutes(model, [
      { timeS: 0, tempC: 200 },
      { timeS: 180, tempC: 230 },
    ])
    const rate = 10 ** (30 / 34)
    expect(forecast.climb.minutesToTarget).toBeCloseTo(3 + (10 - ramp) / rate, 6)
    expect(forecast.climb.minutesToTarget).toBeLessThan(forecast.held.minutesToTarget ?? 0)
  })

  test('wood below the base, or falling, does not reach the target', () => {
    const cold = forecastDose({ ...atHold, tempC: 110, planRemaining: [{ timeS: 0, tempC: 110 }] })
    expect(cold.held.minutesToTarget).toBeNull()
    expect(cold.plan.minutesToTarget).toBeNull()
    expect(cold.advice.kind).toBe('out of reach')
    expect(forecastDose({ ...atHold, climbCPerMin: -20 }).climb.minutesToTarget).toBeNull()
  })

  test('a firing off the plan comes back to it no faster than the climb maximum', () => {
    const behind = {
      ...atHold,
      tempC: 140,
      planRemaining: [
        { timeS: 0, tempC: 200 },
        { timeS: 1800, tempC: 200 },
      ],
    }
    const fast = forecastDose({ ...behind, climbMaxCPerMin: null })
    const slow = forecastDose({ ...behind, climbMaxCPerMin: 6 })
    expect(slow.plan.minutesToTarget).toBeGreaterThan(fast.plan.minutesToTarget ?? 99)
    // Ten minutes from 140 to 200 at 6 °C/min, then along the plan.
    const back = equivalentMinutes(model, [
      { timeS: 0, tempC: 140 },
      { timeS: 600, tempC: 200 },
    ])
    expect(slow.plan.minutesToTarget).toBeCloseTo(10 + (10 - back), 6)
  })

  test('advice is to hold longer, rest early, or rest now, by where the plan’s line ends', () => {
    expect(forecastDose({ ...atHold, doseMin: 0.4 }).advice).toEqual({
      kind: 'hold longer',
      minutes: 4,
      sentence: 'On the plan from here, hold 4 min longer.',
    })
    expect(forecastDose({ ...atHold, doseMin: 9 }).advice).toMatchObject({ kind: 'rest early', minutes: 5 })
    expect(forecastDose({ ...atHold, doseMin: 14 }).advice.kind).toBe('rest now')
    expect(
      forecastDose({ ...atHold, doseMin: 13, planRemaining: [{ timeS: 0, tempC: 200 }] }).advice.kind,
    ).toBe('rest now')
  })

  test('a wrong argument is named', () => {
    expect(() => forecastDose({ ...atHold, tempC: NaN })).toThrow(/^tempC/)
    expect(() => forecastDose({ ...atHold, targetDoseMin: 0 })).toThrow(/^targetDoseMin/)
    expect(() => forecastDose({ ...atHold, planRemaining: [] })).toThrow(/^planRemaining/)
    expect(() => forecastDose({ ...atHold, planRemaining: [{ timeS: 5, tempC: 1 }] })).toThrow(
      /^planRemaining/,
    )
  })
})

describe('the plan from a moment on', () => {
  const plan = [
    { timeS: 0, tempC: 60 },
    { timeS: 600, tempC: 120 },
    { timeS: 1200, tempC: 120 },
  ]

  test('begins at the plan’s temperature then, and ends where the plan does', () => {
    expect(planFrom(plan, 300)).toEqual([
      { timeS: 0, tempC: 90 },
      { timeS: 300, tempC: 120 },
      { timeS: 900, tempC: 120 },
    ])
    expect(planFrom(plan, 600)).toEqual([
      { timeS: 0, tempC: 120 },
      { timeS: 600, tempC: 120 },
    ])
    expect(planFrom(plan, 5000)).toEqual([{ timeS: 0, tempC: 120 }])
    expect(planFrom(plan, -10)).toEqual(plan)
  })
})

const anyForecast = fc
  .record({
    doseMin: fc.double({ min: 0, max: 60, noNaN: true }),
    tempC: fc.double({ min: 20, max: 240, noNaN: true }),
    climbCPerMin: fc.double({ min: -15, max: 15, noNaN: true }),
    targetDoseMin: fc.double({ min: 0.05, max: 60, noNaN: true }),
    intervalLog10: fc.double({ min: 0, max: 0.3, noNaN: true }),
    woodMaxTempC: fc.option(fc.double({ min: 150, max: 240, noNaN: true })),
    climbMaxCPerMin: fc.option(fc.double({ min: 1, max: 20, noNaN: true })),
    legs: fc.array(
      fc.record({
        durationS: fc.integer({ min: 0, max: 1500 }),
        tempC: fc.double({ min: 40, max: 230, noNaN: true }),
      }),
      { maxLength: 5 },
    ),
    planTempC: fc.double({ min: 40, max: 230, noNaN: true }),
  })
  .map(({ legs, planTempC, ...rest }): ForecastInput => {
    const planRemaining = [{ timeS: 0, tempC: planTempC }]
    for (const leg of legs) {
      planRemaining.push({ timeS: (planRemaining.at(-1)?.timeS ?? 0) + leg.durationS, tempC: leg.tempC })
    }
    return { ...atHold, ...rest, planRemaining }
  })

describe('laws of the forecast', () => {
  test('law: earliest, expected and latest are in order, and a reached target is 0 min away on every line', () => {
    fc.assert(
      fc.property(anyForecast, (input) => {
        const forecast = forecastDose(input)
        for (const line of [forecast.held, forecast.climb, forecast.plan]) {
          const earliest = line.earliestMinutes ?? Infinity
          const expected = line.minutesToTarget ?? Infinity
          const latest = line.latestMinutes ?? Infinity
          expect(earliest).toBeLessThanOrEqual(expected + 1e-6)
          expect(expected).toBeLessThanOrEqual(latest + 1e-6)
          expect(line.doseAtPlannedEndMin).toBeGreaterThanOrEqual(input.doseMin)
          expect(line.lowAtPlannedEndMin).toBeLessThanOrEqual(line.doseAtPlannedEndMin)
          expect(line.highAtPlannedEndMin).toBeGreaterThanOrEqual(line.doseAtPlannedEndMin)
          expect(line.minutesToTarget === 0).toBe(input.doseMin >= input.targetDoseMin)
        }
      }),
      { seed: 20260306, numRuns: 400 },
    )
  })

  test('law: advice never contradicts the plan’s line beside it', () => {
    fc.assert(
      fc.property(anyForecast, (input) => {
        const { plan, advice, minutesToPlannedEnd } = forecastDose(input)
        const low = input.targetDoseMin * 10 ** -input.toleranceLog10
        const high = input.targetDoseMin * 10 ** input.toleranceLog10
        const minutes = plan.minutesToTarget
        const isWithin =
          plan.doseAtPlannedEndMin >= low * (1 - 1e-9) && plan.doseAtPlannedEndMin <= high * (1 + 1e-9)
        switch (advice.kind) {
          case 'rest now': {
            const isAlmost = minutes !== null && minutes < 0.5 && plan.doseAtPlannedEndMin > high
            expect(minutes === 0 || isAlmost || (minutesToPlannedEnd === 0 && isWithin)).toBe(true)
            break
          }
          case 'hold longer':
            expect(Math.round((minutes ?? NaN) - minutesToPlannedEnd)).toBe(advice.minutes)
            expect(plan.doseAtPlannedEndMin).toBeLessThan(low)
            break
          case 'rest early':
            expect(Math.round((minutes ?? NaN) - minutesToPlannedEnd)).toBe(-advice.minutes)
            expect(advice.minutes).toBeLessThanOrEqual(minutesToPlannedEnd)
            expect(plan.doseAtPlannedEndMin).toBeGreaterThan(high)
            break
          case 'out of reach':
            expect(minutes).toBeNull()
            expect(plan.doseAtPlannedEndMin).toBeLessThan(low)
            break
          case 'no extra time':
            expect(isWithin || Math.abs((minutes ?? NaN) - minutesToPlannedEnd) <= 0.5).toBe(true)
        }
      }),
      { seed: 20260307, numRuns: 600 },
    )
  })

  test('law: advice never contradicts the other lines, and its words are those of its kind', () => {
    fc.assert(
      fc.property(anyForecast, (input) => {
        const { held, climb, plan, advice } = forecastDose(input)
        for (const line of [held, climb, plan]) {
          // Reached is reached whatever is assumed: nobody is told to go on, or that it is out of reach.
          if (line.minutesToTarget === 0) expect(advice.kind).toBe('rest now')
        }
        const says = advice.sentence.toLowerCase()
        expect(says.includes('rest now')).toBe(advice.kind === 'rest now')
        expect(says.includes('no extra time')).toBe(advice.kind === 'no extra time')
        expect(/hold \d+ min longer/.test(says)).toBe(advice.kind === 'hold longer')
        expect(/rest \d+ min sooner/.test(says)).toBe(advice.kind === 'rest early')
        if (advice.kind === 'hold longer' || advice.kind === 'rest early') {
          expect(says).toContain(` ${advice.minutes} min `)
          expect(advice.minutes).toBeGreaterThan(0)
        } else expect(advice.minutes).toBe(0)
      }),
      { seed: 20260309, numRuns: 400 },
    )
  })

  test('law: if the true dose is off by anything inside its interval, it comes to the target inside the minutes given', () => {
    fc.assert(
      fc.property(anyForecast, fc.double({ min: -1, max: 1, noNaN: true }), (input, part) => {
        const truth = 10 ** (part * input.intervalLog10)
        const { plan } = forecastDose(input)
        // A true dose that is `truth` times the read one is at the target when the read one is at target ÷ truth.
        const { plan: real } = forecastDose({ ...input, targetDoseMin: input.targetDoseMin / truth })
        const minutes = real.minutesToTarget ?? Infinity
        expect(minutes).toBeGreaterThanOrEqual((plan.earliestMinutes ?? Infinity) - 1e-6)
        expect(minutes).toBeLessThanOrEqual((plan.latestMinutes ?? Infinity) + 1e-6)
        const trueEndMin = real.doseAtPlannedEndMin * truth
        expect(trueEndMin).toBeGreaterThanOrEqual(plan.lowAtPlannedEndMin * (1 - 1e-9))
        expect(trueEndMin).toBeLessThanOrEqual(plan.highAtPlannedEndMin * (1 + 1e-9))
      }),
      { seed: 20260310, numRuns: 300 },
    )
  })

  test('law: a firing on its plan reaches the plan’s dose at the plan’s end, and is told no extra time until then', () => {
    const legs = fc.array(
      fc.record({
        durationS: fc.integer({ min: 30, max: 1500 }),
        tempC: fc.double({ min: 125, max: 225, noNaN: true }),
      }),
      { minLength: 1, maxLength: 5 },
    )
    fc.assert(
      fc.property(legs, fc.double({ min: 0, max: 1, noNaN: true }), (stages, share) => {
        const plan = [{ timeS: 0, tempC: 60 }]
        for (const leg of stages) {
          plan.push({ timeS: (plan.at(-1)?.timeS ?? 0) + leg.durationS, tempC: leg.tempC })
        }
        const endS = plan.at(-1)?.timeS ?? 0
        const atS = share * endS
        const planRemaining = planFrom(plan, atS)
        const tempC = planRemaining[0]?.tempC ?? NaN
        const passed = [...plan.filter((point) => point.timeS <= atS), { timeS: atS, tempC }]
        const forecast = forecastDose({
          ...atHold,
          planRemaining,
          tempC,
          doseMin: equivalentMinutes(model, passed),
          targetDoseMin: equivalentMinutes(model, plan),
        })
        expect(forecast.minutesToPlannedEnd).toBeCloseTo((endS - atS) / 60, 9)
        expect(forecast.plan.minutesToTarget).toBeCloseTo((endS - atS) / 60, 3)
        expect(forecast.plan.doseAtPlannedEndMin / equivalentMinutes(model, plan)).toBeCloseTo(1, 9)
        expect(['no extra time', 'rest now']).toContain(forecast.advice.kind)
        if (share < 0.999) expect(forecast.advice.kind).toBe('no extra time')
      }),
      { seed: 20260311, numRuns: 300 },
    )
  })

  test('law: the dose at the time that a line names is the target', () => {
    fc.assert(
      fc.property(anyForecast, (input) => {
        const { held } = forecastDose(input)
        if (held.minutesToTarget === null || held.minutesToTarget === 0) return
        const curve = [
          { timeS: 0, tempC: input.tempC },
          { timeS: held.minutesToTarget * 60, tempC: input.tempC },
        ]
        const doseMin = input.doseMin + equivalentMinutes(model, curve)
        expect(Math.abs(doseMin / input.targetDoseMin - 1)).toBeLessThan(1e-6)
      }),
      { seed: 20260308, numRuns: 400 },
    )
  })
})
