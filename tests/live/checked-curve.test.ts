import fc from 'fast-check'
import { expect, it } from 'vitest'
import { createCheckedCurve } from '@/lib/live/checked-curve'
import { createRoleCurve } from '@/lib/live/role-curve'
import { checkCurve, troubleCodes } from '@/lib/science/signal-trouble'
import { defaultSiteRules } from '@/lib/science/site-rules'

const rules = defaultSiteRules.signals
const startMs = 1_801_000_000_000

const anyTemp = fc.oneof(
  { weight: 6, arbitrary: fc.integer({ min: 10_000, max: 10_400 }) },
  { weight: 3, arbitrary: fc.constant(10_420) },
  { weight: 1, arbitrary: fc.integer({ min: 0, max: 60_000 }) },
)
/** Stretches of readings 200 to 2,000 ms apart; the whole is long enough for something to stand still. */
const anyRecord = fc
  .array(
    fc.record({
      stepMs: fc.integer({ min: 200, max: 2_000 }),
      centi: anyTemp,
      times: fc.integer({ min: 1, max: 60 }),
    }),
    { minLength: 1, maxLength: 12 },
  )
  .map((parts) => {
    let atMs = startMs
    return parts.flatMap(({ stepMs, centi, times }) =>
      Array.from({ length: times }, () => {
        atMs += stepMs
        return { atMs, tempC: centi / 100 }
      }),
    )
  })
const anyOrder = fc.infiniteStream(fc.double({ min: 0, max: 1, noNaN: true }))

it('a curve that came in any order, settled at any moments, is as the whole record checked at once', () => {
  const met = { stuck: 0, step: 0 }
  fc.assert(
    fc.property(anyRecord, anyOrder, fc.boolean(), (record, stream, isShuffled) => {
      const keys = record.map(() => stream.next().value)
      const arrival = record
        .map((reading, i) => ({ reading, key: isShuffled ? keys[i] : i }))
        .sort((a, b) => (a.key ?? 0) - (b.key ?? 0))
      const curve = createCheckedCurve(rules)
      const coals = createRoleCurve()
      const shown = new Map<number, number>()
      for (const [i, { reading }] of arrival.entries()) {
        const effect = curve.put(reading.atMs, reading.tempC)
        const at = effect === 'appended' ? curve.length - 1 : -1
        shown.set(reading.atMs, at < 0 ? reading.tempC : curve.tempC(at))
        // The coals move by 10 °C within any half minute, and come late at times.
        coals.put(reading.atMs, 600 + 20 * Math.sin(reading.atMs / 4_000))
        if (i % 7 === 0) for (const at of curve.settle(coals)) shown.set(curve.atMs(at), curve.tempC(at))
      }
      for (const at of curve.settle(coals)) shown.set(curve.atMs(at), curve.tempC(at))
      const timeS = record.map(({ atMs }) => atMs / 1000)
      const whole = checkCurve(
        { timeS, tempC: record.map(({ tempC }) => tempC) },
        { timeS, tempC: record.map(({ atMs }) => 600 + 20 * Math.sin(atMs / 4_000)) },
        rules,
      )
      met.stuck += Number(whole.trouble.includes(troubleCodes.stuck))
      met.step += Number(whole.trouble.includes(troubleCodes.step))
      expect(record.map((_, i) => curve.tempC(i))).toEqual(Array.from(whole.tempC))
      // And whoever was told each change holds the same.
      expect(record.map(({ atMs }) => shown.get(atMs))).toEqual(Array.from(whole.tempC))
    }),
    { seed: 20_270_402, numRuns: 150 },
  )
  expect(Math.min(met.stuck, met.step)).toBeGreaterThan(20)
})
