import * as fc from 'fast-check'
import { expect, it } from 'vitest'
import { probeErrorC } from '../../lib/science/dose-interval'
import type { CheckRow } from '../../lib/science/probe-correction'
import {
  leadCheckStanding,
  probeCorrectionAt,
  referencePointC,
  referenceUncertaintyC,
} from '../../lib/science/probe-correction'
import { toleranceC } from '../../lib/science/thermocouple'
import { expectRangeError, expectWithin, notNumbers, propertyRun } from './published-checks'

const day = 86_400_000
const at = 100 * day

function check(
  kind: CheckRow['kind'],
  referenceTempC: number,
  errorC: number,
  more: Partial<CheckRow> = {},
): CheckRow {
  return {
    kind,
    referenceTempC,
    measuredTempC: referenceTempC + errorC,
    uncertaintyC: 0.3,
    checkedAtMs: at - 10 * day,
    dueAtMs: at + 10 * day,
    ...more,
  }
}

it('without checks nothing is corrected and nothing is claimed', () => {
  const correction = probeCorrectionAt([], at)
  expect(correction.check).toBeNull()
  expect(correction.uncertaintyC(180)).toBeNull()
  expect(correction.correctionC(180)).toBe(0)
})

it('a reading at a check point becomes the reference, in between it is straight, beyond it keeps the end', () => {
  const correction = probeCorrectionAt([check('ice', 0, 0.5), check('block', 200, -1.5)], at)
  const corrected = (measured: number) => measured + correction.correctionC(measured)
  expect(corrected(0.5)).toBeCloseTo(0, 12)
  expect(corrected(198.5)).toBeCloseTo(200, 12)
  expect(corrected(99.5)).toBeCloseTo(100, 12)
  expect(correction.correctionC(250)).toBeCloseTo(1.5, 12)
  expect(correction.correctionC(-20)).toBeCloseTo(-0.5, 12)
  expect(correction.check).toMatchObject({ lowTempC: 0.5, highTempC: 198.5, isExpired: false })
})

it('the newest check of a kind counts, never one made later, and an expired one says so', () => {
  const checks = [
    check('ice', 0, 2, { checkedAtMs: at - 50 * day }),
    check('ice', 0, 0.5, { dueAtMs: at - day }),
    check('ice', 0, 9, { checkedAtMs: at + day }),
  ]
  const correction = probeCorrectionAt(checks, at)
  expect(correction.correctionC(0)).toBeCloseTo(-0.5, 12)
  expect(correction.check?.isExpired).toBe(true)
})

it('a block checked at two temperatures on one occasion gives two points', () => {
  const correction = probeCorrectionAt([check('block', 180, 1), check('block', 230, 3)], at)
  expect(correction.correctionC(181)).toBeCloseTo(-1, 12)
  expect(correction.correctionC(233)).toBeCloseTo(-3, 12)
})

it('law: the correction never jumps and stays between the smallest and the largest of its points', () => {
  fc.assert(
    fc.property(
      fc.array(
        fc.record({
          reference: fc.integer({ min: -40, max: 300 }),
          error: fc.double({ min: -3, max: 3, noNaN: true }),
        }),
        { minLength: 1, maxLength: 5 },
      ),
      fc.double({ min: -50, max: 400, noNaN: true }),
      (points, measured) => {
        const rows = points.map(({ reference, error }) => check('block', reference, error))
        const { correctionC } = probeCorrectionAt(rows, at)
        const bounds = rows.map((row) => row.referenceTempC - row.measuredTempC)
        const here = correctionC(measured)
        expect(here).toBeGreaterThanOrEqual(Math.min(...bounds) - 1e-9)
        expect(here).toBeLessThanOrEqual(Math.max(...bounds) + 1e-9)
        // Points are at least 5 °C apart and differ by 6 °C at most.
        expect(Math.abs(correctionC(measured + 1e-6) - here)).toBeLessThan(1e-5)
      },
    ),
    propertyRun,
  )
})

it('a reference is 0 °C for ice and the saturation line at the station’s own pressure for boiling water', () => {
  expect(referencePointC({ kind: 'ice' })).toBe(0)
  // IAPWS R7-97(2012): 99.974 °C at 1013.25 hPa; steam tables give 96.69 °C at 0.9 bar (from memory).
  expectWithin(referencePointC({ kind: 'boiling', stationPressureHpa: 1013.25 }), 99.974, 5e-4)
  expectWithin(referencePointC({ kind: 'boiling', stationPressureHpa: 900 }), 96.69, 5e-3)
  expectRangeError('pressureHpa', () => referencePointC({ kind: 'boiling', stationPressureHpa: -1 }))
})

