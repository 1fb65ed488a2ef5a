import * as fc from 'fast-check'
import { expect, it } from 'vitest'
import type { CheckRow } from '@/lib/ingest/probe-correction'
import { probeCorrectionAt } from '@/lib/ingest/probe-correction'

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

it('the correction never jumps and stays between the smallest and the largest of its points', () => {
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
    { seed: 7, numRuns: 1_000 },
  )
})
