import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import * as z from 'zod'
import { censoredRegression } from '../../lib/science/censored-regression'
import type { FamilyId } from '../../lib/science/marker-families'
import { familyIds, markerFamilies } from '../../lib/science/marker-families'
import type { MarkerFit, MarkerResult } from '../../lib/science/marker-fit'
import { fitMarker, predictMarker } from '../../lib/science/marker-fit'
import { linearRegression, nonlinearLeastSquares, tQuantile } from '../../lib/science/statistics'
import { threeDigits } from '../../lib/science/three-digits'
import { expectRangeError, expectWithin, numbersShape, propertyRun, testPublished } from './published-checks'

function resultsOf(x: readonly (number | readonly number[])[], y: readonly number[]): MarkerResult[] {
  return x.map((one, i) => ({
    x: typeof one === 'number' ? [one] : one,
    value: y[i] ?? NaN,
    isBelowLimit: false,
  }))
}

function fitOf(family: FamilyId, results: readonly MarkerResult[]): MarkerFit {
  const outcome = fitMarker(family, results)
  if (!outcome.ok) throw new Error(outcome.refusal)
  return outcome.fit
}

function refusalOf(family: FamilyId, results: readonly MarkerResult[]): string {
  const outcome = fitMarker(family, results)
  if (outcome.ok) throw new Error(`fitted: ${JSON.stringify(outcome.fit.parameters)}`)
  return outcome.refusal
}

/** Normal errors from a fixed seed: Box–Muller on a multiplicative congruential generator (Park and Miller 1988). */
function normals(seed: number): () => number {
  let state = seed
  const next = () => {
    state = (state * 48_271) % 2_147_483_647
    return state / 2_147_483_647
  }
  return () => Math.sqrt(-2 * Math.log(next())) * Math.cos(2 * Math.PI * next())
}

const doses = [1, 2, 4, 6, 9, 13, 18, 25, 34, 45, 60, 80]

/** Saw-tooth errors that sum to nothing in particular, the same each time. */
const wobble = (i: number) => [0.4, -0.7, 0.2, 0.6, -0.5, -0.1, 0.3, -0.2][i % 8] ?? 0

describe('a straight line', () => {
  const lineShape = z.object({
    b0: z.number(),
    b1: z.number(),
    sd_b0: z.number(),
    sd_b1: z.number(),
    residual_sd: z.number(),
  })

  testPublished('stats.linear_regression', (check) => {
    const x = numbersShape.parse(check.inputs['x'])
    const y = numbersShape.parse(check.inputs['y'])
    const expected = lineShape.parse(check.expected)
    // The family takes any depth from 0 up, so the published x go in as they are.
    const fit = fitOf('line in toast depth', resultsOf(x, y))
    const [a, b] = fit.parameters
    // The level's interval takes in 0, which says nothing against a line.
    expectWithin(a?.value ?? NaN, expected.b0, 1e-8 * Math.abs(expected.b0))
    expectWithin(b?.value ?? NaN, expected.b1, 1e-8)
    expectWithin(a?.standardError ?? NaN, expected.sd_b0, 1e-8)
    expectWithin(b?.standardError ?? NaN, expected.sd_b1, 1e-8)
    expectWithin(fit.residualSd, expected.residual_sd, 1e-8)
  })

  it('in log10 of the dose is the least squares line, to the last digit, with t intervals', () => {
    const y = doses.map((dose, i) => 3 + 2 * Math.log10(dose) + wobble(i))
    const line = linearRegression(doses.map(Math.log10), y)
    const fit = fitOf('line in log10 dose', resultsOf(doses, y))
    expect(fit.parameters[0]?.value).toBe(line.intercept)
    expect(fit.parameters[1]?.value).toBe(line.slope)
    expect(fit.residualSd).toBe(line.residualSd)
    expect(fit.degreesOfFreedom).toBe(10)
    expect(fit.method).toBe('least squares')
    expectWithin((fit.parameters[1]?.high ?? NaN) - line.slope, tQuantile(0.975, 10) * line.slopeSd, 1e-12)
  })

  it('predicts with the interval of the textbook: s·√(1 + 1/n + (x − x̄)²/Sxx) (Draper and Smith)', () => {
    const y = doses.map((dose, i) => 3 + 2 * Math.log10(dose) + wobble(i))
    const fit = fitOf('line in log10 dose', resultsOf(doses, y))
    const x = doses.map(Math.log10)
    const mean = x.reduce((sum, value) => sum + value, 0) / x.length
    const squares = x.reduce((sum, value) => sum + (value - mean) ** 2, 0)
    for (const dose of [1, 7, 33, 80]) {
      const predicted = predictMarker(fit, [dose])
      if (!predicted.ok) throw new Error(predicted.refusal)
      const share = 1 / x.length + (Math.log10(dose) - mean) ** 2 / squares
      const t = tQuantile(0.975, 10)
      expectWithin(predicted.high - predicted.value, t * fit.residualSd * Math.sqrt(1 + share), 1e-10)
      expectWithin(predicted.meanHigh - predicted.value, t * fit.residualSd * Math.sqrt(share), 1e-10)
      expectWithin(predicted.value - predicted.low, predicted.high - predicted.value, 1e-10)
    }
  })

  it('residuals add up to nothing and are value less fitted', () => {
    const y = doses.map((dose, i) => 3 + 2 * Math.log10(dose) + wobble(i))
    const fit = fitOf('line in log10 dose', resultsOf(doses, y))
    expectWithin(
      fit.residuals.reduce((sum, one) => sum + (one.residual ?? NaN), 0),
      0,
      1e-12,
    )
    fit.residuals.forEach((one, i) => expectWithin(one.fitted + (one.residual ?? NaN), y[i] ?? NaN, 1e-12))
  })
})

