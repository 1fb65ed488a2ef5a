import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { viewAbove } from '@/lib/alarms/alarm-delay'
import type { AlarmHand, AlarmState } from '@/lib/alarms/alarm-states'
import { alarmMoves, alarmStates, canMoveAlarm, stateAfterHand } from '@/lib/alarms/alarm-states'
import type { AlarmCondition, AlarmMove, AlarmStanding, FiringAlarms } from '@/lib/alarms/firing-alarms'
import { createFiringAlarms } from '@/lib/alarms/firing-alarms'
import { defaultSiteRules } from '@/lib/science/site-rules'

const { onDelayS, offDelayS, deadbandC } = defaultSiteRules.alarms
const delays = { onDelayS, offDelayS }
const limit = 215
const tickMs = 200
const shelvedForMs = 30_000
const fixed = { seed: 20_270_403, numRuns: 120 }

function condition(tempC: number | null, suppressedBy: string | null): AlarmCondition {
  return {
    kind: 'wood maximum',
    subject: '',
    view: viewAbove(tempC, limit, deadbandC),
    suppressedBy,
    delays,
    words: `Wood at 2 mm is over ${limit} °C. Lid off, lower the fire.`,
    endingWords: `Wood at 2 mm is below ${limit} °C again.`,
    value: tempC,
    limit,
  }
}

/** The table as the database holds it: one alarm, each move from where it stands. */
function createTable() {
  const rows: (AlarmMove & { by: 'alarm' | AlarmHand; until: number | null })[] = []
  const standing = (): AlarmStanding | null => {
    const last = rows.at(-1)
    if (last === undefined || last.to === 'normal') return null
    const came = rows.findLast((row) => row.from === 'normal' || row.from === 'returned unacknowledged')
    return {
      kind: last.kind,
      subject: last.subject,
      occurrenceId: last.occurrenceId,
      state: last.to,
      sinceMs: came?.atMs ?? last.atMs,
      words: last.words,
      shelvedUntilMs: last.until,
    }
  }
  return {
    rows,
    standing,
    add: (move: AlarmMove, by: 'alarm' | AlarmHand = 'alarm', until: number | null = null) => {
      expect(move.from).toBe(rows.at(-1)?.to ?? 'normal')
      expect(canMoveAlarm(move.from, move.to), `${move.from} to ${move.to}`).toBe(true)
      rows.push({ ...move, by, until })
    },
  }
}

type Step = { tempC: number | null; hand: AlarmHand | null; isRestart: boolean; isSuppressed: boolean }
type Seen = Step & { atMs: number; state: AlarmState; isOnScreen: boolean }

/** Plays a firing's alarm tick by tick with what hands and restarts do, as the hub does. */
function play(steps: readonly Step[]) {
  const table = createTable()
  let alarms: FiringAlarms = createFiringAlarms()
  const seen: Seen[] = []
  const restore = () => {
    const standing = table.standing()
    alarms.restore(standing === null ? [] : [standing])
  }
  steps.forEach((step, i) => {
    const atMs = i * tickMs
    if (step.isRestart) {
      const before = alarms.present().map(({ id, state }) => [id, state])
      alarms = createFiringAlarms()
      restore()
      expect(alarms.present().map(({ id, state }) => [id, state])).toEqual(before)
    }
    handOf(step, table, atMs)
    if (step.hand !== null) restore()
    alarms.see([condition(step.tempC, step.isSuppressed ? 'The barrel is being turned over.' : null)], atMs)
    for (const move of alarms.takeMoves()) table.add(move)
    const present = alarms.present()
    const state = table.standing()?.state ?? 'normal'
    seen.push({ ...step, atMs, state, isOnScreen: present.some((alarm) => alarm.state !== 'shelved') })
  })
  return { rows: table.rows, seen }
}

function handOf(step: Step, table: ReturnType<typeof createTable>, atMs: number): void {
  const last = table.rows.at(-1)
  const to = last === undefined || step.hand === null ? null : stateAfterHand(last.to, step.hand)
  if (last === undefined || step.hand === null || to === null) return
  const until = to === 'shelved' ? atMs + shelvedForMs : null
  table.add({ ...last, from: last.to, to, atMs, reason: null }, step.hand, until)
}

/** Stretches of noise about a level, each 0.2 to 30 s, with a hand or a restart now and then. */
function anySteps(options: { hasHands: boolean; hasRestarts: boolean; isSuppressible: boolean }) {
  const levels = fc.oneof(fc.double({ min: limit - 9, max: limit + 9, noNaN: true }), fc.constant(null))
  const stretch = fc.record({
    level: levels,
    noise: fc.double({ min: 0, max: 6, noNaN: true }),
    ticks: fc.integer({ min: 1, max: 150 }),
    hand: options.hasHands
      ? fc.option(fc.constantFrom<AlarmHand>('acknowledge', 'shelve', 'unshelve'))
      : fc.constant(null),
    isRestart: options.hasRestarts ? fc.boolean() : fc.constant(false),
    isSuppressed: options.isSuppressible ? fc.boolean() : fc.constant(false),
    phase: fc.double({ min: 0, max: 6, noNaN: true }),
  })
  return fc.array(stretch, { minLength: 1, maxLength: 20 }).map((parts) =>
    parts.flatMap(({ level, noise, ticks, hand, isRestart, isSuppressed, phase }) =>
      Array.from({ length: ticks }, (_, i): Step => ({
        tempC: level === null ? null : level + noise * Math.sin(i * 1.7 + phase),
        hand: i === 0 ? hand : null,
        isRestart: i === 0 && isRestart,
        isSuppressed,
      })),
    ),
  )
}

