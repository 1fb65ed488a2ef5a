import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import * as z from 'zod'
import type { CurvePoint, DoseModel } from '../../lib/science/heat-dose'
import {
  arrheniusEquivalentMinutes,
  arrheniusRate,
  createArrheniusSegment,
  createDoseAccumulator,
  createSegmentDose,
  doseRate,
  equivalentMinutes,
  log10Severity,
  zCFromActivationEnergy,
} from '../../lib/science/heat-dose'
import {
  expectClose,
  expectRangeError,
  expectWithin,
  notNumbers,
  numberShape,
  numbersShape,
  propertyRun,
  tableShape,
  testPublished,
} from './published-checks'
import { hold } from './sample-curves'

/** Holds one after another, joined by steps. */
function holds(segments: readonly (readonly number[])[]): CurvePoint[] {
  let timeS = 0
  return segments.flatMap(([minutes, tempC]) => {
    const start = { timeS, tempC: tempC ?? NaN }
    timeS += (minutes ?? NaN) * 60
    return [start, { timeS, tempC: tempC ?? NaN }]
  })
}

const rampShape = z.object({ T0_C: z.number(), T1_C: z.number(), duration_min: z.number() })
const modelShape = z.object({ Tref_C: z.number(), z_C: z.number() })

function rampOf(inputs: unknown): CurvePoint[] {
  const { T0_C, T1_C, duration_min } = rampShape.parse(inputs)
  return [
    { timeS: 0, tempC: T0_C },
    { timeS: duration_min * 60, tempC: T1_C },
  ]
}

function modelOf(inputs: unknown): DoseModel {
  const { Tref_C, z_C } = modelShape.parse(inputs)
  return { refTempC: Tref_C, zC: z_C }
}

const product: DoseModel = { refTempC: 200, zC: 34, baseTempC: 120 }

/** Curves of 2 to 30 points with steps and holds among them, 20–260 °C. */
const curves = fc
  .array(
    fc.record({
      gapS: fc.oneof(fc.constant(0), fc.double({ min: 0.01, max: 600, noNaN: true })),
      tempC: fc.oneof(fc.constant(120), fc.constant(200), fc.double({ min: 20, max: 260, noNaN: true })),
    }),
    { minLength: 2, maxLength: 30 },
  )
  .map((parts) => {
    let timeS = 0
    return parts.map(({ gapS, tempC }) => {
      timeS += gapS
      return { timeS, tempC }
    })
  })
const models = fc.record({
  refTempC: fc.double({ min: 100, max: 250, noNaN: true }),
  zC: fc.double({ min: 5, max: 60, noNaN: true }),
  baseTempC: fc.oneof(fc.constant(undefined), fc.double({ min: 30, max: 200, noNaN: true })),
})

