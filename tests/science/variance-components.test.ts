import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import * as z from 'zod'
import { oneWayAnova } from '../../lib/science/statistics'
import { varianceComponentEstimates, varianceComponents } from '../../lib/science/variance-components'
import {
  expectClose,
  expectRangeError,
  expectWithin,
  notNumbers,
  propertyRun,
  tableShape,
  testPublished,
} from './published-checks'
import { normalValues, take } from './random-samples'

/** Montgomery, Design and Analysis of Experiments: strength of cloth from four looms. */
const looms = [
  [98, 97, 99, 96],
  [91, 90, 93, 92],
  [96, 95, 97, 95],
  [95, 96, 99, 98],
]

describe('variance components', () => {
  testPublished('anova.oneway_random', (check) => {
    const groups = tableShape.parse(check.inputs.groups)
    const expected = z
      .object({
        SS_between: z.number(),
        SS_within: z.number(),
        MS_between: z.number(),
        MS_within: z.number(),
        F: z.number(),
        var_between: z.number(),
        var_within: z.number(),
      })
      .parse(check.expected)
    const anova = oneWayAnova(groups)
    const parts = varianceComponents(groups)
    expectClose(check, anova.ssBetween, expected.SS_between)
    expectClose(check, anova.ssWithin, expected.SS_within)
    expectClose(check, anova.msBetween, expected.MS_between)
    expectClose(check, anova.msWithin, expected.MS_within)
    expectClose(check, anova.f, expected.F)
    expectClose(check, parts.between, expected.var_between)
    expectClose(check, parts.within, expected.var_within)
  })
  it('the looms, same example: share between looms 0.79, interval 0.38 to 0.98; from memory', () => {
    const { intraclass, between, within } = varianceComponentEstimates(looms)
    expectWithin(intraclass.value, 6.96 / 8.86, 0.001)
    // Printed L 0.625 and U 54.883 of the ratio, from F quantiles of two decimals: as shares 0.385 and 0.982.
    expectWithin(intraclass.low, 0.625 / 1.625, 0.002)
    expectWithin(intraclass.high, 54.883 / 55.883, 0.002)
    expectWithin(between.value, 6.96, 0.0051)
    expectWithin(within.value, 1.9, 0.0051)
  })
  it('the intervals hold the truth about as often as they say', () => {
    const normal = normalValues(11)
    const held = { between: 0, within: 0, intraclass: 0 }
    const truth = { between: 4, within: 1, intraclass: 0.8 }
    for (let trial = 0; trial < 400; trial += 1) {
      const groups = take(8, normal).map((group) => take(5, normal).map((value) => 2 * group + value))
      const found = varianceComponentEstimates(groups)
      for (const key of ['between', 'within', 'intraclass'] as const)
        if (found[key].low <= truth[key] && truth[key] <= found[key].high) held[key] += 1
    }
    // 95 % of 400 is 380, standard deviation 4.4: within four of them.
    for (const key of ['between', 'within', 'intraclass'] as const) expectWithin(held[key], 380, 18)
  })
})

describe('laws of the components', () => {
  const groups = fc.array(
    fc.array(fc.double({ min: -50, max: 50, noNaN: true }), { minLength: 2, maxLength: 8 }),
    { minLength: 2, maxLength: 6 },
  )
  it('law: a shift changes nothing, a change of unit takes variances along by its square', () => {
    fc.assert(
      fc.property(groups, fc.integer({ min: -100, max: 100 }), (table, shift) => {
        if (oneWayAnovaOrNull(table) === null) return
        const found = varianceComponentEstimates(table)
        const moved = varianceComponentEstimates(table.map((row) => row.map((value) => 3 * value + shift)))
        expectWithin(moved.within.value, 9 * found.within.value, 1e-6 * (1 + moved.within.value))
        expectWithin(moved.between.value, 9 * found.between.value, 1e-6 * (1 + moved.between.value))
        expectWithin(moved.intraclass.value, found.intraclass.value, 1e-6)
      }),
      propertyRun,
    )
  })
  it('law: every interval is in order, holds its value, and no share leaves 0 to 1', () => {
    fc.assert(
      fc.property(groups, (table) => {
        if (oneWayAnovaOrNull(table) === null) return
        const { between, within, intraclass } = varianceComponentEstimates(table)
        for (const { value, low, high } of [within, intraclass]) {
          expect(low).toBeLessThanOrEqual(high)
          // A component that came out below 0 is shown as 0; its interval may end there too.
          expect(low).toBeLessThanOrEqual(value)
          if (value > 0) expect(value).toBeLessThanOrEqual(high * (1 + 1e-12))
        }
        expect(between.low).toBeGreaterThanOrEqual(0)
        expect(between.low).toBeLessThanOrEqual(between.high)
        expect(intraclass.high).toBeLessThanOrEqual(1)
      }),
      propertyRun,
    )
  })
})

it('names groups that cannot be parted and a confidence outside its domain', () => {
  expectRangeError('groups', () => varianceComponents([[1, 2]]))
  for (const value of notNumbers)
    expectRangeError('groups[1][0]', () => varianceComponentEstimates([[1, 2], [value, 3]])) // prettier-ignore
  for (const value of [...notNumbers, 0, 1])
    expectRangeError('confidence', () => varianceComponentEstimates(looms, value))
})

/** Null where F does not exist, or all but: values that differ inside by rounding alone. */
function oneWayAnovaOrNull(table: number[][]): number | null {
  const isSpread = table.some((row) => Math.max(...row) - Math.min(...row) > 1e-3)
  return isSpread ? oneWayAnova(table).f : null
}
