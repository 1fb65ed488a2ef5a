import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import * as z from 'zod'
import {
  alignCurveByStage,
  alignTimeByStage,
  climbRateCPerMin,
  curveDeviation,
  discreteFrechet,
  downsampleKeepingExtremes,
  dynamicTimeWarping,
  liveEdgeSlopeWeights,
  pchip,
  savitzkyGolayWeights,
  warpingDistance,
} from '../../lib/science/curve'
import {
  expectClose,
  expectRangeError,
  expectWithin,
  notNumbers,
  numberShape,
  numbersShape,
  propertyRun,
  testPublished,
  toleranceOf,
} from './published-checks'

const series = fc.array(fc.double({ min: -300, max: 300, noNaN: true }), { minLength: 1, maxLength: 30 })
const planeShape = z.array(z.tuple([z.number(), z.number()]))

describe('dynamic time warping', () => {
  testPublished(
    'curve.dtw (|a-b|, steps (1,0),(0,1),(1,1), no weights, no normalisation; band = |i-j|<=b, null if no path)',
    (check) => {
      const x = numbersShape.parse(check.inputs.x)
      const y = numbersShape.parse(check.inputs.y)
      const expected = z
        .object({
          distance: z.number(),
          distance_band_1: z.number().nullable(),
          distance_band_2: z.number().nullable(),
        })
        .parse(check.expected)
      expectClose(check, dynamicTimeWarping(x, y) ?? NaN, expected.distance)
      expect(dynamicTimeWarping(x, y, 1)).toBe(expected.distance_band_1)
      expect(dynamicTimeWarping(x, y, 2)).toBe(expected.distance_band_2)
    },
  )
  it('law: is symmetric, 0 for a series with itself, and never smaller for a narrower band', () => {
    fc.assert(
      fc.property(series, series, fc.integer({ min: 0, max: 30 }), (a, b, band) => {
        const free = dynamicTimeWarping(a, b) ?? NaN
        expectWithin(dynamicTimeWarping(b, a) ?? NaN, free, 1e-9 * (1 + free))
        expect(dynamicTimeWarping(a, a, 0)).toBe(0)
        const banded = dynamicTimeWarping(a, b, band)
        if (banded === null) expect(Math.abs(a.length - b.length)).toBeGreaterThan(band)
        else expect(banded).toBeGreaterThanOrEqual(free - 1e-9)
      }),
      propertyRun,
    )
  })
  /** Every monotone path, by recursion: what the distance is by definition. */
  const byDefinition = (a: readonly number[], b: readonly number[], band: number, i = 0, j = 0): number => {
    if (Math.abs(i - j) > band || i >= a.length || j >= b.length) return Infinity
    const here = Math.abs((a[i] ?? NaN) - (b[j] ?? NaN))
    if (i === a.length - 1 && j === b.length - 1) return here
    return (
      here +
      Math.min(
        byDefinition(a, b, band, i + 1, j),
        byDefinition(a, b, band, i, j + 1),
        byDefinition(a, b, band, i + 1, j + 1),
      )
    )
  }
  const short = fc.array(fc.integer({ min: -9, max: 9 }), { minLength: 1, maxLength: 5 })
  it('law: is the least over every path, inside its band or free', () => {
    fc.assert(
      fc.property(short, short, fc.integer({ min: 0, max: 5 }), (a, b, band) => {
        expect(dynamicTimeWarping(a, b)).toBe(byDefinition(a, b, Infinity))
        expect(dynamicTimeWarping(a, b, band) ?? Infinity).toBe(byDefinition(a, b, band))
      }),
      propertyRun,
    )
  })
  it('law: is at least the difference of both ends, and at most the sum of differences point by point', () => {
    fc.assert(
      fc.property(series, series, (a, b) => {
        const free = dynamicTimeWarping(a, b) ?? NaN
        const first = Math.abs((a[0] ?? NaN) - (b[0] ?? NaN))
        const last = Math.abs((a.at(-1) ?? NaN) - (b.at(-1) ?? NaN))
        expect(free).toBeGreaterThanOrEqual(a.length + b.length > 2 ? Math.max(first, last) : first)
        const same = a.slice(0, b.length)
        const other = b.slice(0, a.length)
        const straight = same.reduce((sum, value, i) => sum + Math.abs(value - (other[i] ?? NaN)), 0)
        expect(dynamicTimeWarping(same, other)).toBeLessThanOrEqual(straight * (1 + 1e-12))
        expectWithin(dynamicTimeWarping(same, other, 0) ?? NaN, straight, 1e-9 * (1 + straight))
      }),
      propertyRun,
    )
  })
  it('law: gives up only where the distance is larger than asked', () => {
    fc.assert(
      fc.property(series, series, fc.double({ min: 0, max: 3000, noNaN: true }), (a, b, giveUpAbove) => {
        const whole = dynamicTimeWarping(a, b) ?? NaN
        const found = warpingDistance(Float64Array.from(a), Float64Array.from(b), Infinity, giveUpAbove)
        if (found === Infinity) expect(whole).toBeGreaterThan(giveUpAbove)
        else expect(found).toBe(whole)
      }),
      propertyRun,
    )
  })
  it('names a series or band outside the domain', () => {
    expectRangeError('a', () => dynamicTimeWarping([], [1]))
    expectRangeError('b', () => dynamicTimeWarping([1], []))
    for (const band of [...notNumbers, -1, 0.5])
      expectRangeError('band', () => dynamicTimeWarping([1], [1], band))
    for (const value of notNumbers) expectRangeError('b[0]', () => dynamicTimeWarping([1], [value]))
  })
})