describe('published doses', () => {
  testPublished('dose.rate', (check) => {
    const model = modelOf(check.inputs)
    const expected = numbersShape.parse(check.expected)
    numbersShape
      .parse(check.inputs.T_C)
      .forEach((tempC, i) => expectClose(check, doseRate(model, tempC), expected[i] ?? NaN))
  })
  testPublished('dose.pasteurisation_units_per_min', (check) => {
    // 1.393^(T − 60): z is ln 10 / ln 1.393, not the rounded 7 °C.
    const model = { refTempC: 60, zC: Math.LN10 / Math.log(1.393) }
    const expected = numbersShape.parse(check.expected)
    numbersShape
      .parse(check.inputs.T_C)
      .forEach((tempC, i) => expectClose(check, equivalentMinutes(model, hold(1, tempC)), expected[i] ?? NaN))
  })
  testPublished('dose.cem43_min', (check) => {
    // R is 0.5 from 43 °C and 0.25 below it: two models, the upper one with its base at 43 °C.
    const lower = { refTempC: 43, zC: Math.LN10 / Math.log(4) }
    const upper = { refTempC: 43, zC: Math.LN10 / Math.log(2), baseTempC: 43 }
    const total = tableShape
      .parse(check.inputs.segments_min_C)
      .map(([minutes = NaN, tempC = NaN]) =>
        equivalentMinutes(tempC < 43 ? lower : upper, hold(minutes, tempC)),
      )
      .reduce((sum, minutes) => sum + minutes, 0)
    expectClose(check, total, numberShape.parse(check.expected))
  })
  testPublished('dose.ramp_equivalent_min', (check) =>
    expectClose(
      check,
      equivalentMinutes(modelOf(check.inputs), rampOf(check.inputs)),
      numberShape.parse(check.expected),
    ),
  )
  testPublished('dose.trapezoid_equivalent_min', (check) => {
    // The trapezoid over-estimates a convex rate: doseRate summed by it gives the printed excess over our exact dose.
    const model = modelOf(check.inputs)
    const { T0_C, T1_C, duration_min } = rampShape.parse(check.inputs)
    const expected = numbersShape.parse(check.expected)
    numbersShape.parse(check.inputs.sample_s).forEach((sampleS, i) => {
      const steps = (duration_min * 60) / sampleS
      const rateAt = (step: number) => doseRate(model, T0_C + ((T1_C - T0_C) * step) / steps)
      let sum = (rateAt(0) + rateAt(steps)) / 2
      for (let step = 1; step < steps; step += 1) sum += rateAt(step)
      expectClose(check, (sum * sampleS) / 60, expected[i] ?? NaN)
      expect((sum * sampleS) / 60).toBeGreaterThan(equivalentMinutes(model, rampOf(check.inputs)))
    })
  })
  testPublished('dose.holds_equivalent_min', (check) =>
    expectClose(
      check,
      equivalentMinutes(modelOf(check.inputs), holds(tableShape.parse(check.inputs.segments_min_C))),
      numberShape.parse(check.expected),
    ),
  )
  testPublished('dose.log10_severity', (check) =>
    expectClose(
      check,
      log10Severity(hold(numberShape.parse(check.inputs.t_min), numberShape.parse(check.inputs.T_C))),
      numberShape.parse(check.expected),
    ),
  )
  testPublished('dose.log10_severity_ramp', (check) =>
    expectClose(check, log10Severity(rampOf(check.inputs)), numberShape.parse(check.expected)),
  )
  testPublished('dose.identity', (check) => {
    const { z_C } = z.object({ z_C: z.number() }).parse(check.expected)
    expectClose(check, numberShape.parse(check.inputs.omega) * Math.LN10, z_C)
    // The severity is the dose with that z and 100 °C.
    const dose = equivalentMinutes({ refTempC: 100, zC: z_C }, hold(45, 205))
    expectWithin(log10Severity(hold(45, 205)), Math.log10(dose), 1e-6)
  })
  testPublished('dose.arrhenius_equivalent_min', (check) => {
    const inputs = z
      .object({ Ea_J_mol: z.number(), T_C: z.number(), Tref_C: z.number(), t_min: z.number() })
      .parse(check.inputs)
    const expected = numberShape.parse(check.expected)
    const points = hold(inputs.t_min, inputs.T_C)
    expectClose(check, arrheniusEquivalentMinutes(inputs.Ea_J_mol, inputs.Tref_C, points), expected)
    expectClose(check, inputs.t_min * arrheniusRate(inputs.Ea_J_mol, inputs.Tref_C, inputs.T_C), expected)
  })
  it('SCIENCE §2: the table of usual toasts has these severities and doses (closed form, z 33.963)', () => {
    const rows: [number, number, number, number, number][] = [
      [30, 125, 2.21, 0.19, 0.005],
      [35, 165, 3.46, 3.3, 0.05],
      [40, 185, 4.1, 14.5, 0.05],
      [45, 205, 4.74, 63, 0.5],
      [53, 220, 5.26, 206, 0.5],
    ]
    for (const [minutes, tempC, logSeverity, doseMin, within] of rows) {
      expectWithin(log10Severity(hold(minutes, tempC)), logSeverity, 0.005)
      expectWithin(
        equivalentMinutes({ refTempC: 200, zC: 14.75 * Math.LN10 }, hold(minutes, tempC)),
        doseMin,
        within,
      )
    }
  })
  it('SCIENCE §2: z 34 at 200 °C is an activation energy of 126 kJ/mol (z = ln 10·R·T²/Ea)', () => {
    expectWithin(zCFromActivationEnergy(126_000, 200), 34, 0.05)
  })
})