describe('a plane in both indices', () => {
  const slow = [2, 3, 5, 8, 12, 18, 4, 7, 11, 16, 22, 9]
  const fast = [9, 4, 6, 2, 3, 1.5, 1, 8, 12, 5, 4, 0.7]
  const x = slow.map((one, i) => [one, fast[i] ?? 1])
  const y = x.map(([s = 1, f = 1], i) => 2 + 3 * Math.log10(s) - 1.5 * Math.log10(f) + 0.2 * wobble(i))

  it('agrees with the normal equations, solved by hand in centred form', () => {
    const fit = fitOf('plane in log10 indices', resultsOf(x, y))
    const u = slow.map(Math.log10)
    const v = fast.map(Math.log10)
    const mean = (values: readonly number[]) => values.reduce((sum, one) => sum + one, 0) / values.length
    const moment = (a: readonly number[], b: readonly number[]) =>
      a.reduce((sum, one, i) => sum + (one - mean(a)) * ((b[i] ?? 0) - mean(b)), 0)
    const determinant = moment(u, u) * moment(v, v) - moment(u, v) ** 2
    const b = (moment(u, y) * moment(v, v) - moment(v, y) * moment(u, v)) / determinant
    const c = (moment(v, y) * moment(u, u) - moment(u, y) * moment(u, v)) / determinant
    expectWithin(fit.parameters[1]?.value ?? NaN, b, 1e-8)
    expectWithin(fit.parameters[2]?.value ?? NaN, c, 1e-8)
    expectWithin(
      fit.parameters[1]?.standardError ?? NaN,
      fit.residualSd * Math.sqrt(moment(v, v) / determinant),
      1e-7,
    )
  })

  it('refuses a toast whose indices are each inside the range and together outside', () => {
    const fit = fitOf('plane in log10 indices', resultsOf(x, y))
    expect(predictMarker(fit, [8, 3]).ok).toBe(true)
    const corner = predictMarker(fit, [22, 12])
    expect(corner).toMatchObject({ ok: false, refusal: expect.stringContaining('together are not') })
    expect(predictMarker(fit, [1.9, 3])).toMatchObject({
      ok: false,
      refusal:
        'A slow index of 1.9 min lies outside the 2 to 22 min that the results cover. The fit says nothing there.',
    })
  })

  it('refuses indices that go together in all results', () => {
    const together = slow.map((one) => [one, one / 3])
    expect(refusalOf('plane in log10 indices', resultsOf(together, y))).toMatch(
      /do not determine|do not tell/,
    )
    const nearly = slow.map((one, i) => [one, (one / 3) * (1 + 0.01 * wobble(i))])
    expect(refusalOf('plane in log10 indices', resultsOf(nearly, y))).toMatch(/do not tell the slow index/)
  })
})

