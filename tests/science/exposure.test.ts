import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import * as z from 'zod'
import {
  CARBON_MONOXIDE_LIMITS_PPM,
  CARBON_MONOXIDE_MOLAR_MASS_G_PER_MOL,
  mgPerM3FromPpm,
  mixtureIndex,
  nioshLimitsC,
  timeWeighted8hPpm,
  timeWeightedWbgtC,
  wbgtIndoorC,
  wbgtOutdoorC,
} from '../../lib/science/exposure'
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

describe('carbon monoxide', () => {
  testPublished('exposure.twa8', (check) => {
    const segments = tableShape
      .parse(check.inputs.segments_ppm_h)
      .map(([ppm = NaN, hours = NaN]) => ({ ppm, hours }))
    expectClose(check, timeWeighted8hPpm(segments), numberShape.parse(check.expected))
  })
  testPublished('exposure.constants', (check) => {
    expect({
      OSHA_PEL_TWA_ppm: CARBON_MONOXIDE_LIMITS_PPM.oshaPelTwa,
      NIOSH_REL_TWA_ppm: CARBON_MONOXIDE_LIMITS_PPM.nioshRelTwa,
      NIOSH_ceiling_ppm: CARBON_MONOXIDE_LIMITS_PPM.nioshCeiling,
      ACGIH_TLV_TWA_ppm: CARBON_MONOXIDE_LIMITS_PPM.acgihTlvTwa,
      IDLH_ppm: CARBON_MONOXIDE_LIMITS_PPM.immediatelyDangerous,
    }).toEqual(check.expected)
  })
  testPublished('exposure.mixture_index', (check) => {
    const parts = tableShape
      .parse(check.inputs.C_L)
      .map(([concentration = NaN, limit = NaN]) => ({ concentration, limit }))
    expectClose(check, mixtureIndex(parts), numberShape.parse(check.expected))
  })
  testPublished('exposure.ppm_to_mg_m3', (check) => {
    expect(check.inputs.molar_mass).toBe(CARBON_MONOXIDE_MOLAR_MASS_G_PER_MOL)
    const expected = numbersShape.parse(check.expected)
    numbersShape
      .parse(check.inputs.ppm)
      .forEach((ppm, i) =>
        expectClose(check, mgPerM3FromPpm(ppm, CARBON_MONOXIDE_MOLAR_MASS_G_PER_MOL), expected[i] ?? NaN),
      )
  })
  it('law: a shift split into parts has the same mean, an hour without gas adds nothing, and shares add up', () => {
    const amount = fc.double({ min: 0, max: 500, noNaN: true })
    const segment = fc.record({ ppm: amount, hours: fc.double({ min: 0, max: 4, noNaN: true }) })
    fc.assert(
      fc.property(fc.array(segment, { minLength: 1, maxLength: 8 }), (segments) => {
        const whole = timeWeighted8hPpm(segments)
        const halves = segments.flatMap(({ ppm, hours }) => [
          { ppm, hours: hours / 2 },
          { ppm, hours: hours / 2 },
        ])
        expectWithin(timeWeighted8hPpm([...halves, { ppm: 0, hours: 1 }]), whole, 1e-9 * (1 + whole))
        const parts = segments.map(({ ppm }) => ({ concentration: ppm, limit: 50 }))
        const total = parts.reduce((sum, part) => sum + mixtureIndex([part]), 0)
        expectWithin(mixtureIndex(parts), total, 1e-9 * (1 + total))
      }),
      propertyRun,
    )
  })
  it('names a part of a mixture, or an amount of gas, outside the domain', () => {
    expectRangeError('parts', () => mixtureIndex([]))
    for (const value of [...notNumbers, -1]) {
      expectRangeError('parts[0].concentration', () => mixtureIndex([{ concentration: value, limit: 1 }]))
      expectRangeError('ppm', () => mgPerM3FromPpm(value, 28))
    }
    for (const value of [...notNumbers, 0]) {
      expectRangeError('parts[0].limit', () => mixtureIndex([{ concentration: 1, limit: value }]))
      expectRangeError('molarMassGPerMol', () => mgPerM3FromPpm(1, value))
    }
  })
  it('names a segment outside the domain', () => {
    expectRangeError('segments', () => timeWeighted8hPpm([]))
    for (const value of [...notNumbers, -1]) {
      expectRangeError('segments[0].ppm', () => timeWeighted8hPpm([{ ppm: value, hours: 1 }]))
      expectRangeError('segments[0].hours', () => timeWeighted8hPpm([{ ppm: 1, hours: value }]))
    }
  })
})

