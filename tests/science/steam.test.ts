import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import * as z from 'zod'
import {
  boilingPointC,
  saturationPressureMpa,
  saturationTempK,
  standardPressurePa,
} from '../../lib/science/steam'
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

describe('saturation line', () => {
  testPublished('steam.psat_MPa', (check) =>
    expectClose(
      check,
      saturationPressureMpa(numberShape.parse(check.inputs.T_K)),
      numberShape.parse(check.expected),
    ),
  )
  testPublished('steam.tsat_K', (check) =>
    expectClose(
      check,
      saturationTempK(numberShape.parse(check.inputs.p_MPa)),
      numberShape.parse(check.expected),
    ),
  )
  testPublished('steam.psat_Pa', (check) =>
    expectClose(
      check,
      saturationPressureMpa(numberShape.parse(check.inputs.T_K)) * 1e6,
      numberShape.parse(check.expected),
    ),
  )
  testPublished('steam.boiling_point_C (t=T-273.15)', (check) => {
    const expected = numbersShape.parse(check.expected)
    numbersShape
      .parse(check.inputs.p_hPa)
      .forEach((pressureHpa, i) => expectClose(check, boilingPointC(pressureHpa), expected[i] ?? NaN))
  })
  it('law: temperature and pressure are inverse, from freezing to the critical point', () => {
    fc.assert(
      fc.property(fc.double({ min: 273.15, max: 647.096, noNaN: true }), (tempK) => {
        expectWithin(saturationTempK(saturationPressureMpa(tempK)), tempK, 1e-6)
      }),
      propertyRun,
    )
  })
  it('law: the boiling point is the saturation temperature of the same pressure, and rises with it', () => {
    fc.assert(
      fc.property(fc.double({ min: 500, max: 1100, noNaN: true }), (pressureHpa) => {
        expectWithin(boilingPointC(pressureHpa), saturationTempK(pressureHpa / 10_000) - 273.15, 1e-9)
        expect(boilingPointC(pressureHpa + 1)).toBeGreaterThan(boilingPointC(pressureHpa))
        // Clausius and Clapeyron: dT/dp = T·Δv/Δh, 0.027 °C/hPa near 100 °C; within a third over this span.
        const slope = boilingPointC(pressureHpa + 0.5) - boilingPointC(pressureHpa - 0.5)
        expect(slope * pressureHpa).toBeGreaterThan(20)
        expect(slope * pressureHpa).toBeLessThan(35)
      }),
      propertyRun,
    )
  })
  it('near one atmosphere a hectopascal is 0.0277 °C (CHECKS §2, from IF97 region 4)', () => {
    expectWithin(boilingPointC(1013.75) - boilingPointC(1012.75), 0.0277, 1e-4)
  })
  it('values outside the domain are named', () => {
    for (const value of [...notNumbers, 273, 648])
      expectRangeError('tempK', () => saturationPressureMpa(value))
    for (const value of [...notNumbers, 0, 23]) expectRangeError('pressureMpa', () => saturationTempK(value))
    for (const value of [...notNumbers, -1, 0]) expectRangeError('pressureHpa', () => boilingPointC(value))
  })
})

describe('standard atmosphere', () => {
  testPublished('atmosphere.pressure_Pa and boiling_point_C', (check) => {
    const expected = z.object({ p_Pa: numbersShape, t_C: numbersShape }).parse(check.expected)
    numbersShape.parse(check.inputs.altitude_m).forEach((altitudeM, i) => {
      const pressurePa = standardPressurePa(altitudeM)
      expectWithin(pressurePa, expected.p_Pa[i] ?? NaN, toleranceOf(check, 'p_abs'))
      expectWithin(boilingPointC(pressurePa / 100), expected.t_C[i] ?? NaN, toleranceOf(check, 't_abs'))
    })
  })
  it('law: the air carries its own weight, dp/dz = −g·p/(R·T) with 6.5 K less each kilometre (ISO 2533)', () => {
    fc.assert(
      fc.property(fc.double({ min: -1900, max: 10_900, noNaN: true }), (altitudeM) => {
        const pressurePa = standardPressurePa(altitudeM)
        const slope = (standardPressurePa(altitudeM + 0.5) - standardPressurePa(altitudeM - 0.5)) / 1
        const weight = (9.80665 * pressurePa) / (287.05287 * (288.15 - 0.0065 * altitudeM))
        expectWithin(slope, -weight, 1e-6 * weight)
      }),
      propertyRun,
    )
  })
  it('an altitude outside the troposphere is named', () => {
    for (const value of [...notNumbers, 11_001])
      expectRangeError('altitudeM', () => standardPressurePa(value))
  })
})