describe('the curves', () => {
  // Misra1a is y = b1·(1 − exp(−b2·x)), the rise to a level; the other sets are of other models.
  testPublished(
    'stats.nonlinear_least_squares',
    (check) => {
      const shape = z.object({ b: numbersShape, sd_b: numbersShape, residual_sd: z.number(), df: z.number() })
      const expected = shape.parse(check.expected)
      const x = numbersShape.parse(check.inputs['x'])
      const fit = fitOf('rise with dose', resultsOf(x, numbersShape.parse(check.inputs['y'])))
      fit.parameters.forEach((parameter, j) => {
        const b = expected.b[j] ?? NaN
        expectWithin(parameter.value, b, 1e-6 * b)
        expectWithin(parameter.standardError, expected.sd_b[j] ?? NaN, 1e-5 * (expected.sd_b[j] ?? NaN))
      })
      expectWithin(fit.residualSd, expected.residual_sd, 1e-6 * expected.residual_sd)
      expect(fit.degreesOfFreedom).toBe(expected.df)
    },
    'strd.nls.Misra1a',
  )

  it('law: rise and fall is found again from exact results, wherever it has its highest point', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 5, max: 60, noNaN: true }),
        fc.double({ min: 0.08, max: 0.5, noNaN: true }),
        fc.double({ min: 0.01, max: 0.06, noNaN: true }),
        (a, k, l) => {
          const { value } = markerFamilies['rise and fall with dose']
          const fit = fitOf(
            'rise and fall with dose',
            resultsOf(
              doses,
              doses.map((dose) => value([a, k, l], [dose])),
            ),
          )
          ;[a, k, l].forEach((b, j) => expectWithin(fit.parameters[j]?.value ?? NaN, b, 1e-5 * b))
        },
      ),
      { ...propertyRun, numRuns: 12 },
    )
  })

  it('gradients are the derivatives that differences show', () => {
    for (const id of familyIds) {
      const { gradient, value, parameters, predictors } = markerFamilies[id]
      const b = [12, 0.2, 0.03].slice(0, parameters.length)
      for (const dose of [1, 10, 50]) {
        const x = predictors.map((_, i) => dose + i)
        gradient(b, x).forEach((slope, j) => {
          const width = 1e-5 * (b[j] ?? 1)
          const moved = (by: number) =>
            value(
              b.map((one, i) => (i === j ? one + by : one)),
              x,
            )
          expectWithin(
            slope,
            (moved(width) - moved(-width)) / (2 * width),
            1e-6 * Math.max(1, Math.abs(slope)),
          )
        })
      }
    }
  })

  it('predict inside the results only, the highest and lowest included', () => {
    const y = doses.map(
      (dose, i) => 20 * (1 - Math.exp(-0.1 * dose)) * Math.exp(-0.02 * dose) + 0.2 * wobble(i),
    )
    const fit = fitOf('rise and fall with dose', resultsOf(doses, y))
    expect(predictMarker(fit, [1]).ok).toBe(true)
    expect(predictMarker(fit, [80]).ok).toBe(true)
    expect(predictMarker(fit, [80.1])).toMatchObject({
      ok: false,
      refusal: expect.stringContaining('outside the 1 to 80 min'),
    })
    expect(predictMarker(fit, [0.9]).ok).toBe(false)
    const inside = predictMarker(fit, [13])
    if (!inside.ok) throw new Error(inside.refusal)
    expect(inside.high - inside.value).toBeGreaterThan(tQuantile(0.975, 9) * fit.residualSd)
    expect(inside.meanHigh - inside.value).toBeLessThan(inside.high - inside.value)
  })
})