describe('laws of the heat dose', () => {
  it('law: a dose is additive over any split of the record', () => {
    fc.assert(
      fc.property(models, curves, fc.double({ min: 0, max: 1, noNaN: true }), (model, points, share) => {
        const first = points[0]?.timeS ?? 0
        const last = points.at(-1)?.timeS ?? 0
        const cutS = first + share * (last - first)
        const i = points.findIndex((point) => point.timeS >= cutS)
        const after = points[i]
        const before = points[i - 1]
        if (after === undefined || before === undefined) return
        const part = after.timeS === before.timeS ? 1 : (cutS - before.timeS) / (after.timeS - before.timeS)
        const cut = { timeS: cutS, tempC: before.tempC + part * (after.tempC - before.tempC) }
        const whole = equivalentMinutes(model, points)
        const sum =
          equivalentMinutes(model, [...points.slice(0, i), cut]) +
          equivalentMinutes(model, [cut, ...points.slice(i)])
        // A cut in a hold at the base may round to the other side of it; only its own sliver is at stake there.
        const sliver = model.baseTempC !== undefined && Math.abs(cut.tempC - model.baseTempC) < 1e-9
        if (!sliver) expectWithin(sum, whole, 1e-9 * Math.max(whole, 1e-6))
      }),
      propertyRun,
    )
  })
  it('law: a hotter curve never has a smaller dose', () => {
    fc.assert(
      fc.property(models, curves, fc.double({ min: 0, max: 30, noNaN: true }), (model, points, riseC) => {
        const hotter = points.map((point, i) =>
          i % 2 === 0 ? { ...point, tempC: point.tempC + riseC } : point,
        )
        const dose = equivalentMinutes(model, points)
        expect(equivalentMinutes(model, hotter)).toBeGreaterThanOrEqual(dose * (1 - 1e-12))
      }),
      propertyRun,
    )
  })
  it('law: a longer record never has a smaller dose', () => {
    fc.assert(
      fc.property(models, curves, (model, points) => {
        const running = createDoseAccumulator(model)
        let last = 0
        for (const point of points) {
          const dose = running.add(point.timeS, point.tempC)
          expect(dose).toBeGreaterThanOrEqual(last)
          last = dose
        }
      }),
      propertyRun,
    )
  })
  it('law: a curve played backwards has the same dose', () => {
    fc.assert(
      fc.property(models, curves, (model, points) => {
        const end = points.at(-1)?.timeS ?? 0
        const reversed = points.map((point) => ({ ...point, timeS: end - point.timeS })).reverse()
        const dose = equivalentMinutes(model, points)
        expectWithin(equivalentMinutes(model, reversed), dose, 1e-11 * dose + 1e-14)
        expectWithin(
          arrheniusEquivalentMinutes(126_000, 200, reversed),
          arrheniusEquivalentMinutes(126_000, 200, points),
          1e-11 * arrheniusEquivalentMinutes(126_000, 200, points),
        )
      }),
      propertyRun,
    )
  })
  it('law: a hold at the reference temperature has its own length as dose', () => {
    fc.assert(
      fc.property(models, fc.double({ min: 0, max: 1000, noNaN: true }), ({ refTempC, zC }, minutes) => {
        expectWithin(equivalentMinutes({ refTempC, zC }, hold(minutes, refTempC)), minutes, 1e-12 * minutes)
      }),
      propertyRun,
    )
  })
  it('law: raising every temperature by z makes the dose ten times larger; the reference works the other way', () => {
    fc.assert(
      fc.property(models, curves, ({ refTempC, zC }, points) => {
        const dose = equivalentMinutes({ refTempC, zC }, points)
        const raised = points.map((point) => ({ ...point, tempC: point.tempC + zC }))
        expectWithin(equivalentMinutes({ refTempC, zC }, raised), 10 * dose, 1e-9 * dose)
        expectWithin(equivalentMinutes({ refTempC: refTempC + zC, zC }, points), dose / 10, 1e-10 * dose)
      }),
      propertyRun,
    )
  })
  it('law: a straight segment has its exact integral however it is sampled', () => {
    fc.assert(
      fc.property(
        models,
        fc.double({ min: 20, max: 260, noNaN: true }),
        fc.double({ min: 20, max: 260, noNaN: true }),
        fc.integer({ min: 2, max: 200 }),
        (model, fromC, toC, parts) => {
          const at = (i: number) => ({
            timeS: (1800 * i) / parts,
            tempC: fromC + ((toC - fromC) * i) / parts,
          })
          const whole = equivalentMinutes(model, [at(0), at(parts)])
          const sampled = equivalentMinutes(
            model,
            Array.from({ length: parts + 1 }, (_, i) => at(i)),
          )
          if (Math.abs(toC - fromC) > 1e-6) expectWithin(sampled, whole, 1e-8 * whole + 1e-12)
        },
      ),
      propertyRun,
    )
  })
  it('law: a dose is the area under its rate (independent midpoint sum), in minutes', () => {
    fc.assert(
      fc.property(models, curves, (model, points) => {
        let area = 0
        for (const [i, to] of points.entries()) {
          const from = points[i - 1]
          if (from === undefined) continue
          const parts = 400
          for (let part = 0; part < parts; part += 1) {
            const tempC = from.tempC + ((to.tempC - from.tempC) * (part + 0.5)) / parts
            const isCounted = model.baseTempC === undefined || tempC >= model.baseTempC
            const rate = isCounted ? 10 ** ((tempC - model.refTempC) / model.zC) : 0
            area += (rate * (to.timeS - from.timeS)) / parts / 60
          }
        }
        const dose = equivalentMinutes(model, points)
        // The sum’s own error: its curvature, and half a part where the base cuts a segment.
        const cut =
          model.baseTempC === undefined ? 0 : (20 * doseRate(model, model.baseTempC) * points.length) / 400
        expectWithin(dose, area, 0.005 * area + cut + 1e-12)
      }),
      propertyRun,
    )
  })
  it('nothing counts below the base, and a segment is cut where it crosses it', () => {
    expect(doseRate(product, 119.999)).toBe(0)
    expect(doseRate(product, 120)).toBeGreaterThan(0)
    const crossing = [
      { timeS: 0, tempC: 20 },
      { timeS: 6000, tempC: 220 },
    ]
    const above = [
      { timeS: 3000, tempC: 120 },
      { timeS: 6000, tempC: 220 },
    ]
    expectWithin(equivalentMinutes(product, crossing), equivalentMinutes(product, above), 1e-12)
    expect(equivalentMinutes(product, hold(60, 119))).toBe(0)
  })
  it('law: a running dose is bit for bit the dose of its points, and a gap counts nothing', () => {
    fc.assert(
      fc.property(models, curves, (model, points) => {
        const running = createDoseAccumulator(model)
        for (const point of points) running.add(point.timeS, point.tempC)
        expect(running.minutes).toBe(equivalentMinutes(model, points))
      }),
      propertyRun,
    )
    const broken = createDoseAccumulator(product)
    broken.add(0, 200)
    broken.add(60, 200)
    broken.break()
    broken.add(600, 200)
    broken.add(660, 200)
    expect(broken.minutes).toBe(2)
  })
  it('a refused reading leaves the running dose as it was', () => {
    const running = createDoseAccumulator(product)
    running.add(0, 200)
    running.add(60, 200)
    for (const value of notNumbers) expectRangeError('tempC', () => running.add(120, value))
    expectRangeError('timeS', () => running.add(59, 200))
    running.add(120, 200)
    expect(running.minutes).toBe(2)
  })
  it('law: Arrhenius: a hold has minutes × rate, a hotter curve has more, and two parts add', () => {
    const energies = fc.double({ min: 50_000, max: 250_000, noNaN: true })
    fc.assert(
      fc.property(energies, curves, fc.double({ min: 60, max: 260, noNaN: true }), (ea, points, tempC) => {
        const rate = arrheniusRate(ea, 200, tempC)
        expectWithin(arrheniusEquivalentMinutes(ea, 200, hold(7, tempC)), 7 * rate, 1e-10 * rate)
        expect(arrheniusRate(ea, 200, tempC + 1)).toBeGreaterThan(rate)
        const dose = arrheniusEquivalentMinutes(ea, 200, points)
        const hotter = points.map((point) => ({ ...point, tempC: point.tempC + 5 }))
        expect(arrheniusEquivalentMinutes(ea, 200, hotter)).toBeGreaterThanOrEqual(dose)
        const middle = Math.floor(points.length / 2)
        const parts = [points.slice(0, middle + 1), points.slice(middle)]
        const sum = parts.reduce((all, part) => all + arrheniusEquivalentMinutes(ea, 200, part), 0)
        expectWithin(sum, dose, 1e-9 * (dose + 1e-9))
        // Over a degree the rate grows as 10^(1/z).
        const z = zCFromActivationEnergy(ea, tempC)
        expectWithin(Math.log10(arrheniusRate(ea, 200, tempC + 0.01) / rate), 0.01 / z, 1e-4 / z)
      }),
      propertyRun,
    )
  })
  it('the Arrhenius dose of a ramp agrees with a fine midpoint sum, and is additive', () => {
    const ramp = [
      { timeS: 0, tempC: 20 },
      { timeS: 1800, tempC: 230 },
    ]
    let sum = 0
    const parts = 200_000
    for (let i = 0; i < parts; i += 1) sum += arrheniusRate(151_700, 200, 20 + (210 * (i + 0.5)) / parts)
    const dose = arrheniusEquivalentMinutes(151_700, 200, ramp)
    expectWithin(dose, (sum / parts) * 30, 1e-8 * dose)
    const middle = { timeS: 900, tempC: 125 }
    const halves = [ramp.slice(0, 1).concat(middle), [middle, ...ramp.slice(1)]]
    const total = halves.reduce((all, points) => all + arrheniusEquivalentMinutes(151_700, 200, points), 0)
    expectWithin(total, dose, 1e-12 * dose)
  })
})