describe('discrete Fréchet distance', () => {
  testPublished('curve.discrete_frechet', (check) =>
    expectClose(
      check,
      discreteFrechet(planeShape.parse(check.inputs.p), planeShape.parse(check.inputs.q)),
      numberShape.parse(check.expected),
    ),
  )
  it('law: is symmetric, 0 for a curve with itself, and a shift is its own length', () => {
    const coordinate = fc.double({ min: -100, max: 100, noNaN: true })
    const curve = fc.array(fc.tuple(coordinate, coordinate), { minLength: 1, maxLength: 25 })
    fc.assert(
      fc.property(curve, curve, fc.double({ min: 0, max: 50, noNaN: true }), (p, q, shift) => {
        expect(discreteFrechet(p, q)).toBe(discreteFrechet(q, p))
        expect(discreteFrechet(p, p)).toBe(0)
        const shifted = p.map(([x, y]): [number, number] => [x + shift, y])
        expect(discreteFrechet(p, shifted)).toBeLessThanOrEqual(shift + 1e-9)
      }),
      propertyRun,
    )
  })
  const points = fc.array(
    fc.tuple(fc.double({ min: -99, max: 99, noNaN: true }), fc.double({ min: -99, max: 99, noNaN: true })),
    { minLength: 1, maxLength: 12 },
  )
  it('law: is at least the ends’ distance and every point’s to the other curve, and at most the worst pair in step', () => {
    fc.assert(
      fc.property(points, points, (p, q) => {
        const leash = discreteFrechet(p, q)
        const apart = (a: readonly [number, number] | undefined, b: readonly [number, number] | undefined) =>
          Math.hypot((a?.[0] ?? NaN) - (b?.[0] ?? NaN), (a?.[1] ?? NaN) - (b?.[1] ?? NaN))
        expect(leash).toBeGreaterThanOrEqual(Math.max(apart(p[0], q[0]), apart(p.at(-1), q.at(-1))))
        for (const point of p) {
          expect(leash).toBeGreaterThanOrEqual(Math.min(...q.map((other) => apart(point, other))))
        }
        const same = p.slice(0, q.length)
        const other = q.slice(0, p.length)
        expect(discreteFrechet(same, other)).toBeLessThanOrEqual(
          Math.max(...same.map((point, i) => apart(point, other[i]))),
        )
      }),
      propertyRun,
    )
  })
  it('names a curve outside the domain', () => {
    expectRangeError('p', () => discreteFrechet([], [[0, 0]]))
    expectRangeError('q', () => discreteFrechet([[0, 0]], []))
    for (const value of notNumbers) expectRangeError('q[0][1]', () => discreteFrechet([[0, 0]], [[0, value]]))
  })
})