describe('results below a limit', () => {
  it('of one sample give the estimates of Cohen (1961), table of λ(h, 0); from memory', () => {
    // All measured results equal and one unit above the limit: μ = ȳ − λ, σ² = λ.
    const table: [share: number, lambda: number][] = [
      [0.01, 0.0101],
      [0.1, 0.1102],
      [0.15, 0.17342],
      [0.2, 0.24268],
      [0.25, 0.31862],
      [0.3, 0.4021],
      [0.4, 0.5961],
      [0.5, 0.8368],
    ]
    for (const [share, lambda] of table) {
      const n = 100
      const isBelow = Array.from({ length: n }, (_, i) => i < share * n - 0.5)
      const fit = censoredRegression({
        design: isBelow.map(() => [1]),
        y: isBelow.map((below) => (below ? 0 : 1)),
        isBelow,
      })
      expectWithin(1 - (fit.coefficients[0] ?? NaN), lambda, 5e-5)
      expectWithin((fit.residualSd ** 2 * (n - 1)) / n, lambda, 5e-5)
    }
  })

  it('law: none of them: the estimates of least squares, standard errors and spread too', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 1e6 }), fc.integer({ min: 4, max: 30 }), (seed, n) => {
        const normal = normals(seed)
        const x = Array.from({ length: n }, (_, i) => i + normal())
        const y = x.map((one) => 5 + 0.7 * one + 2 * normal())
        const line = linearRegression(x, y)
        const fit = censoredRegression({ design: x.map((one) => [1, one]), y, isBelow: x.map(() => false) })
        expectWithin(fit.coefficients[0] ?? NaN, line.intercept, 1e-8 * Math.max(1, Math.abs(line.intercept)))
        expectWithin(fit.coefficients[1] ?? NaN, line.slope, 1e-8)
        expectWithin(Math.sqrt(fit.covariance[0]?.[0] ?? NaN), line.interceptSd, 1e-7 * line.interceptSd)
        expectWithin(Math.sqrt(fit.covariance[1]?.[1] ?? NaN), line.slopeSd, 1e-7 * line.slopeSd)
        expectWithin(fit.residualSd, line.residualSd, 1e-8 * line.residualSd)
      }),
      { ...propertyRun, numRuns: 60 },
    )
  })

  it('is the highest likelihood: no neighbour has a higher one', () => {
    const normal = normals(77)
    const x = Array.from({ length: 30 }, (_, i) => i / 10)
    const full = x.map((one) => -0.5 + one + 0.5 * normal())
    const isBelow = full.map((one) => one < 0.3)
    const y = full.map((one) => Math.max(one, 0.3))
    const fit = censoredRegression({ design: x.map((one) => [1, one]), y, isBelow })
    const sd = fit.residualSd * Math.sqrt((30 - 2) / 30)
    // Written out anew with the tail probability by Simpson's rule, so that nothing is shared with what it checks.
    const below = (limit: number) => {
      const from = limit - 12
      let sum = 0
      for (let i = 0; i <= 4000; i += 1) {
        const t = from + ((limit - from) * i) / 4000
        sum += (i === 0 || i === 4000 ? 1 : i % 2 === 1 ? 4 : 2) * Math.exp(-0.5 * t * t)
      }
      return (sum * (limit - from)) / 4000 / 3 / Math.sqrt(2 * Math.PI)
    }
    const likelihood = (a: number, b: number, s: number) =>
      x.reduce((sum, one, i) => {
        const off = ((y[i] ?? 0) - a - b * one) / s
        return (
          sum +
          (isBelow[i] === true
            ? Math.log(below(off))
            : -Math.log(s) - 0.5 * off * off - 0.5 * Math.log(2 * Math.PI))
        )
      }, 0)
    const [a = NaN, b = NaN] = fit.coefficients
    const highest = likelihood(a, b, sd)
    expectWithin(highest, fit.logLikelihood, 1e-6)
    for (const [da, db, ds] of [
      [0.01, 0, 0],
      [-0.01, 0, 0],
      [0, 0.01, 0],
      [0, -0.01, 0],
      [0, 0, 0.01],
      [0, 0, -0.01],
    ]) {
      expect(likelihood(a + (da ?? 0), b + (db ?? 0), sd + (ds ?? 0))).toBeLessThan(highest)
    }
  })

  it('a line is found again among simulated results, which leaving them out or taking the limit would not do', () => {
    const normal = normals(4242)
    const dose = Array.from({ length: 400 }, (_, i) => 10 ** (i / 200))
    const full = dose.map((one) => 1 + 2 * Math.log10(one) + 0.8 * normal())
    const results = full.map((one, i) => ({
      x: [dose[i] ?? 1],
      value: Math.max(one, 2),
      isBelowLimit: one < 2,
    }))
    expect(results.filter((one) => one.isBelowLimit).length).toBeGreaterThan(80)
    const fit = fitOf('line in log10 dose', results)
    expect(fit.method).toBe('maximum likelihood')
    ;[1, 2].forEach((truth, j) => {
      const parameter = fit.parameters[j]
      expectWithin(parameter?.value ?? NaN, truth, 3 * (parameter?.standardError ?? NaN))
    })
    expectWithin(fit.residualSd, 0.8, 0.08)
    const atLimit = fitOf(
      'line in log10 dose',
      results.map((one) => ({ ...one, isBelowLimit: false })),
    )
    expect(Math.abs((atLimit.parameters[1]?.value ?? NaN) - 2)).toBeGreaterThan(0.2)
    expect(fit.residuals.filter((one) => one.residual === null)).toHaveLength(fit.belowLimitCount)
  })

  it('far below what is fitted count for next to nothing, and the numbers hold', () => {
    const y = doses.map((dose, i) => 30 + 20 * Math.log10(dose) + wobble(i))
    const without = fitOf('line in log10 dose', resultsOf(doses, y))
    const odd: MarkerResult = { x: [40], value: 1e4, isBelowLimit: true }
    const withOne = fitOf('line in log10 dose', [...resultsOf(doses, y), odd])
    expectWithin(withOne.parameters[1]?.value ?? NaN, without.parameters[1]?.value ?? NaN, 1e-6)
    const impossible: MarkerResult = { x: [40], value: 1, isBelowLimit: true }
    const pulled = censoredRegression({
      design: [...doses, 40].map((dose) => [1, Math.log10(dose)]),
      y: [...y, impossible.value],
      isBelow: [...y.map(() => false), true],
    })
    // Sixty below its line by a spread of half a unit: the spread must grow, and nothing overflows.
    expect(pulled.residualSd).toBeGreaterThan(2)
    expect([...pulled.coefficients, pulled.logLikelihood].every(Number.isFinite)).toBe(true)
  })

  it('all of them, or most, or under a curve, are refused in words', () => {
    const y = doses.map((dose, i) => 3 + 2 * Math.log10(dose) + wobble(i))
    const below = (n: number) => resultsOf(doses, y).map((one, i) => ({ ...one, isBelowLimit: i < n }))
    expect(refusalOf('line in log10 dose', below(12))).toContain('Every result is below its limit')
    expect(refusalOf('line in log10 dose', below(7))).toContain('more than half')
    expect(refusalOf('rise with dose', below(2))).toBe(
      '2 results of 12 lie below the limit, which this curve cannot count. Take one of the straight lines, which can; do not leave them out.',
    )
    expect(() =>
      censoredRegression({ design: [[1], [1], [1]], y: [1, 1, 1], isBelow: [true, true, true] }),
    ).toThrow(/Every result/)
  })
})