describe('segments, one at a time', () => {
  const temp = fc.double({ min: 40, max: 260, noNaN: true })
  it('law: walked by hand they are, bit for bit, the dose and the running dose of their points', () => {
    fc.assert(
      fc.property(
        fc.array(fc.tuple(fc.double({ min: 0, max: 60, noNaN: true }), temp), {
          minLength: 1,
          maxLength: 60,
        }),
        (steps) => {
          let timeS = 0
          const points = steps.map(([stepS, tempC]) => ({ timeS: (timeS += stepS), tempC }))
          const model = { refTempC: 200, zC: 34, baseTempC: 120 }
          const segment = createSegmentDose(model)
          const running = createDoseAccumulator(model)
          let minutes = 0
          points.forEach((to, i) => {
            running.add(to.timeS, to.tempC)
            const from = points[i - 1]
            if (from === undefined || !(to.timeS > from.timeS)) return
            const [fromRate, toRate] = [segment.rateAt(from.tempC), segment.rateAt(to.tempC)]
            minutes += segment.minutes(to.timeS - from.timeS, from.tempC, fromRate, to.tempC, toRate)
          })
          expect(minutes).toBe(equivalentMinutes(model, points))
          expect(running.minutes).toBe(minutes)
        },
      ),
      propertyRun,
    )
  })
  it('law: an Arrhenius segment is the sum of its parts to 1e-9, whether by the series or by quadrature', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(76_000, 151_700),
        temp,
        fc.double({ min: -40, max: 40, noNaN: true }),
        fc.integer({ min: 2, max: 400 }),
        (eaJPerMol, fromC, riseC, parts) => {
          const whole = [
            { timeS: 0, tempC: fromC },
            { timeS: 600, tempC: fromC + riseC },
          ]
          const split = Array.from({ length: parts + 1 }, (_, i) => ({
            timeS: (600 * i) / parts,
            tempC: fromC + (riseC * i) / parts,
          }))
          const minutes = arrheniusEquivalentMinutes(eaJPerMol, 200, whole)
          expectWithin(arrheniusEquivalentMinutes(eaJPerMol, 200, split), minutes, 1e-9 * minutes)
        },
      ),
      propertyRun,
    )
  })
  it('an Arrhenius segment names a reference or temperature that is none', () => {
    expectRangeError('eaJPerMol', () => createArrheniusSegment(0, 200))
    expectRangeError('refTempC', () => createArrheniusSegment(76_000, -280))
    expectRangeError('tempC', () => createArrheniusSegment(76_000, 200).rateAt(-280))
  })
})