describe('Savitzky–Golay weights', () => {
  const optionsShape = z.object({
    window: z.number(),
    degree: z.number(),
    derivative: z.number(),
    spacing: z.number(),
  })

  testPublished('curve.savgol_weights', (check) => {
    const { integers, norm } = z.object({ integers: numbersShape, norm: z.number() }).parse(check.expected)
    const weights = savitzkyGolayWeights(optionsShape.parse(check.inputs))
    expect(weights).toHaveLength(integers.length)
    // A printed 0 has no relative tolerance: it is held to that share of the whole table.
    const floor = toleranceOf(check, 'rel') * Math.max(...integers.map(Math.abs))
    weights.forEach((weight, i) => expectWithin(weight * norm, integers[i] ?? NaN, floor))
  })
  const options = fc.record({
    half: fc.integer({ min: 1, max: 12 }),
    degree: fc.integer({ min: 0, max: 4 }),
    derivative: fc.integer({ min: 0, max: 2 }),
    spacing: fc.constantFrom(0.2, 1, 5),
  })
  it('law: weights sum to 1 for the value and to 0 for a derivative, and are exact on polynomials of their degree', () => {
    fc.assert(
      fc.property(options, ({ half, degree, derivative, spacing }) => {
        const window = 2 * half + 1
        if (degree >= window || derivative > degree) return
        const weights = savitzkyGolayWeights({ window, degree, derivative, spacing })
        const scale = Math.max(...weights.map(Math.abs))
        const sum = weights.reduce((total, weight) => total + weight, 0)
        expectWithin(sum, derivative === 0 ? 1 : 0, 1e-10 * (1 + scale))
        // The derivative of (t/spacing)^degree at t = 0 is degree!/spacing^derivative when they are equal, else 0.
        const applied = weights.reduce((total, weight, i) => total + weight * (i - half) ** degree, 0)
        const factorial = [1, 1, 2, 6, 24][degree] ?? NaN
        const exact = derivative === degree ? factorial / spacing ** derivative : 0
        expectWithin(applied, exact, 1e-9 * (1 + scale * half ** degree))
      }),
      propertyRun,
    )
  })
  it('the one-sided slope at the live edge is exact on a parabola', () => {
    const weights = liveEdgeSlopeWeights({ window: 15, degree: 2, spacing: 2 })
    const slope = weights.reduce(
      (sum, weight, i) => sum + weight * (3 + 0.5 * (2 * i) + 0.25 * (2 * i) ** 2),
      0,
    )
    expectWithin(slope, 0.5 + 0.5 * 28, 1e-10)
  })
  it('names a window, degree, derivative or spacing outside the domain', () => {
    const good = { window: 5, degree: 2, derivative: 1, spacing: 1 }
    for (const value of [...notNumbers, 4, 0, 2.5]) {
      expectRangeError('window', () => savitzkyGolayWeights({ ...good, window: value }))
    }
    for (const value of [...notNumbers, 5, -1]) {
      expectRangeError('degree', () => savitzkyGolayWeights({ ...good, degree: value }))
    }
    for (const value of [...notNumbers, 3, -1]) {
      expectRangeError('derivative', () => savitzkyGolayWeights({ ...good, derivative: value }))
    }
    for (const value of [...notNumbers, 0]) {
      expectRangeError('spacing', () => savitzkyGolayWeights({ ...good, spacing: value }))
    }
  })
})