describe('what the data cannot support is refused in words', () => {
  const line = (x: readonly number[], slope: number) =>
    resultsOf(
      x,
      x.map((dose, i) => 3 + slope * Math.log10(dose) + wobble(i)),
    )

  it('too few results, too few doses', () => {
    expect(refusalOf('line in log10 dose', [])).toContain(
      '0 measured results are too few for 2 parameters: give at least 5',
    )
    expect(refusalOf('line in log10 dose', line([1, 5, 20, 60], 2))).toContain('give at least 5')
    expect(refusalOf('line in log10 dose', line([5, 5, 5, 20, 20, 20], 2))).toBe(
      'The results lie at 2 different values of the dose: give at least 3.',
    )
    expect(refusalOf('rise and fall with dose', line([5, 5, 20, 20, 60, 60], 2))).toContain('at least 4')
  })

  it('a slope that the spread hides', () => {
    expect(refusalOf('line in log10 dose', line(doses, 0.05))).toMatch(
      /do not show that it changes with the dose.*\(b is .*, 95 % interval −.* to .*\)/,
    )
  })

  it('a fall that was not reached, a level that was not reached, results all on the fall', () => {
    const rising = doses.map((dose, i) => 20 * (1 - Math.exp(-0.2 * dose)) + 0.3 * wobble(i))
    expect(refusalOf('rise and fall with dose', resultsOf(doses, rising))).toMatch(
      /do not show a fall|No curve/,
    )
    const straight = doses.map((dose, i) => 0.2 * dose + 0.3 * wobble(i))
    expect(refusalOf('rise with dose', resultsOf(doses, straight))).toMatch(
      /level that it rises to|do not show how fast|No curve/,
    )
    const noise = doses.map((_, i) => 5 + wobble(i * 3))
    expect(fitMarker('rise and fall with dose', resultsOf(doses, noise)).ok).toBe(false)
  })

  it('a dose that has no logarithm', () => {
    expect(
      refusalOf(
        'line in log10 dose',
        line([0, ...doses.slice(1)], 2).map((one, i) => ({ ...one, value: i })),
      ),
    ).toContain('no logarithm')
  })

  it('numbers that are none are a fault of the caller', () => {
    expectRangeError('results[0].value', () =>
      fitMarker('rise with dose', [{ x: [1], value: NaN, isBelowLimit: false }]),
    )
    expectRangeError('results[0].x', () =>
      fitMarker('plane in log10 indices', [{ x: [1], value: 1, isBelowLimit: false }]),
    )
    const fit = fitOf('line in log10 dose', line(doses, 2))
    expectRangeError('x', () => predictMarker(fit, [NaN]))
    expectRangeError('y', () => censoredRegression({ design: [[1]], y: [1], isBelow: [false] }))
  })
})