describe('what a dose refuses', () => {
  it('names the constant or point that is not a number', () => {
    for (const value of notNumbers) {
      expectRangeError('refTempC', () => doseRate({ refTempC: value, zC: 34 }, 200))
      expectRangeError('zC', () => doseRate({ refTempC: 200, zC: value }, 200))
      expectRangeError('baseTempC', () => doseRate({ refTempC: 200, zC: 34, baseTempC: value }, 200))
      expectRangeError('tempC', () => doseRate(product, value))
      expectRangeError('points', () => equivalentMinutes(product, hold(1, value)))
      expectRangeError('timeS', () => equivalentMinutes(product, hold(value, 200)))
      expectRangeError('eaJPerMol', () => arrheniusRate(value, 200, 200))
      expectRangeError('eaJPerMol', () => arrheniusEquivalentMinutes(value, 200, hold(1, 200)))
      expectRangeError('refTempC', () => arrheniusRate(1e5, value, 200))
      expectRangeError('points', () => arrheniusEquivalentMinutes(1e5, 200, hold(1, value)))
      expectRangeError('points', () => log10Severity(hold(1, value)))
      expectRangeError('eaJPerMol', () => zCFromActivationEnergy(value, 200))
      expectRangeError('tempC', () => zCFromActivationEnergy(1e5, value))
    }
  })
  it('no points, a falling time, z of 0, no time for a logarithm, and below absolute zero', () => {
    expectRangeError('points', () => equivalentMinutes(product, []))
    expectRangeError('points', () => arrheniusEquivalentMinutes(1e5, 200, []))
    expectRangeError('points', () => log10Severity([]))
    expectRangeError('points', () => log10Severity([{ timeS: 0, tempC: 200 }]))
    expectRangeError('points[1].timeS', () => equivalentMinutes(product, [...hold(1, 200)].reverse()))
    expectRangeError('zC', () => doseRate({ refTempC: 200, zC: 0 }, 200))
    expectRangeError('tempC', () => arrheniusRate(1e5, 200, -273.15))
    expectRangeError('tempC', () => doseRate({ refTempC: 200, zC: 1 }, 600))
  })
})
