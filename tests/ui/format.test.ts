import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import {
  formatClimb,
  formatClock,
  formatDose,
  formatDoseFigure,
  formatFromPlan,
  formatInstant,
  formatMinutes,
  formatNumber,
  formatPercent,
  formatSigned,
  formatTemp,
  formatTempDifference,
  fromShownDifference,
  fromShownTemp,
  parseDecimal,
  parseDuration,
  toShownDifference,
  toShownTemp,
} from '@/lib/format'

const SEED = { seed: 20_310_314, numRuns: 500 }
const plain = (text: string) => text.replaceAll('\u00a0', ' ')

describe('temperatures', () => {
  test('fixed points of the Fahrenheit scale hold: water freezes at 32, boils at 212, the scales meet at -40', () => {
    expect(toShownTemp(0, 'F')).toBe(32)
    expect(toShownTemp(100, 'F')).toBe(212)
    expect(toShownTemp(-40, 'F')).toBe(-40)
  })

  test('a difference is converted without the 32', () => {
    expect(plain(formatTempDifference(7, 'C'))).toBe('7 °C')
    expect(plain(formatTempDifference(7, 'F'))).toBe('13 °F')
    expect(formatClimb(0.8, 'C')).toBe('+0.8°/min')
    expect(formatClimb(-5, 'F')).toBe('\u22129.0°/min')
    expect(formatFromPlan(3, 'F')).toBe('5 above plan')
    expect(formatFromPlan(-25, 'C')).toBe('25 below plan')
    expect(formatFromPlan(0.2, 'C')).toBe('on plan')
  })

  test('the difference of two shown temperatures is the shown difference', () => {
    const temp = fc.double({ min: -60, max: 400, noNaN: true })
    fc.assert(
      fc.property(temp, temp, fc.constantFrom('C' as const, 'F' as const), (a, b, unit) => {
        expect(toShownTemp(a, unit) - toShownTemp(b, unit)).toBeCloseTo(toShownDifference(a - b, unit), 9)
      }),
      SEED,
    )
  })

  test('there and back again is the same temperature', () => {
    fc.assert(
      fc.property(fc.double({ min: -60, max: 400, noNaN: true }), (tempC) => {
        expect(fromShownTemp(toShownTemp(tempC, 'F'), 'F')).toBeCloseTo(tempC, 9)
        expect(fromShownDifference(toShownDifference(tempC, 'F'), 'F')).toBeCloseTo(tempC, 9)
      }),
      SEED,
    )
  })
})

describe('figures', () => {
  test('a number that rounds to nought has no sign', () => {
    expect(formatNumber(-0.04, 1)).toBe('0.0')
    expect(formatSigned(0.04, 1)).toBe('0.0')
    expect(formatSigned(0.8, 1)).toBe('+0.8')
    expect(formatSigned(-3)).toBe('\u22123')
  })

  test('a dose shows as many figures as its interval bears', () => {
    expect([0, 0.001, 0.19, 3.31, 13.8, 206.4].map(formatDoseFigure)).toEqual([
      '0',
      'under 0.01',
      '0.19',
      '3.3',
      '13.8',
      '206',
    ])
    expect(plain(formatDose(15.2, { lowMin: 13.9, highMin: 16.6 }, 200, 'C'))).toBe(
      '15.2 min at 200 °C (13.9 to 16.6)',
    )
    expect(plain(formatDose(13.8, null, 200, 'F'))).toBe('13.8 min at 392 °F')
  })

  test('a rising dose never shows a falling figure', () => {
    fc.assert(
      fc.property(
        fc.double({ min: 0.01, max: 900, noNaN: true }),
        fc.double({ min: 0, max: 50, noNaN: true }),
        (dose, more) => {
          expect(Number(formatDoseFigure(dose + more))).toBeGreaterThanOrEqual(Number(formatDoseFigure(dose)))
        },
      ),
      SEED,
    )
  })

  test('a share that is not nought or all does not read as nought or all', () => {
    expect(plain(formatPercent(0.36))).toBe('36 %')
    expect(plain(formatPercent(0.001))).toBe('under 1 %')
    expect(plain(formatPercent(0.998))).toBe('over 99 %')
    expect(plain(formatPercent(1))).toBe('100 %')
    expect(plain(formatPercent(0))).toBe('0 %')
  })

  test('no formatted text uses a sign that the typeface lacks', () => {
    const lacking = /[≤≥Δσλ→←↑↓\u202f]/
    fc.assert(
      fc.property(fc.double({ min: -500, max: 500, noNaN: true }), (value) => {
        const texts = [
          formatNumber(value, 1),
          formatSigned(value, 1),
          formatTemp(value, 'F'),
          formatClimb(value, 'C'),
          formatPercent(value),
          formatClock(value),
        ]
        expect(texts.filter((text) => lacking.test(text))).toEqual([])
      }),
      SEED,
    )
  })
})

describe('time', () => {
  test('durations read as a clock does', () => {
    expect([0, 42, 680, 3_900, -61].map(formatClock)).toEqual([
      '0:00',
      '0:42',
      '11:20',
      '1:05:00',
      '\u22121:01',
    ])
    expect([720, 1_572, 26.2 * 60].map(formatMinutes).map(plain)).toEqual(['12 min', '26.2 min', '26.2 min'])
  })

  test('a shown clock is read back as the same whole seconds', () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 200_000 }), (durationS) => {
        expect(parseDuration(formatClock(durationS))).toBe(durationS)
      }),
      SEED,
    )
  })

  test('an instant is shown in the site zone, summer and winter', () => {
    expect(formatInstant('2031-01-14T12:41:00Z', 'Europe/London')).toBe('14 January 2031, 12:41')
    expect(formatInstant('2031-07-14T12:41:00Z', 'Europe/London', 'time')).toBe('13:41')
    expect(formatInstant('2031-07-14T23:30:00Z', 'Europe/Paris', 'date')).toBe('15 July 2031')
  })

  test('what is no date is refused by name', () => {
    expect(() => formatInstant('yesterday', 'Europe/London')).toThrow(new RangeError('at'))
  })
})

describe('typed numbers', () => {
  test('decimal comma and point both serve', () => {
    expect([' 12,5 ', '12.5', '\u22123', '.5', '7.'].map(parseDecimal)).toEqual([12.5, 12.5, -3, 0.5, 7])
  })

  test('what is not a plain number is none', () => {
    expect(['', 'twelve', '1.234,5', '1,2,3', '12 min', '1e3', '--4'].map(parseDecimal)).toEqual([
      null,
      null,
      null,
      null,
      null,
      null,
      null,
    ])
  })

  test('a number shown is read back', () => {
    fc.assert(
      fc.property(fc.integer({ min: -99_999, max: 99_999 }), (hundredths) => {
        expect(parseDecimal(formatNumber(hundredths / 100, 2))).toBeCloseTo(hundredths / 100, 9)
      }),
      SEED,
    )
  })
})