describe('laws', () => {
  it('law: results in another unit give the same fit in that unit, and another order the same fit', () => {
    const y = doses.map((dose, i) => 3 + 2 * Math.log10(dose) + wobble(i))
    const results = resultsOf(doses, y).map((one, i) => ({ ...one, isBelowLimit: i < 2 }))
    fc.assert(
      fc.property(
        fc.double({ min: 1e-3, max: 1e3, noNaN: true }),
        fc.integer({ min: 0, max: 11 }),
        (scale, turn) => {
          const turned = [...results.slice(turn), ...results.slice(0, turn)]
          const one = fitOf('line in log10 dose', results)
          const other = fitOf(
            'line in log10 dose',
            turned.map((result) => ({ ...result, value: result.value * scale })),
          )
          one.parameters.forEach((parameter, j) => {
            const theirs = other.parameters[j]
            expectWithin(theirs?.value ?? NaN, parameter.value * scale, 1e-7 * scale)
            expectWithin(theirs?.standardError ?? NaN, parameter.standardError * scale, 1e-6 * scale)
          })
        },
      ),
      { ...propertyRun, numRuns: 40 },
    )
  })

  it('a fit is plain data: stored and read back it predicts the same', () => {
    const y = doses.map((dose, i) => 3 + 2 * Math.log10(dose) + wobble(i))
    const fit = fitOf('line in log10 dose', resultsOf(doses, y))
    const readBack: MarkerFit = JSON.parse(JSON.stringify(fit))
    expect(predictMarker(readBack, [13])).toEqual(predictMarker(fit, [13]))
  })

  it('the plane by least squares and by likelihood are one when nothing is below a limit', () => {
    const x = doses.map((dose, i) => [dose, 1 + ((i * 5) % 7)])
    const y = x.map(([s = 1, f = 1], i) => 1 + 2 * Math.log10(s) + 3 * Math.log10(f) + wobble(i))
    const { gradient, value } = markerFamilies['plane in log10 indices']
    const byLikelihood = censoredRegression({
      design: x.map((one) => gradient([], one)),
      y,
      isBelow: x.map(() => false),
    })
    const bySquares = nonlinearLeastSquares({ model: value, start: [0, 0, 0], x, y })
    bySquares.parameters.forEach((b, j) => expectWithin(byLikelihood.coefficients[j] ?? NaN, b, 1e-8))
    bySquares.standardErrors.forEach((se, j) =>
      expectWithin(Math.sqrt(byLikelihood.covariance[j]?.[j] ?? NaN), se, 1e-7),
    )
  })

  it('figures in sentences have three digits that count', () => {
    expect([13.84, 0.0042449, 1240.2, -2.5, 0, 70, 99.96].map(threeDigits)).toEqual([
      '13.8',
      '0.00424',
      '1240',
      '−2.5',
      '0',
      '70',
      '100',
    ])
  })
})