it('the reference’s own uncertainty: ice a tenth, boiling what 2 hPa are worth, a block in its own figure', () => {
  expect(referenceUncertaintyC('ice', 0)).toBe(0.1)
  // SCIENCE §1 and steam.ts: 0.0277 °C per hPa near one atmosphere.
  expectWithin(referenceUncertaintyC('boiling', 99.974), 2 * 0.0277, 2e-4)
  expect(referenceUncertaintyC('block', 200)).toBe(0)
})

it('a point’s uncertainty is comparison and reference as squares; a span claims its largest', () => {
  const rows = [check('ice', 0, 0.5), check('block', 200, -1.5, { uncertaintyC: 0.8 })]
  const { uncertaintyC, check: claimed } = probeCorrectionAt(rows, at)
  expectWithin(uncertaintyC(0.5) ?? NaN, Math.hypot(0.3, 0.1), 1e-12)
  expectWithin(uncertaintyC(198.5) ?? NaN, 0.8, 1e-12)
  // Half way two independent halves: ½·√(u₁² + u₂²), below both ends’ mean.
  expectWithin(uncertaintyC(99.5) ?? NaN, Math.hypot(Math.hypot(0.3, 0.1), 0.8) / 2, 1e-12)
  expect(claimed?.uncertaintyC).toBe(0.8)
  expect(uncertaintyC(198.6)).toBeNull()
  expect(uncertaintyC(0.4)).toBeNull()
})

it('law: inside the span nowhere is more claimed off than at its worst point, and beyond it never less than the class', () => {
  fc.assert(
    fc.property(
      fc.double({ min: 0.05, max: 4, noNaN: true }),
      fc.double({ min: 0.05, max: 4, noNaN: true }),
      fc.double({ min: 0, max: 1, noNaN: true }),
      fc.double({ min: 121, max: 300, noNaN: true }),
      (iceC, blockC, share, toTempC) => {
        const rows = [
          check('ice', 0, 0.2, { uncertaintyC: iceC }),
          check('block', 210, 1, { uncertaintyC: blockC }),
        ]
        const { uncertaintyC, check: claimed } = probeCorrectionAt(rows, at)
        const here = uncertaintyC(0.2 + share * (211 - 0.2)) ?? NaN
        expect(here).toBeLessThanOrEqual((claimed?.uncertaintyC ?? NaN) + 1e-12)
        const error = probeErrorC({ type: 'K', iecClass: 1, check: claimed }, 120, toTempC) ?? NaN
        if (toTempC <= 211) expect(error).toBe(claimed?.uncertaintyC)
        else expect(error).toBeGreaterThanOrEqual(toleranceC('K', 1, toTempC) ?? Infinity)
      },
    ),
    propertyRun,
  )
})

it('a lead probe needs a point at 180 to 230 °C, in date', () => {
  const iceAndBoiling = [check('ice', 0, 0.2), check('boiling', 99.97, 0.4)]
  expect(leadCheckStanding([], at)).toBe('no check')
  expect(leadCheckStanding(iceAndBoiling, at)).toBe('no hot point')
  expect(leadCheckStanding([...iceAndBoiling, check('block', 150, 1)], at)).toBe('no hot point')
  expect(leadCheckStanding([...iceAndBoiling, check('block', 180, 1)], at)).toBe('in date')
  expect(leadCheckStanding([...iceAndBoiling, check('block', 230, -2)], at)).toBe('in date')
  const expired = check('block', 200, 1, { dueAtMs: at - day })
  expect(leadCheckStanding([...iceAndBoiling, expired], at)).toBe('expired')
  expect(leadCheckStanding([check('block', 200, 1, { checkedAtMs: at + day })], at)).toBe('no check')
})

it('an expired check goes on correcting and claims no more than the class', () => {
  const { correctionC, check: claimed } = probeCorrectionAt(
    [check('block', 120, 1), check('block', 220, 2)].map((row) => ({ ...row, dueAtMs: at - day })),
    at,
  )
  expect(correctionC(222)).toBeCloseTo(-2, 12)
  expect(claimed?.isExpired).toBe(true)
  expect(probeErrorC({ type: 'K', iecClass: 1, check: claimed }, 121, 200)).toBe(1.5)
})

it('a check whose figures are no numbers is named', () => {
  for (const value of notNumbers) {
    expectRangeError('referenceTempC', () => probeCorrectionAt([check('block', value, 0)], at))
    expectRangeError('measuredTempC', () =>
      probeCorrectionAt([check('block', 200, 0, { measuredTempC: value })], at),
    )
  }
  expectRangeError('uncertaintyC', () =>
    probeCorrectionAt([check('block', 200, 0, { uncertaintyC: -1 })], at),
  )
})