describe('climb rate', () => {
  it('on even spacing it is the one-sided Savitzky–Golay slope of degree 2', () => {
    const timesS = Array.from({ length: 31 }, (_, i) => i)
    const tempsC = timesS.map((timeS) => 150 + timeS / 6 + Math.sin(timeS))
    const weights = liveEdgeSlopeWeights({ window: 31, degree: 2, spacing: 1 })
    const slope = weights.reduce((sum, weight, i) => sum + weight * (tempsC[i] ?? NaN), 0)
    expectWithin(climbRateCPerMin(timesS, tempsC) ?? NaN, slope * 60, 1e-8)
  })
  it('law: is exact on a straight climb at any spacing, and older readings do not matter', () => {
    const gaps = fc.array(fc.double({ min: 0.05, max: 3, noNaN: true }), { minLength: 40, maxLength: 120 })
    fc.assert(
      fc.property(gaps, fc.double({ min: -20, max: 20, noNaN: true }), (steps, ratePerMin) => {
        let timeS = 0
        const timesS = steps.map((step) => (timeS += step))
        const tempsC = timesS.map((at) => 100 + (ratePerMin / 60) * at)
        const rate = climbRateCPerMin([-900, ...timesS], [20, ...tempsC])
        // Where there are readings enough it is exact; null when the window holds too little.
        if (rate !== null) expectWithin(rate, ratePerMin, 1e-6)
        else expect(timeS).toBeLessThan(30)
      }),
      propertyRun,
    )
  })
  it('is unknown when the last reading is missing, or too few or too close', () => {
    expect(climbRateCPerMin([0, 10, 20, 30, 31], [1, 2, 3, 4, NaN])).toBeNull()
    expect(climbRateCPerMin([0, 10, 20], [1, 2, 3])).toBeNull()
    expect(climbRateCPerMin([0, 1, 2, 3, 4], [1, 2, 3, 4, 5])).toBeNull()
    expectWithin(climbRateCPerMin([0, 8, 10, 20, 30], [0, NaN, 10, 20, 30]) ?? NaN, 60, 1e-9)
  })
  it('names times that fall, lengths that differ and what is infinite', () => {
    expectRangeError('timesS[1]', () => climbRateCPerMin([1, 0], [1, 1]))
    expectRangeError('tempsC', () => climbRateCPerMin([1, 2], [1]))
    expectRangeError('timesS', () => climbRateCPerMin([], []))
    expectRangeError('tempsC[0]', () => climbRateCPerMin([1], [Infinity]))
    for (const value of [...notNumbers, 0])
      expectRangeError('windowS', () => climbRateCPerMin([1], [1], value))
    for (const value of notNumbers) expectRangeError('timesS[0]', () => climbRateCPerMin([value], [1]))
  })
})

describe('PCHIP', () => {
  testPublished('curve.pchip', (check) => {
    const interpolate = pchip(numbersShape.parse(check.inputs.x), numbersShape.parse(check.inputs.y))
    const expected = numbersShape.parse(check.expected)
    numbersShape
      .parse(check.inputs.at)
      .forEach((at, i) => expectClose(check, interpolate(at), expected[i] ?? NaN))
  })
  const knots = fc.array(
    fc.record({
      gap: fc.double({ min: 0.1, max: 10, noNaN: true }),
      y: fc.double({ min: -50, max: 50, noNaN: true }),
    }),
    { minLength: 2, maxLength: 15 },
  )
  it('law: goes through its points, stays between neighbours, and rises where they rise', () => {
    fc.assert(
      fc.property(knots, (parts) => {
        let sum = 0
        const x = parts.map(({ gap }) => (sum += gap))
        const y = parts.map((part) => part.y)
        const interpolate = pchip(x, y)
        for (let i = 0; i + 1 < x.length; i += 1) {
          const [x1 = NaN, x2 = NaN] = [x[i], x[i + 1]]
          const [y1 = NaN, y2 = NaN] = [y[i], y[i + 1]]
          expectWithin(interpolate(x1), y1, 1e-9)
          let last = y1
          for (let step = 1; step <= 20; step += 1) {
            const value = interpolate(Math.min(x2, x1 + ((x2 - x1) * step) / 20))
            expect((value - last) * Math.sign(y2 - y1)).toBeGreaterThanOrEqual(-1e-9)
            last = value
          }
          expectWithin(last, y2, 1e-9)
        }
      }),
      propertyRun,
    )
  })
  it('two points are a straight line, and nothing is extrapolated', () => {
    const line = pchip([0, 10], [5, 25])
    expectWithin(line(2.5), 10, 1e-12)
    for (const at of [...notNumbers, -0.1, 10.1]) expectRangeError('at', () => line(at))
  })
  it('names points outside the domain', () => {
    expectRangeError('x', () => pchip([1], [1]))
    expectRangeError('y', () => pchip([1, 2], [1, 2, 3]))
    expectRangeError('x[1]', () => pchip([1, 1], [1, 2]))
    for (const value of notNumbers) expectRangeError('y[1]', () => pchip([1, 2], [1, value]))
  })
})

