import fc from 'fast-check'
import { describe, expect, test } from 'vitest'

import type { Curve } from '../../lib/science/signal-trouble'
import { checkCurve, createSignalCheck, hasLongRun, troubleCodes } from '../../lib/science/signal-trouble'
import { defaultSiteRules, siteRulesSchema } from '../../lib/science/site-rules'

const rules = defaultSiteRules.signals
const fixed = { seed: 20_270_401, numRuns: 200 }
const hz = 5

/** Five readings a second for so many seconds. */
function curve(seconds: number, tempCAt: (timeS: number) => number): Curve {
  const timeS = Float64Array.from({ length: seconds * hz }, (_, i) => i / hz)
  return { timeS, tempC: timeS.map(tempCAt) }
}

const wood = (timeS: number) => 120 + timeS / 6 + 0.3 * Math.cos(Math.PI * hz * timeS)
const coals = curve(300, (timeS) => 620 + 15 * Math.sin(timeS / 7))
const stillCoals = curve(300, (timeS) => 25 + 0.3 * Math.sin(timeS))

function troubles(checked: { trouble: Uint8Array }, code: number): number[] {
  return Array.from(checked.trouble.keys()).filter((i) => checked.trouble[i] === code)
}

describe('a probe that stands still', () => {
  const stuckFromS = 100
  const stuckToS = 180
  const stuck = curve(300, (timeS) => wood(timeS >= stuckFromS && timeS < stuckToS ? stuckFromS : timeS))

  test('while the coals move is stuck: no reading from its second one to its last', () => {
    const found = troubles(checkCurve(stuck, coals, rules), troubleCodes.stuck)
    expect(found[0]).toBe(stuckFromS * hz + 1)
    expect(found.at(-1)).toBe(stuckToS * hz - 1)
    expect(found).toHaveLength((stuckToS - stuckFromS) * hz - 1)
    const { tempC } = checkCurve(stuck, coals, rules)
    expect(tempC[stuckFromS * hz]).toBe(wood(stuckFromS))
    expect(tempC[stuckFromS * hz + 1]).toBeNaN()
  })

  test('in a bath, where the coals stand still as well, is right', () => {
    const bath = curve(300, () => 205.3)
    expect(troubles(checkCurve(bath, stillCoals, rules), troubleCodes.stuck)).toEqual([])
    expect(hasLongRun(bath, rules)).toBe(true)
  })

  test('for less than the rule’s time is not stuck, and without a witness nothing is', () => {
    const short = curve(300, (timeS) => wood(timeS >= 100 && timeS < 129 ? 100 : timeS))
    expect(troubles(checkCurve(short, coals, rules), troubleCodes.stuck)).toEqual([])
    expect(troubles(checkCurve(stuck, null, rules), troubleCodes.stuck)).toEqual([])
  })

  test('but for the gateway’s last digit is stuck all the same', () => {
    const flickers = curve(300, (timeS) => 180 + (Math.floor(timeS) % 2) * 0.03)
    expect(troubles(checkCurve(flickers, coals, rules), troubleCodes.stuck)).toHaveLength(300 * hz - 1)
  })

  test('is no run where it was silent for longer than the rule’s time', () => {
    const timeS = [0, 1, 2, 100, 101]
    expect(hasLongRun({ timeS, tempC: timeS.map(() => 150) }, rules)).toBe(false)
  })
})

