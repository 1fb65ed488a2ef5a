import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import * as z from 'zod'
import type { ThermocoupleType } from '../../lib/science/thermocouple'
import {
  approximateTempCFromEmf,
  compensatedTempC,
  emfMv,
  tempCFromEmf,
  toleranceC,
} from '../../lib/science/thermocouple'
import {
  expectClose,
  expectRangeError,
  expectWithin,
  notNumbers,
  numberShape,
  numbersShape,
  propertyRun,
  testPublished,
} from './published-checks'

const typeShape = z.enum(['K', 'N', 'J', 'T'])
const inverseRangeC: Record<ThermocoupleType, [number, number]> = {
  K: [-200, 1372],
  N: [-200, 1300],
  J: [-210, 1200],
  T: [-200, 400],
}
const types = typeShape.options
const typeAndTemp = fc.constantFrom(...types).chain((type) => {
  const [min, max] = inverseRangeC[type]
  return fc.record({ type: fc.constant(type), tempC: fc.double({ min, max, noNaN: true }) })
})

describe('emf of the reference functions', () => {
  testPublished('tc.emf_mV', (check) => {
    const type = typeShape.parse(check.inputs.type)
    const expected = numbersShape.parse(check.expected)
    numbersShape
      .parse(check.inputs.t_C)
      .forEach((tempC, i) => expectClose(check, emfMv(type, tempC), expected[i] ?? NaN))
  })
  testPublished('tc.loop_emf_mV = E(t_ref)-E(t)', (check) => {
    const type = typeShape.parse(check.inputs.type)
    const referenceMv = emfMv(type, numberShape.parse(check.inputs.ref_C))
    const expected = numbersShape.parse(check.expected)
    numbersShape
      .parse(check.inputs.t_C)
      .forEach((tempC, i) => expectClose(check, referenceMv - emfMv(type, tempC), expected[i] ?? NaN))
  })

  it('law: emf rises strictly with temperature', () => {
    fc.assert(
      fc.property(typeAndTemp, fc.double({ min: 0.001, max: 50, noNaN: true }), ({ type, tempC }, riseC) => {
        const warmerC = Math.min(tempC + riseC, inverseRangeC[type][1])
        if (warmerC - tempC > 1e-6) expect(emfMv(type, warmerC)).toBeGreaterThan(emfMv(type, tempC))
      }),
      propertyRun,
    )
  })
  it('covers the whole range of NIST Monograph 175 and nothing beyond it', () => {
    const full = { K: [-270, 1372], N: [-270, 1300], J: [-210, 1200], T: [-270, 400] } as const
    for (const type of types) {
      const [min, max] = full[type]
      expect(emfMv(type, min)).toBeLessThan(0)
      expect(emfMv(type, max)).toBeGreaterThan(0)
      for (const tempC of [min - 0.001, max + 0.001, ...notNumbers]) {
        expectRangeError('tempC', () => emfMv(type, tempC))
      }
    }
  })
})

