import fc from 'fast-check'
import { describe, expect, test } from 'vitest'

import type { DoseIntervalInput } from '../../lib/science/dose-interval'
import { doseInterval, probeErrorC, readDoseMin, shiftedDosesMin } from '../../lib/science/dose-interval'
import { equivalentMinutes } from '../../lib/science/heat-dose'
import { defaultSiteRules } from '../../lib/science/site-rules'

const model = defaultSiteRules.dose
const { errors } = defaultSiteRules
const probe = { type: 'K', iecClass: 1, check: null } as const
const hot: DoseIntervalInput = {
  timeS: [0, 600, 1800],
  tempC: [185, 185, 200],
  model,
  probe,
  errors,
  gaps: null,
}

describe('the two intervals of a dose', () => {
  test('1 °C all along is 7 % of dose, 1.5 °C about 11 %, and all of the absolute errors about 26 %', () => {
    // SCIENCE §2's own figures.
    const doseMin = doseInterval(hot).doseMin
    const [one, oneAndHalf] = shiftedDosesMin(model, hot.timeS, hot.tempC, [1, 1.5], doseMin)
    expect((one ?? 0) / doseMin).toBeCloseTo(1.07, 2)
    expect((oneAndHalf ?? 0) / doseMin).toBeCloseTo(1.11, 2)
    const { absolute } = doseInterval(hot)
    expect((absolute?.highMin ?? 0) / doseMin).toBeCloseTo(1.26, 2)
    // Away from the base the re-integrated offset is the closed form d/z, on both sides.
    expect(absolute?.log10High).toBeCloseTo(Math.hypot(1.5, 0.5, 3) / 34, 9)
    expect(absolute?.log10Low).toBeCloseTo(Math.hypot(1.5, 0.5, 3) / 34, 9)
  })

  test('the assumed same-mount interval is ±0.045 log10 and says so', () => {
    const { sameMount, isAssumed, log10Dose } = doseInterval(hot)
    expect(isAssumed).toBe(true)
    expect(sameMount.log10Half).toBe(0.045)
    expect(Math.log10(sameMount.lowMin)).toBeCloseTo((log10Dose ?? 0) - 0.045, 9)
  })

  test('a check that holds and spans the toast replaces the class; one that ends below it, or has expired, does not', () => {
    const check = { uncertaintyC: 0.6, lowTempC: 0, highTempC: 205, isExpired: false }
    expect(probeErrorC({ ...probe, check }, 120, 200)).toBe(0.6)
    expect(probeErrorC({ ...probe, check }, 120, 206)).toBe(1.5)
    expect(probeErrorC({ ...probe, check: { ...check, isExpired: true } }, 120, 200)).toBe(1.5)
    expect(probeErrorC({ ...probe, iecClass: 2 }, 120, 200)).toBe(2.5)
    // A check that itself is worse than the class claims no better for what lies beyond it.
    expect(probeErrorC({ ...probe, check: { ...check, uncertaintyC: 2 } }, 120, 206)).toBe(2)
  })

  test('a class that makes no claim there gives no absolute interval, and the same-mount one stays', () => {
    const result = doseInterval({ ...hot, probe: { ...probe, iecClass: 3 } })
    expect(result.absolute).toBeNull()
    expect(result.sameMount.log10Half).toBe(0.045)
  })

  test('a gap’s extremes widen both, each on its own side', () => {
    const plain = doseInterval(hot)
    const gaps = { joinedMin: 2, lowMin: 1.5, highMin: 4 }
    const { sameMount, doseMin } = doseInterval({ ...hot, gaps })
    expect(sameMount.log10Low).toBeCloseTo(Math.hypot(0.045, Math.log10(doseMin / (doseMin - 0.5))), 12)
    expect(sameMount.log10High).toBeCloseTo(Math.hypot(0.045, Math.log10((doseMin + 2) / doseMin)), 12)
    expect(sameMount.log10Half).toBe(sameMount.log10High)
    expect(doseMin).toBe(plain.doseMin)
  })

  test('near the base an offset brings minutes in: the interval is wider than the closed form 10^(d/z)', () => {
    const { absolute } = doseInterval({ ...hot, timeS: [0, 1800], tempC: [118, 124] })
    expect(absolute?.log10High).toBeGreaterThan(Math.hypot(1.5, 0.5, 3) / 34)
  })

  test('no dose has no logarithm; its high end is what the errors could hide', () => {
    const none = doseInterval({ ...hot, tempC: [118, 118, 118] })
    expect(none.log10Dose).toBeNull()
    expect(none.absolute?.lowMin).toBe(0)
    // 118 °C and 3.39 °C for 30 min.
    expect(none.absolute?.highMin).toBeCloseTo(30 * 10 ** ((118 + Math.hypot(1.5, 0.5, 3) - 200) / 34), 9)
    expect(none.sameMount.highMin).toBe(0)
  })

  test('bend and rest count what was read: a long silence counts nothing, one reading is no dose', () => {
    const timeS = [0, 10, 20, 500, 510]
    const tempC = [200, 200, 200, 200, 200]
    expect(readDoseMin(model, timeS, tempC, { fromS: 0, toS: 600 }, 30)).toBeCloseTo(0.5, 12)
    expect(readDoseMin(model, timeS, tempC, { fromS: 505, toS: 600 }, 30)).toBeNull()
  })
})

describe('laws of the interval', () => {
  const curves = fc.array(fc.double({ min: 60, max: 240, noNaN: true }), { minLength: 2, maxLength: 60 })

  test('law: a shifted dose is the dose of the shifted curve', () => {
    fc.assert(
      fc.property(curves, fc.double({ min: -15, max: 15, noNaN: true }), (tempC, offsetC) => {
        const timeS = tempC.map((_, i) => i * 30)
        const curve = (shiftC: number) => tempC.map((temp, i) => ({ timeS: i * 30, tempC: temp + shiftC }))
        const doseMin = equivalentMinutes(model, curve(0))
        const exact = equivalentMinutes(model, curve(offsetC))
        const [shifted] = shiftedDosesMin(model, timeS, tempC, [offsetC], doseMin)
        expect(Math.abs((shifted ?? NaN) - exact)).toBeLessThan(1e-9 * Math.max(1e-3, exact))
      }),
      { seed: 20260311, numRuns: 500 },
    )
  })

  test('law: the interval holds the dose, and a larger error never makes it narrower', () => {
    fc.assert(
      fc.property(curves, fc.double({ min: 0, max: 5, noNaN: true }), (tempC, moreC) => {
        const timeS = tempC.map((_, i) => i * 30)
        const near = doseInterval({ ...hot, timeS, tempC })
        const far = doseInterval({
          ...hot,
          timeS,
          tempC,
          errors: { ...errors, mountC: errors.mountC + moreC },
        })
        expect(near.absolute?.lowMin).toBeLessThanOrEqual(near.doseMin)
        expect(near.absolute?.highMin).toBeGreaterThanOrEqual(near.doseMin)
        expect(far.absolute?.lowMin).toBeLessThanOrEqual((near.absolute?.lowMin ?? 0) * (1 + 1e-9))
        expect(far.absolute?.highMin).toBeGreaterThanOrEqual((near.absolute?.highMin ?? 0) * (1 - 1e-9))
      }),
      { seed: 20260312, numRuns: 300 },
    )
  })
})