describe('a reading that jumps', () => {
  test('and comes back is none, and those about it stay', () => {
    const spiked = curve(60, (timeS) => (timeS === 30 ? 340 : wood(timeS)))
    expect(troubles(checkCurve(spiked, coals, rules), troubleCodes.step)).toEqual([150])
  })

  test('and stays is believed once readings have agreed for 3 s', () => {
    const moved = curve(60, (timeS) => wood(timeS) + (timeS >= 30 ? 90 : 0))
    const found = troubles(checkCurve(moved, coals, rules), troubleCodes.step)
    expect(found).toEqual(Array.from({ length: rules.stepAgreeS * hz }, (_, i) => 150 + i))
  })

  test('again and again, as at a loose plug, is never believed', () => {
    const loose = curve(
      60,
      (timeS) => wood(timeS) + (timeS >= 30 ? 60 + 70 * (Math.round(timeS * hz) % 3) : 0),
    )
    const found = troubles(checkCurve(loose, coals, rules), troubleCodes.step)
    expect(found).toHaveLength(30 * hz)
  })

  test('after a silence is judged by how long the silence was', () => {
    const timeS = [0, 1, 2, 12, 13]
    expect(troubles(checkCurve({ timeS, tempC: [100, 100, 100, 380, 381] }, null, rules), 1)).toEqual([])
    expect(troubles(checkCurve({ timeS, tempC: [100, 100, 100, 620, 621] }, null, rules), 1)).toEqual([3, 4])
  })
})

const anyTemp = fc.oneof(
  { weight: 8, arbitrary: fc.double({ min: 100, max: 110, noNaN: true }) },
  { weight: 2, arbitrary: fc.constant(104.2) },
  { weight: 1, arbitrary: fc.double({ min: 0, max: 600, noNaN: true }) },
  { weight: 1, arbitrary: fc.constant(NaN) },
)
const anyCurve = fc
  .array(fc.tuple(fc.integer({ min: 1, max: 40 }), anyTemp, fc.integer({ min: 1, max: 60 })), {
    maxLength: 40,
  })
  .map((parts): Curve => {
    const timeS: number[] = []
    const tempC: number[] = []
    let at = 0
    for (const [stepTenths, temp, times] of parts) {
      for (let i = 0; i < times; i += 1) {
        at += stepTenths / 10
        timeS.push(at)
        tempC.push(temp)
      }
    }
    return { timeS, tempC }
  })

describe('laws', () => {
  test('law: readings that are believed are as they came; none is made', () => {
    fc.assert(
      fc.property(anyCurve, (given) => {
        const checked = checkCurve(given, coals, rules)
        checked.tempC.forEach((tempC, i) => {
          if (checked.trouble[i] === 0) expect(tempC).toBe(given.tempC[i])
          else expect(tempC).toBeNaN()
        })
      }),
      fixed,
    )
  })

  test('law: what is said of a jump depends on what came before it only', () => {
    fc.assert(
      fc.property(anyCurve, fc.nat(200), (given, cut) => {
        const whole = createSignalCheck(rules)
        const all = Array.from(given.timeS, (timeS, i) => whole.take(timeS, given.tempC[i] ?? NaN))
        const part = createSignalCheck(rules)
        const head = Array.from(given.timeS)
          .slice(0, cut)
          .map((timeS, i) => part.take(timeS, given.tempC[i] ?? NaN))
        expect(head).toEqual(all.slice(0, cut))
      }),
      fixed,
    )
  })

  test('law: wood within what it can do is never taken for a fault', () => {
    const anyWood = fc.tuple(
      fc.double({ min: -20, max: 20, noNaN: true }),
      fc.double({ min: 0.1, max: 3, noNaN: true }),
    )
    fc.assert(
      fc.property(anyWood, ([climbCPerMin, noiseC]) => {
        const given = curve(120, (timeS) => 150 + (climbCPerMin * timeS) / 60 + noiseC * Math.sin(5 * timeS))
        expect(checkCurve(given, coals, rules).trouble.some((code) => code !== 0)).toBe(false)
      }),
      fixed,
    )
  })

  test('rules from before the checks take every reading as it came', () => {
    const { signals: _signals, alarms: _alarms, ...old } = defaultSiteRules
    const read = siteRulesSchema.parse(old)
    expect(read.signals.areChecked).toBe(false)
    expect(read.alarms).toEqual(defaultSiteRules.alarms)
    const stuck = curve(100, () => 180)
    expect(checkCurve(stuck, coals, read.signals).trouble.some((code) => code !== 0)).toBe(false)
  })

  test('arrays of unequal length are refused by name', () => {
    expect(() => checkCurve({ timeS: [1, 2], tempC: [1] }, null, rules)).toThrow(/tempC/)
  })
})