describe('curve deviation', () => {
  testPublished('curve.rmse_mae_bias_max', (check) => {
    const expected = z
      .object({ rmse: z.number(), mae: z.number(), bias: z.number(), max_abs: z.number() })
      .parse(check.expected)
    const found = curveDeviation(
      numbersShape.parse(check.inputs.reference),
      numbersShape.parse(check.inputs.value),
    )
    expectClose(check, found.rmse, expected.rmse)
    expectClose(check, found.mae, expected.mae)
    expectClose(check, found.bias, expected.bias)
    expectClose(check, found.maxAbs, expected.max_abs)
  })
  it('law: |bias| ≤ mean absolute ≤ RMS ≤ largest', () => {
    fc.assert(
      fc.property(series, (value) => {
        const found = curveDeviation(
          value.map(() => 1),
          value,
        )
        expect(Math.abs(found.bias)).toBeLessThanOrEqual(found.mae + 1e-9)
        expect(found.mae).toBeLessThanOrEqual(found.rmse + 1e-9)
        expect(found.rmse).toBeLessThanOrEqual(found.maxAbs + 1e-9)
      }),
      propertyRun,
    )
  })
  it('names series that are empty, unequal or not numbers', () => {
    expectRangeError('reference', () => curveDeviation([], []))
    expectRangeError('value', () => curveDeviation([1], [1, 2]))
    for (const value of notNumbers) expectRangeError('value[0]', () => curveDeviation([1], [value]))
  })
})

describe('thinning for display', () => {
  const readings = fc.array(
    fc.record({
      gap: fc.integer({ min: 0, max: 5 }),
      value: fc.oneof(
        { weight: 9, arbitrary: fc.integer({ min: -50, max: 250 }) },
        { weight: 1, arbitrary: fc.constant(NaN) },
      ),
    }),
    { minLength: 1, maxLength: 400 },
  )
  testPublished('curve.decimation_invariants', () => {
    fc.assert(
      fc.property(readings, fc.integer({ min: 1, max: 40 }), (parts, buckets) => {
        let time = 0
        const times = parts.map(({ gap }) => (time += gap))
        const values = parts.map((part) => part.value)
        const thin = downsampleKeepingExtremes(times, values, buckets)
        // First and last kept; a subset in order; extremes kept; whole when it fits.
        expect([thin.times[0], thin.values[0]]).toEqual([times[0], values[0]])
        expect([thin.times.at(-1), thin.values.at(-1)]).toEqual([times.at(-1), values.at(-1)])
        let from = 0
        thin.times.forEach((at, i) => {
          while (from < times.length && !(times[from] === at && Object.is(values[from], thin.values[i])))
            from += 1
          expect(from).toBeLessThan(times.length)
          from += 1
        })
        const known = (list: number[]) => list.filter((value) => !Number.isNaN(value))
        expect(Math.max(...known(thin.values))).toBe(Math.max(...known(values)))
        expect(Math.min(...known(thin.values))).toBe(Math.min(...known(values)))
        if (times.length <= 4 * buckets) expect(thin.values).toEqual(values)
        // Every gap is still there, and no wider or narrower.
        const gapsOf = (at: number[], list: number[]) => {
          const gaps: (number | undefined)[][] = []
          list.forEach((value, i) => {
            if (Number.isNaN(value) && !Number.isNaN(list[i - 1] ?? 0)) {
              let end = i
              while (Number.isNaN(list[end] ?? 0) && end < list.length) end += 1
              gaps.push([at[i - 1], at[end]])
            }
          })
          return gaps
        }
        expect(gapsOf(thin.times, thin.values)).toEqual(gapsOf(times, values))
      }),
      propertyRun,
    )
  })
  it('a long record comes down to at most four readings a bucket', () => {
    const times = Array.from({ length: 13_500 }, (_, i) => i / 5)
    const values = times.map((time) => 100 + Math.sin(time))
    const thin = downsampleKeepingExtremes(times, values, 300)
    expect(thin.times.length).toBeLessThanOrEqual(1200)
    expect(values).toHaveLength(13_500)
  })
  it('names what is outside the domain', () => {
    expectRangeError('times', () => downsampleKeepingExtremes([], [], 10))
    expectRangeError('values', () => downsampleKeepingExtremes([1], [], 10))
    expectRangeError('times[1]', () => downsampleKeepingExtremes([1, 0], [1, 1], 10))
    expectRangeError('values[0]', () => downsampleKeepingExtremes([1], [Infinity], 10))
    for (const value of [...notNumbers, 0, 1.5]) {
      expectRangeError('buckets', () => downsampleKeepingExtremes([1], [1], value))
    }
  })
})

