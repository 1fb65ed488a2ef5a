import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import * as z from 'zod'
import {
  conductivityWPerMK,
  densityKgPerM3,
  equilibriumMoisturePercent,
  heatCapacityJPerKgK,
  moisturePercent,
} from '../../lib/science/wood'
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
  toleranceOf,
} from './published-checks'

describe('equilibrium moisture', () => {
  testPublished('wood.emc_percent', (check) => {
    const expected = numbersShape.parse(check.expected)
    const rows =
      check.inputs.t_C_rh_percent === undefined
        ? numbersShape.parse(check.inputs.rh_percent).map((rh) => [numberShape.parse(check.inputs.t_C), rh])
        : tableShape.parse(check.inputs.t_C_rh_percent)
    rows.forEach(([tempC = NaN, rh = NaN], i) =>
      expectClose(check, equilibriumMoisturePercent(tempC, rh), expected[i] ?? NaN),
    )
  })
  it('law: is 0 in dry air, rises with humidity, and falls as a room grows warmer', () => {
    const temp = fc.double({ min: 15, max: 100, noNaN: true })
    const humidity = fc.double({ min: 1, max: 95, noNaN: true })
    fc.assert(
      fc.property(temp, humidity, (tempC, rh) => {
        expect(equilibriumMoisturePercent(tempC, 0)).toBe(0)
        const moisture = equilibriumMoisturePercent(tempC, rh)
        expect(equilibriumMoisturePercent(tempC, rh + 1)).toBeGreaterThan(moisture)
        expect(equilibriumMoisturePercent(tempC + 5, rh)).toBeLessThan(moisture)
      }),
      propertyRun,
    )
  })
  it('names a temperature or humidity outside the domain', () => {
    for (const value of [...notNumbers, -31, 133])
      expectRangeError('tempC', () => equilibriumMoisturePercent(value, 50))
    for (const value of [...notNumbers, -1, 101]) {
      expectRangeError('relativeHumidityPercent', () => equilibriumMoisturePercent(20, value))
    }
  })
})

describe('heat and mass', () => {
  testPublished('wood.heat_capacity_kJ_kgK', (check) => {
    const tempK = numberShape.parse(check.inputs.T_K)
    const expected = numbersShape.parse(check.expected)
    numbersShape
      .parse(check.inputs.mc_percent)
      .forEach((mc, i) => expectClose(check, heatCapacityJPerKgK(tempK, mc) / 1000, expected[i] ?? NaN))
  })
  testPublished('wood.conductivity_W_mK', (check) => {
    const mc = check.inputs.mc_percent
    if (check.inputs.G_basic !== undefined) {
      // Gx = Gb/(1 − Sx/100), Sx = S0·(1 − x/30): specific gravity on the volume at x.
      const shrinkage =
        numberShape.parse(check.inputs.volumetric_shrinkage_percent) * (1 - numberShape.parse(mc) / 30)
      const gravity = numberShape.parse(check.inputs.G_basic) / (1 - shrinkage / 100)
      expectClose(
        check,
        conductivityWPerMK(gravity, numberShape.parse(mc)),
        numberShape.parse(check.expected),
      )
      return
    }
    const expected = tableShape.parse(check.expected)
    numbersShape
      .parse(check.inputs.G)
      .forEach((gravity, i) =>
        numbersShape
          .parse(mc)
          .forEach((moisture, j) =>
            expectClose(check, conductivityWPerMK(gravity, moisture), expected[i]?.[j] ?? NaN),
          ),
      )
  })
  testPublished('wood.moisture_percent', (check) =>
    expectClose(
      check,
      moisturePercent(numberShape.parse(check.inputs.mass_g), numberShape.parse(check.inputs.ovendry_g)),
      numberShape.parse(check.expected),
    ),
  )
  testPublished('wood.density_kg_m3', (check) => {
    const inputs = z.object({ G_x: z.number(), mc_percent: z.number() }).parse(check.inputs)
    expectWithin(
      densityKgPerM3(inputs.G_x, inputs.mc_percent),
      numberShape.parse(check.expected),
      toleranceOf(check, 'abs'),
    )
  })
  it('law: wet wood is its dry mass and its water, by mass as by density', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 1, max: 500, noNaN: true }),
        fc.double({ min: 0, max: 120, noNaN: true }),
        fc.double({ min: 0.3, max: 0.9, noNaN: true }),
        (dryG, moisture, gravity) => {
          expectWithin(moisturePercent(dryG * (1 + moisture / 100), dryG), moisture, 1e-9 * (1 + moisture))
          const dry = densityKgPerM3(gravity, 0)
          expectWithin(
            moisturePercent(densityKgPerM3(gravity, moisture), dry),
            moisture,
            1e-9 * (1 + moisture),
          )
        },
      ),
      propertyRun,
    )
  })
  it('law: warm wood and wet wood hold more heat, dense wood and wet wood conduct more, each in a straight line', () => {
    const moisture = fc.double({ min: 0, max: 24, noNaN: true })
    fc.assert(
      fc.property(
        fc.double({ min: 280, max: 420, noNaN: true }),
        moisture,
        fc.double({ min: 0.3, max: 0.8, noNaN: true }),
        (tempK, mc, gravity) => {
          expect(heatCapacityJPerKgK(tempK + 1, mc)).toBeGreaterThan(heatCapacityJPerKgK(tempK, mc))
          expect(heatCapacityJPerKgK(tempK, mc + 1)).toBeGreaterThan(heatCapacityJPerKgK(tempK, mc))
          const k = (g: number, m: number) => conductivityWPerMK(g, m)
          const byGravity = [
            k(gravity + 0.1, mc) - k(gravity, mc),
            k(gravity, mc) - k(gravity - 0.1, mc),
          ] as const
          expect(byGravity[0]).toBeGreaterThan(0)
          expectWithin(byGravity[0], byGravity[1], 1e-12)
          expectWithin(k(gravity, mc + 1) - k(gravity, mc), k(gravity, 1) - k(gravity, 0), 1e-12)
          expect(k(gravity, 1)).toBeGreaterThan(k(gravity, 0))
        },
      ),
      propertyRun,
    )
  })
  it('names what is outside the domain', () => {
    for (const value of [...notNumbers, 0]) {
      expectRangeError('tempK', () => heatCapacityJPerKgK(value, 10))
      expectRangeError('specificGravity', () => conductivityWPerMK(value, 10))
      expectRangeError('specificGravity', () => densityKgPerM3(value, 10))
      expectRangeError('ovenDryMassG', () => moisturePercent(50, value))
    }
    for (const value of [...notNumbers, -1]) {
      expectRangeError('moisturePercent', () => heatCapacityJPerKgK(300, value))
      expectRangeError('moisturePercent', () => conductivityWPerMK(0.65, value))
      expectRangeError('moisturePercent', () => densityKgPerM3(0.65, value))
    }
    for (const value of [...notNumbers, 49]) expectRangeError('wetMassG', () => moisturePercent(value, 50))
  })
})
