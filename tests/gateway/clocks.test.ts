import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { createBootClock } from '@/lib/gateway/boot-clock'
import { startPolling, type SteadyClock } from '@/lib/gateway/poll-schedule'

const SEED = 20260213
const START_MS = Date.parse('2026-02-01T10:00:00.000Z')

/** A box whose wall clock can be set, and whose steady clock only goes on. */
function box() {
  let steady = 5_000
  let wallAhead = START_MS - steady
  return {
    wallMs: () => steady + wallAhead,
    steadyMs: () => steady,
    pass: (ms: number) => {
      steady += ms
    },
    setWallBy: (ms: number) => {
      wallAhead += ms
    },
  }
}

describe('the clock of one run', () => {
  it('counts on as if nothing had happened when the wall clock is set, and knows by how much', () => {
    const { wallMs, steadyMs, pass, setWallBy } = box()
    const clock = createBootClock({ wallMs, steadyMs })
    pass(1_000)
    expect(clock.look()).toBeNull()
    setWallBy(3_600_000)
    expect(clock.look()).toBe(3_600_000)
    expect(clock.look()).toBeNull()
    pass(1_000)
    expect(clock.countedMs(steadyMs())).toBe(START_MS + 2_000)
    expect(clock.nowMs()).toBe(START_MS + 2_000 + 3_600_000)
    setWallBy(-7_200_000)
    expect(clock.look()).toBe(-7_200_000)
    expect(clock.shiftMs()).toBe(-3_600_000)
    expect(clock.countedMs(steadyMs())).toBe(START_MS + 2_000)
  })

  it('never counts backwards and is never further from the wall clock than a small step, whatever is done to it', () => {
    const turns = fc.array(
      fc.tuple(fc.integer({ min: 0, max: 5_000 }), fc.integer({ min: -1e10, max: 1e10 })),
      {
        maxLength: 40,
      },
    )
    fc.assert(
      fc.property(turns, (list) => {
        const { wallMs, steadyMs, pass, setWallBy } = box()
        const clock = createBootClock({ wallMs, steadyMs })
        let before = clock.countedMs(steadyMs())
        for (const [ms, step] of list) {
          pass(ms)
          setWallBy(step)
          clock.look()
          const counted = clock.countedMs(steadyMs())
          expect(counted - before).toBeCloseTo(ms, 6)
          before = counted
          expect(Math.abs(clock.nowMs() - wallMs())).toBeLessThan(250)
        }
      }),
      { seed: SEED, numRuns: 200 },
    )
  })

  it('says nothing of a step when the process was held up while it looked', () => {
    const { wallMs, steadyMs, pass } = box()
    let isSlow = false
    const clock = createBootClock({
      wallMs: () => {
        if (isSlow) pass(400)
        return wallMs()
      },
      steadyMs,
    })
    isSlow = true
    expect(clock.look()).toBeNull()
    isSlow = false
    expect(clock.look()).toBeNull()
  })
})

/** A steady clock turned by hand; `early` rings each alarm that much too soon. */
function handClock(early = 0) {
  let nowMs = 1_000
  let alarm: { atMs: number; then: () => void } | null = null
  const clock: SteadyClock = {
    steadyMs: () => nowMs,
    wait: (durationMs, then) => {
      // Node's shortest alarm is 1 ms.
      alarm = { atMs: nowMs + (early > 0 ? Math.max(1, durationMs) - early : durationMs), then }
      return () => {
        alarm = null
      }
    },
  }
  return {
    clock,
    /** Lets the next alarm ring, `lateMs` too late. */
    ring: (lateMs: number) => {
      const due = alarm
      if (due === null) throw new Error('nothing is waiting')
      alarm = null
      nowMs = Math.max(nowMs, due.atMs + lateMs)
      due.then()
    },
    isWaiting: () => alarm !== null,
  }
}

describe('the schedule of polls', () => {
  it('does not drift however late single turns are, and counts each turn as taken or missed', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 50, max: 1_000 }),
        fc.array(fc.integer({ min: 0, max: 3_000 }), { minLength: 1, maxLength: 60 }),
        (intervalMs, lates) => {
          const { clock, ring } = handClock()
          const taken: number[] = []
          let turns = 0
          startPolling(intervalMs, clock, (missed) => {
            turns += missed + 1
            taken.push(clock.steadyMs() - 1_000)
          })
          for (const late of lates) {
            ring(late)
            // The turn that was just taken is the last whose instant has come.
            expect(turns - 1).toBe(Math.floor((taken.at(-1) ?? NaN) / intervalMs))
          }
          ring(0)
          expect((taken.at(-1) ?? NaN) % intervalMs).toBe(0)
        },
      ),
      { seed: SEED, numRuns: 200 },
    )
  })

  it('an alarm that rings a little early takes no turn twice', () => {
    const { clock, ring } = handClock(0.4)
    const taken: number[] = []
    startPolling(200, clock, () => taken.push(Math.floor(clock.steadyMs())))
    for (let i = 0; i < 9; i += 1) ring(0)
    expect(taken).toEqual([1_000, 1_200, 1_400, 1_600, 1_800])
  })

  it('ends when it is told to, also by its own turn', () => {
    const { clock, ring, isWaiting } = handClock()
    const stop = startPolling(200, clock, () => stop())
    ring(0)
    expect(isWaiting()).toBe(false)
  })
})