describe('heat', () => {
  testPublished('heat.wbgt', (check) => {
    const { tnw, tg, ta } = z.object({ tnw: z.number(), tg: z.number(), ta: z.number() }).parse(check.inputs)
    const expected = z.object({ indoor: z.number(), outdoor: z.number() }).parse(check.expected)
    expectClose(check, wbgtIndoorC(tnw, tg), expected.indoor)
    expectClose(check, wbgtOutdoorC(tnw, tg, ta), expected.outdoor)
  })
  testPublished('heat.wbgt_twa', (check) => {
    const segments = tableShape
      .parse(check.inputs.wbgt_min)
      .map(([wbgtC = NaN, minutes = NaN]) => ({ wbgtC, minutes }))
    expectClose(check, timeWeightedWbgtC(segments), numberShape.parse(check.expected))
  })
  it('law: a mean over time lies between its parts; where air and globe agree sun and shade are the same', () => {
    const segment = fc.record({
      wbgtC: fc.double({ min: -10, max: 50, noNaN: true }),
      minutes: fc.double({ min: 0.1, max: 60, noNaN: true }),
    })
    fc.assert(
      fc.property(fc.array(segment, { minLength: 1, maxLength: 8 }), (segments) => {
        const all = segments.map(({ wbgtC }) => wbgtC)
        const over = timeWeightedWbgtC(segments)
        expect(over).toBeGreaterThanOrEqual(Math.min(...all) - 1e-9)
        expect(over).toBeLessThanOrEqual(Math.max(...all) + 1e-9)
        const [tnwC = 0, tgC = 0] = all
        expectWithin(wbgtOutdoorC(tnwC, tgC, tgC), wbgtIndoorC(tnwC, tgC), 1e-9)
      }),
      propertyRun,
    )
  })
  it('names a segment of heat outside the domain', () => {
    expectRangeError('segments', () => timeWeightedWbgtC([]))
    expectRangeError('segments', () => timeWeightedWbgtC([{ wbgtC: 20, minutes: 0 }]))
    for (const value of [...notNumbers, -1])
      expectRangeError('segments[0].minutes', () => timeWeightedWbgtC([{ wbgtC: 20, minutes: value }]))
    for (const value of notNumbers) {
      expectRangeError('segments[0].wbgtC', () => timeWeightedWbgtC([{ wbgtC: value, minutes: 60 }]))
      expectRangeError('taC', () => wbgtOutdoorC(20, 30, value))
    }
  })
  testPublished('heat.niosh_limits_C', (check) => {
    const expected = z.object({ RAL: numbersShape, REL: numbersShape }).parse(check.expected)
    numbersShape.parse(check.inputs.M_W).forEach((metabolicRateW, i) => {
      const limits = nioshLimitsC(metabolicRateW)
      expectClose(check, limits.ral, expected.RAL[i] ?? NaN)
      expectClose(check, limits.rel, expected.REL[i] ?? NaN)
    })
  })
  it('names what is outside the domain', () => {
    for (const value of notNumbers) {
      expectRangeError('tnwC', () => wbgtIndoorC(value, 30))
      expectRangeError('tgC', () => wbgtIndoorC(30, value))
    }
    for (const value of [...notNumbers, 0]) expectRangeError('metabolicRateW', () => nioshLimitsC(value))
  })
})
