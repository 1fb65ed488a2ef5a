import * as fc from 'fast-check'
import { expect, it } from 'vitest'
import { createAlarmDelay, viewAbove } from '@/lib/alarms/alarm-delay'

const delays = { onDelayS: 5, offDelayS: 15 }
const limitC = 215
const deadbandC = 4
const seed = 182

type Change = { atMs: number; isOn: boolean }

/** Temperatures once every `stepMs`; answers when the alarm came and went. */
function play(temps: readonly (number | null)[], stepMs = 200): Change[] {
  const alarm = createAlarmDelay(delays)
  const changes: Change[] = []
  let isOn = false
  temps.forEach((tempC, i) => {
    const atMs = i * stepMs
    const isNowOn = alarm.see(viewAbove(tempC, limitC, deadbandC), atMs) !== null
    if (isNowOn !== isOn) changes.push({ atMs, isOn: isNowOn })
    isOn = isNowOn
  })
  return changes
}

const noisy = fc.array(
  fc.option(fc.double({ min: limitC - 8, max: limitC + 8, noNaN: true }), { freq: 12 }),
  {
    minLength: 10,
    maxLength: 1_500,
  },
)

it('an alarm never chatters: once on it stays for the off-delay, once off for the on-delay', () => {
  fc.assert(
    fc.property(noisy, (temps) => {
      const changes = play(temps)
      changes.forEach((change, i) => {
        const before = changes[i - 1]
        if (before === undefined) return
        expect(change.isOn).not.toBe(before.isOn)
        expect(change.atMs - before.atMs).toBeGreaterThanOrEqual(
          1000 * (change.isOn ? delays.onDelayS : delays.offDelayS),
        )
      })
    }),
    { seed, numRuns: 500 },
  )
})

it('noise that swings about the limit within the deadband gives one alarm at most', () => {
  fc.assert(
    fc.property(
      fc.array(fc.double({ min: limitC - deadbandC, max: limitC + deadbandC, noNaN: true }), {
        maxLength: 2_000,
      }),
      (temps) => {
        expect(play(temps).length).toBeLessThanOrEqual(1)
      },
    ),
    { seed, numRuns: 300 },
  )
})

it('it sounds 5 s after the limit is passed and ends 15 s after it is well inside again', () => {
  const seconds = (count: number, tempC: number) => Array.from({ length: count * 5 }, () => tempC)
  expect(play([...seconds(10, 200), ...seconds(20, 220), ...seconds(30, 200)])).toEqual([
    { atMs: 15_000, isOn: true },
    { atMs: 45_000, isOn: false },
  ])
})