describe('stage alignment', () => {
  const boundaries = fc
    .array(fc.double({ min: 1, max: 900, noNaN: true }), { minLength: 1, maxLength: 8 })
    .chain((first) =>
      fc.tuple(
        fc.constant(first),
        fc.array(fc.double({ min: 1, max: 900, noNaN: true }), {
          minLength: first.length,
          maxLength: first.length,
        }),
      ),
    )
    .map((pair) =>
      pair.map((lengths) => {
        let end = 0
        return [0, ...lengths.map((length) => (end += length))]
      }),
    )
  it('law: takes boundaries to boundaries, never turns back, and its inverse leads back', () => {
    fc.assert(
      fc.property(boundaries, fc.double({ min: 0, max: 1, noNaN: true }), ([from = [], to = []], share) => {
        const there = alignTimeByStage(from, to)
        const back = alignTimeByStage(to, from)
        from.forEach((boundary, i) => expect(there(boundary)).toBe(to[i]))
        const end = from.at(-1) ?? NaN
        const at = share * end
        const moved = there(at) ?? NaN
        expectWithin(back(Math.min(moved, to.at(-1) ?? NaN)) ?? NaN, at, 1e-6)
        expect(there(Math.min(end, at + 1)) ?? NaN).toBeGreaterThanOrEqual(moved - 1e-9)
        expect(there(end + 1)).toBeNull()
        expect(there(-1)).toBeNull()
      }),
      propertyRun,
    )
  })
  it('a curve keeps its temperatures and loses what lies outside the stages', () => {
    const points = [-1, 0, 5, 10, 30, 31].map((timeS) => ({ timeS, tempC: 100 + timeS }))
    expect(alignCurveByStage(points, [0, 10, 30], [0, 20, 30])).toEqual([
      { timeS: 0, tempC: 100 },
      { timeS: 10, tempC: 105 },
      { timeS: 20, tempC: 110 },
      { timeS: 30, tempC: 130 },
    ])
  })
  it('names boundaries that are too few, unequal, falling or not numbers', () => {
    expectRangeError('fromBoundariesS', () => alignTimeByStage([0], [0]))
    expectRangeError('toBoundariesS', () => alignTimeByStage([0, 1], [0, 1, 2]))
    expectRangeError('toBoundariesS[1]', () => alignTimeByStage([0, 1], [1, 0]))
    for (const value of notNumbers) {
      expectRangeError('fromBoundariesS[1]', () => alignTimeByStage([0, value], [0, 1]))
      expectRangeError('timeS', () => alignTimeByStage([0, 1], [0, 1])(value))
    }
  })
})