const whole = { hasHands: true, hasRestarts: true, isSuppressible: true }

describe('an alarm over random signals, hands and restarts', () => {
  it('makes legal moves only, each from where it stands, and a restart at any moment loses nothing', () => {
    fc.assert(
      fc.property(anySteps(whole), (steps) => {
        play(steps)
      }),
      fixed,
    )
  })

  it('is never missed: beyond the limit for longer than the on-delay there is one', () => {
    fc.assert(
      fc.property(anySteps(whole), (steps) => {
        let beyondFromMs: number | null = null
        for (const one of play(steps).seen) {
          if (one.tempC === null || one.tempC <= limit || one.isRestart) beyondFromMs = null
          if (one.tempC !== null && one.tempC > limit) beyondFromMs ??= one.atMs
          if (beyondFromMs === null || one.atMs - beyondFromMs < onDelayS * 1000) continue
          expect(['unacknowledged', 'acknowledged', 'shelved', 'suppressed']).toContain(one.state)
          if (!one.isSuppressed && one.state !== 'shelved') expect(one.isOnScreen).toBe(true)
        }
      }),
      fixed,
    )
  })

  it('never chatters: it does not come again sooner than off-delay and on-delay together', () => {
    const quiet = { hasHands: false, hasRestarts: false, isSuppressible: false }
    fc.assert(
      fc.property(anySteps(quiet), (steps) => {
        const came = play(steps).rows.filter((row) => row.to === 'unacknowledged')
        came.forEach((row, i) => {
          const before = came[i - 1]
          if (before === undefined) return
          expect(row.atMs - before.atMs).toBeGreaterThanOrEqual((onDelayS + offDelayS) * 1000)
        })
      }),
      fixed,
    )
  })

  it('comes once at most while noise swings about its limit within the deadband', () => {
    const swing = fc.array(fc.double({ min: limit - deadbandC, max: limit + deadbandC, noNaN: true }), {
      minLength: 1,
      maxLength: 1_500,
    })
    fc.assert(
      fc.property(swing, (temps) => {
        const step = { hand: null, isRestart: false, isSuppressed: false }
        const { rows } = play(temps.map((tempC) => ({ ...step, tempC })))
        expect(rows.length).toBeLessThanOrEqual(1)
      }),
      fixed,
    )
  })

  it('that is shelved is not on the screen until its time is over or a hand takes it back', () => {
    fc.assert(
      fc.property(anySteps({ ...whole, isSuppressible: false }), (steps) => {
        const { rows, seen } = play(steps)
        rows.forEach((row, i) => {
          if (row.to !== 'shelved') return
          const next = rows[i + 1]
          const untilMs = next?.atMs ?? Infinity
          if (next !== undefined && next.by === 'alarm') {
            expect(next.atMs - row.atMs).toBeGreaterThanOrEqual(shelvedForMs)
            expect(next.atMs - row.atMs).toBeLessThan(shelvedForMs + 2 * tickMs)
          }
          const within = seen.filter((one) => one.atMs > row.atMs && one.atMs < untilMs)
          expect(within.some((one) => one.isOnScreen)).toBe(false)
        })
      }),
      fixed,
    )
  })

  it('is over for the screen only once somebody has seen it', () => {
    fc.assert(
      fc.property(anySteps({ ...whole, hasHands: false, isSuppressible: false }), (steps) => {
        expect(play(steps).rows.some((row) => row.to === 'normal' || row.to === 'acknowledged')).toBe(false)
      }),
      fixed,
    )
  })
})

describe('the table of moves', () => {
  it('lets every state be left, and back to normal', () => {
    for (const state of alarmStates) {
      const reached = new Set<AlarmState>([state])
      for (const at of reached) for (const to of alarmMoves[at]) reached.add(to)
      expect(reached.has('normal')).toBe(true)
      expect(alarmMoves[state]).not.toContain(state)
    }
  })

  it('has every move that a hand makes', () => {
    for (const state of alarmStates) {
      for (const hand of ['acknowledge', 'shelve', 'unshelve'] as const) {
        const to = stateAfterHand(state, hand)
        if (to !== null) expect(canMoveAlarm(state, to)).toBe(true)
      }
    }
  })
})

it('a reminder goes by itself as soon as what it says is done, and comes anew for the next', () => {
  const alarms = createFiringAlarms()
  const due = (subject: string): AlarmCondition => ({
    ...condition(null, null),
    kind: 'reminder',
    subject,
    view: 'beyond',
    delays: { onDelayS: 0, offDelayS: 0 },
  })
  alarms.see([due('cue 1.1')], 0)
  expect(alarms.present().map(({ state }) => state)).toEqual(['unacknowledged'])
  alarms.see([], 200)
  expect(alarms.present()).toEqual([])
  alarms.see([due('cue 1.2')], 400)
  expect(alarms.takeMoves().map(({ subject, from, to }) => [subject, from, to])).toEqual([
    ['cue 1.1', 'normal', 'unacknowledged'],
    ['cue 1.1', 'unacknowledged', 'normal'],
    ['cue 1.2', 'normal', 'unacknowledged'],
  ])
})

it('what a hand did while a move was on its way does not undo that move', () => {
  const alarms = createFiringAlarms()
  for (let atMs = 0; atMs <= 6_000; atMs += tickMs) alarms.see([condition(230, null)], atMs)
  const [id] = alarms.present().map((alarm) => alarm.id)
  alarms.restore([], (key) => key === 'wood maximum/')
  expect(alarms.present().map((alarm) => alarm.id)).toEqual([id])
})
