import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { settlingOf } from '@/lib/science/stability'

const rule = { windowS: 60, sdMaxC: 0.15, slopeMaxCPerMin: 0.1 }
const every = (stepS: number, untilS: number) =>
  Array.from({ length: Math.round(untilS / stepS) + 1 }, (_, i) => i * stepS)
const seed = 20270214

describe('a probe at a reference', () => {
  test('settles when it stands still, and only once the window is full', () => {
    const timeS = every(1, 90)
    expect(
      settlingOf(
        timeS,
        timeS.map(() => 99.8),
        90,
        rule,
      ),
    ).toMatchObject({
      state: 'settled',
      meanC: expect.closeTo(99.8, 9),
      sdC: expect.closeTo(0, 9),
      count: 60,
      spanS: 59,
    })
    const short = every(1, 40)
    expect(
      settlingOf(
        short,
        short.map(() => 99.8),
        40,
        rule,
      ).state,
    ).toBe('too few')
    expect(settlingOf([], [], 0, rule)).toMatchObject({ state: 'too few', meanC: null })
  })

  test('on an even ramp has the slope of the ramp and the closed form’s scatter', () => {
    // n points one step apart on a line of slope b: s = b·Δt·√(n(n + 1)/12), from Σ(i − ī)² = n(n² − 1)/12.
    const timeS = every(1, 120)
    const ramp = settlingOf(
      timeS,
      timeS.map((at) => 20 + 0.002 * at),
      120,
      rule,
    )
    expect(ramp.slopeCPerMin).toBeCloseTo(0.12, 9)
    expect(ramp.sdC).toBeCloseTo(0.002 * Math.sqrt((60 * 61) / 12), 9)
    expect(ramp.state).toBe('drifting')
    expect(
      settlingOf(
        timeS,
        timeS.map((at) => 20 + 0.0015 * at),
        120,
        rule,
      ).state,
    ).toBe('settled')
  })

  test('that scatters, falls silent, has no reading or is silent within the window is not settled', () => {
    const timeS = every(1, 90)
    const flat = timeS.map(() => 0.1)
    expect(
      settlingOf(
        timeS,
        timeS.map((_, i) => (i % 2) * 0.4),
        90,
        rule,
      ).state,
    ).toBe('scattered')
    expect(settlingOf(timeS, flat, 93.5, rule).state).toBe('stale')
    expect(
      settlingOf(
        timeS,
        flat.map((at, i) => (i === 70 ? NaN : at)),
        90,
        rule,
      ).state,
    ).toBe('no reading')
    const holed = timeS.filter((at) => at < 50 || at > 65)
    expect(
      settlingOf(
        holed,
        holed.map(() => 0.1),
        90,
        rule,
      ).state,
    ).toBe('too few')
  })

  test('law: what was before the window does not matter', () => {
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: -0.1, max: 0.1, noNaN: true }), { minLength: 61, maxLength: 61 }),
        fc.array(fc.double({ min: -50, max: 400, noNaN: true }), { maxLength: 40 }),
        (noise, before) => {
          const timeS = every(1, before.length + 60)
          const tempC = [...before, ...noise.map((one) => 205 + one)]
          const nowS = before.length + 60
          const alone = settlingOf(every(1, 60), tempC.slice(before.length), 60, rule)
          const after = settlingOf(timeS, tempC, nowS, rule)
          expect(after.state).toBe(alone.state)
          expect(after.meanC).toBeCloseTo(alone.meanC ?? NaN, 9)
          expect(after.slopeCPerMin).toBeCloseTo(alone.slopeCPerMin ?? NaN, 6)
        },
      ),
      { seed, numRuns: 200 },
    )
  })

  test('law: an offset of all readings moves the mean and nothing else; a steeper drift never settles it', () => {
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: -0.05, max: 0.05, noNaN: true }), { minLength: 61, maxLength: 61 }),
        fc.double({ min: -40, max: 350, noNaN: true }),
        fc.double({ min: 0.2, max: 30, noNaN: true }),
        (noise, offsetC, driftCPerMin) => {
          const timeS = every(1, 60)
          const still = settlingOf(timeS, noise, 60, rule)
          const moved = settlingOf(
            timeS,
            noise.map((one) => one + offsetC),
            60,
            rule,
          )
          expect(moved.sdC).toBeCloseTo(still.sdC ?? NaN, 6)
          expect(moved.meanC).toBeCloseTo((still.meanC ?? NaN) + offsetC, 6)
          expect(moved.state).toBe(still.state)
          const drifting = noise.map((one, i) => one + (driftCPerMin * i) / 60)
          expect(settlingOf(timeS, drifting, 60, rule).state).not.toBe('settled')
        },
      ),
      { seed, numRuns: 200 },
    )
  })

  test('arrays of two lengths and a rule without a window are refused', () => {
    expect(() => settlingOf([0, 1], [1], 1, rule)).toThrow(RangeError)
    expect(() => settlingOf([0], [1], 1, { ...rule, windowS: 0 })).toThrow('windowS')
  })
})
