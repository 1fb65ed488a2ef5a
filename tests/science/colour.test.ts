import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import * as z from 'zod'
import { deltaE2000, labFromSrgb } from '../../lib/science/colour'
import {
  expectClose,
  expectRangeError,
  expectWithin,
  notNumbers,
  numberShape,
  propertyRun,
  testPublished,
} from './published-checks'

const triple = z.tuple([z.number(), z.number(), z.number()])
const labs = fc.tuple(
  fc.double({ min: 0, max: 100, noNaN: true }),
  fc.double({ min: -120, max: 120, noNaN: true }),
  fc.double({ min: -120, max: 120, noNaN: true }),
)

describe('CIEDE2000', () => {
  testPublished('colour.ciede2000', (check) => {
    const lab1 = triple.parse(check.inputs.lab1)
    const lab2 = triple.parse(check.inputs.lab2)
    const expected = numberShape.parse(check.expected)
    expectClose(check, deltaE2000(lab1, lab2), expected)
    expectClose(check, deltaE2000(lab2, lab1), expected)
  })
  it('law: is symmetric, 0 for equal colours, and never negative', () => {
    fc.assert(
      fc.property(labs, labs, (lab1, lab2) => {
        expectWithin(deltaE2000(lab2, lab1), deltaE2000(lab1, lab2), 1e-9)
        expect(deltaE2000(lab1, lab1)).toBe(0)
        expect(deltaE2000(lab1, lab2)).toBeGreaterThanOrEqual(0)
      }),
      propertyRun,
    )
  })
})

describe('L*a*b* from sRGB', () => {
  testPublished('colour.srgb_to_lab_d65', (check) => {
    const { Lab } = z.object({ Lab: triple }).parse(check.expected)
    labFromSrgb(triple.parse(check.inputs.rgb)).forEach((value, i) =>
      expectClose(check, value, Lab[i] ?? NaN),
    )
  })
  it('greys have no colour, black is 0 and white is 100', () => {
    for (const level of [0, 64, 128, 255]) {
      const [lightness, a, b] = labFromSrgb([level, level, level])
      expectWithin(a, 0, 0.01)
      expectWithin(b, 0, 0.02)
      if (level === 0) expectWithin(lightness, 0, 1e-9)
      if (level === 255) expectWithin(lightness, 100, 1e-3)
    }
  })
  it('names what is outside the domain', () => {
    for (const value of [...notNumbers, -1, 256]) expectRangeError('rgb[1]', () => labFromSrgb([0, value, 0]))
    for (const value of [...notNumbers, -1, 101]) {
      expectRangeError('lab1[0]', () => deltaE2000([value, 0, 0], [50, 0, 0]))
      expectRangeError('lab2[0]', () => deltaE2000([50, 0, 0], [value, 0, 0]))
    }
    for (const value of notNumbers) expectRangeError('lab2[2]', () => deltaE2000([50, 0, 0], [50, 0, value]))
  })
})
