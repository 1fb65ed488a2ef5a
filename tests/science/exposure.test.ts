import { describe, expect, it } from 'vitest'
import * as z from 'zod'
import {
  CARBON_MONOXIDE_LIMITS_PPM,
  nioshLimitsC,
  timeWeighted8hPpm,
  wbgtIndoorC,
} from '../../lib/science/exposure'
import {
  expectClose,
  expectRangeError,
  notNumbers,
  numberShape,
  numbersShape,
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
    const { indoor } = z.object({ indoor: z.number() }).parse(check.expected)
    expectClose(
      check,
      wbgtIndoorC(numberShape.parse(check.inputs.tnw), numberShape.parse(check.inputs.tg)),
      indoor,
    )
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
