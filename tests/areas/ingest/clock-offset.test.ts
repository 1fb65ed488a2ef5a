import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { ClockWatch } from '@/lib/ingest/clock-offset'
import { nextClockOffset } from '@/lib/ingest/clock-offset'

const seed = 20_260_407
const startMs = Date.parse('2026-03-01T10:00:00.000Z')

type Sent = { afterMs: number; delayMs: number; isCopy?: boolean; setMs?: number }

/** Plays messages of one boot whose clock is `aheadMs` ahead; gives the offset that held after each. */
function play(messages: readonly Sent[], aheadMs = 0): { offsetMs: number; trueMs: number }[] {
  let applied: number | null = null
  let watch: ClockWatch | null = null
  let nowMs = startMs
  let ahead = aheadMs
  return messages.map(({ afterMs, delayMs, isCopy = false, setMs = 0 }) => {
    nowMs += afterMs
    ahead += setMs
    const next = nextClockOffset(applied, watch, {
      receivedAtMs: nowMs + delayMs,
      sentAtMs: nowMs + ahead,
      doNumbersGoOn: !isCopy,
    })
    ;({ offsetMs: applied, watch } = next)
    return { offsetMs: next.offsetMs, trueMs: -ahead }
  })
}

const quick = { afterMs: 200, delayMs: 3 }
const offsets = (messages: readonly Sent[], aheadMs = 0) =>
  play(messages, aheadMs).map(({ offsetMs }) => offsetMs)

describe('the offset of a gateway clock', () => {
  it('is taken from the first message and stays while it moves by a second at most', () => {
    expect(offsets([quick, { afterMs: 200, delayMs: 900 }, quick], 3_600_000)).toEqual([
      3 - 3_600_000,
      3 - 3_600_000,
      3 - 3_600_000,
    ])
  })

  it('a message that was held up on the way moves nothing, nor does a late copy of an old one', () => {
    const held = { afterMs: 200, delayMs: 8_000 }
    const copy = { afterMs: 200, delayMs: 60_000, isCopy: true }
    expect(new Set(offsets([quick, held, quick, copy, quick]))).toEqual(new Set([3]))
  })

  it('a first message that was held up is corrected by the next', () => {
    expect(offsets([{ afterMs: 0, delayMs: 5_000 }, quick])).toEqual([5_000, 3])
  })

  it('a clock that was set is followed with the first message after it, forward and back', () => {
    expect(offsets([quick, quick, { ...quick, setMs: 30_000 }])).toEqual([3, 3, -29_997])
    expect(offsets([quick, quick, { ...quick, setMs: -30_000 }, quick])).toEqual([3, 3, 30_003, 30_003])
  })

  it('a clock set back by less than the pause before it is followed once three messages over 10 s agree', () => {
    const after = Array.from({ length: 60 }, () => quick)
    const all = offsets([quick, { afterMs: 60_000, delayMs: 3, setMs: -30_000 }, ...after])
    expect(all[1]).toBe(3)
    expect(all[50]).toBe(3)
    expect(all[53]).toBe(30_003)
  })

  it('law: whatever messages are held up, an offset is never further from the truth than the least delay so far and a second', () => {
    const message = fc.record({
      afterMs: fc.integer({ min: 50, max: 3_000 }),
      delayMs: fc.oneof(
        { weight: 4, arbitrary: fc.integer({ min: 0, max: 500 }) },
        fc.integer({ min: 0, max: 9_000 }),
      ),
      isCopy: fc.boolean(),
    })
    fc.assert(
      fc.property(
        fc.array(message, { minLength: 1, maxLength: 60 }),
        fc.integer({ min: -1e8, max: 1e8 }),
        (messages, ahead) => {
          // Every third goes through at once, as on any line that works at all.
          const all = messages.map((one, i) => (i % 3 === 0 ? { ...one, delayMs: 0, isCopy: false } : one))
          for (const { offsetMs, trueMs } of play(all, ahead))
            expect(Math.abs(offsetMs - trueMs)).toBeLessThanOrEqual(1_000)
        },
      ),
      { seed, numRuns: 300 },
    )
  })
})