describe('temperature from emf', () => {
  const inverseCheck = (name: string, inverse: (type: ThermocoupleType, emf: number) => number) =>
    testPublished(name, (check) => {
      const type = typeShape.parse(check.inputs.type)
      const expected = numbersShape.parse(check.expected)
      numbersShape
        .parse(check.inputs.emf_mV)
        .forEach((emf, i) => expectClose(check, inverse(type, emf), expected[i] ?? NaN))
    })
  inverseCheck('tc.inverse_polynomial_C', approximateTempCFromEmf)
  inverseCheck('tc.exact_inverse_C', tempCFromEmf)

  it('law: the inverse of the emf is the temperature to 1e-6 °C, over the whole range', () => {
    fc.assert(
      fc.property(typeAndTemp, ({ type, tempC }) => {
        expectWithin(tempCFromEmf(type, emfMv(type, tempC)), tempC, 1e-6)
        // Monograph 175 states at most 0.06 °C for the approximate inverses.
        expectWithin(approximateTempCFromEmf(type, emfMv(type, tempC)), tempC, 0.06 + 0.005)
      }),
      { ...propertyRun, numRuns: 2000 },
    )
  })
  it('law: more emf is always a higher temperature, across the joints of the polynomials too', () => {
    const joints = fc.constantFrom(0, 0.000_001, 20.644, 20.613, 42.919)
    fc.assert(
      fc.property(
        typeAndTemp,
        fc.double({ min: 1e-6, max: 2, noNaN: true }),
        joints,
        ({ type, tempC }, riseMv, joint) => {
          const ends = [emfMv(type, inverseRangeC[type][0]), emfMv(type, inverseRangeC[type][1])] as const
          for (const emf of [emfMv(type, tempC), joint]) {
            const higher = emf + riseMv
            if (emf < ends[0] || higher > ends[1]) continue
            expect(tempCFromEmf(type, higher)).toBeGreaterThan(tempCFromEmf(type, emf))
          }
        },
      ),
      propertyRun,
    )
  })
  it('the ends of Monograph 175’s emf range are inside, anything beyond is no temperature', () => {
    const ends = {
      K: [-5.891, 54.886],
      N: [-3.99, 47.513],
      J: [-8.095, 69.553],
      T: [-5.603, 20.872],
    } as const
    for (const type of types) {
      for (const end of [0, 1] as const) {
        expectWithin(tempCFromEmf(type, ends[type][end]), inverseRangeC[type][end], 0.05)
      }
      for (const emf of [ends[type][0] - 0.01, ends[type][1] + 0.01, ...notNumbers]) {
        expectRangeError('emfMv', () => tempCFromEmf(type, emf))
      }
    }
  })
})

describe('cold junction', () => {
  const expectedShape = z.object({
    emf_total_mV: z.number(),
    t_C_inverse_polynomial: z.number().optional(),
    t_C_exact: z.number().optional(),
    t_C: z.number().optional(),
  })
  const coldJunctionCheck = (name: string) =>
    testPublished(name, (check) => {
      const type = typeShape.parse(check.inputs.type)
      const measuredMv = numberShape.parse(check.inputs.measured_mV)
      const coldJunctionC = numberShape.parse(check.inputs.cold_junction_C)
      const expected = expectedShape.parse(check.expected)
      expectClose(check, measuredMv + emfMv(type, coldJunctionC), expected.emf_total_mV)
      expectClose(
        check,
        compensatedTempC(type, measuredMv, coldJunctionC),
        expected.t_C_exact ?? expected.t_C ?? NaN,
      )
      if (expected.t_C_inverse_polynomial !== undefined) {
        const totalMv = measuredMv + emfMv(type, coldJunctionC)
        expectClose(check, approximateTempCFromEmf(type, totalMv), expected.t_C_inverse_polynomial)
      }
    })
  coldJunctionCheck('tc.cold_junction')
  coldJunctionCheck('tc.cold_junction (table arithmetic)')

  it('law: what a junction at t gives against a cold junction leads back to t', () => {
    fc.assert(
      fc.property(
        typeAndTemp,
        fc.double({ min: -20, max: 60, noNaN: true }),
        ({ type, tempC }, coldJunctionC) => {
          const measuredMv = emfMv(type, tempC) - emfMv(type, coldJunctionC)
          expectWithin(compensatedTempC(type, measuredMv, coldJunctionC), tempC, 1e-6)
        },
      ),
      propertyRun,
    )
  })
  it('an invalid emf or cold junction is named', () => {
    for (const value of [...notNumbers, 100])
      expectRangeError('measuredMv', () => compensatedTempC('K', value, 20))
    for (const value of [...notNumbers, -300])
      expectRangeError('coldJunctionC', () => compensatedTempC('K', 1, value))
  })
})

describe('tolerance', () => {
  testPublished('tc.tolerance_C (null = outside class range)', (check) => {
    const cases = z
      .array(z.tuple([typeShape, z.union([z.literal(1), z.literal(2), z.literal(3)]), z.number()]))
      .parse(check.inputs.cases_type_class_t)
    const expected = z.array(z.number().nullable()).parse(check.expected)
    cases.forEach(([type, iecClass, tempC], i) => {
      const actual = toleranceC(type, iecClass, tempC)
      const wanted = expected[i] ?? null
      if (wanted === null || actual === null) expect(actual).toBe(wanted)
      else expectClose(check, actual, wanted)
    })
  })
  it('a temperature that is not a number is named', () => {
    for (const value of notNumbers) expectRangeError('tempC', () => toleranceC('K', 1, value))
  })
})
