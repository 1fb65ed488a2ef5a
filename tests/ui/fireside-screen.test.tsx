import { act, cleanup, fireEvent, render, screen } from '@testing-library/react'
import fc from 'fast-check'
import { afterEach, beforeEach, describe, expect, test, vi } from 'vitest'
import { AfterTouch, isTouchShown, UNDO_S, undoLeftS } from '@/components/live/fireside-after-touch'
import type { Touched } from '@/components/live/fireside-after-touch'
import { cautionFor, cautions } from '@/components/live/fireside-cautions'
import { nextOffsetMs } from '@/components/live/fireside-clock'
import { nothingTaken, takeFrom, takenAll } from '@/components/live/fireside-feed'
import { noKeys, settledKey, takeKey } from '@/components/live/fireside-keys'
import { listedAlarms, topLineOf } from '@/components/live/fireside-lines'
import { PRESS_MS } from '@/components/live/fireside-press'
import { PressButton } from '@/components/live/fireside-press-button'
import { readProbe } from '@/components/live/fireside-reading'
import { clockFigures, inSentence } from '@/components/live/fireside-figures'
import { TopLine } from '@/components/live/fireside-top-line'
import { firesideType, letterArcMinutes, panelMm, roomType, TARGET_PX } from '@/components/live/fireside-type'
import { WoodFigure } from '@/components/live/fireside-wood-figure'
import { createPointFeed } from '@/components/live/point-feed'
import { shownAlarmWords } from '@/lib/alarms/alarm-words'
import type { FiringState } from '@/lib/live/events'

afterEach(cleanup)

const fixed = { seed: 20270201, numRuns: 200 }
const NOW = Date.UTC(2027, 1, 1, 13, 27, 0)

type Signal = FiringState['signals'][number]
const lead: Signal = {
  role: 'lead',
  probeName: 'Bilge A',
  condition: 'live',
  cause: null,
  lastAtMs: NOW - 200,
  tempC: 191.2,
}

function stateOf(signal: Partial<Signal>, more: Partial<FiringState> = {}): FiringState {
  const signals = [{ ...lead, ...signal }]
  return {
    firingId: '7b0c8c1e-1111-4a7e-9c52-2a1f6f1d0001',
    epoch: 'e',
    atMs: NOW,
    state: 'toasting',
    revision: 4,
    signals,
    woodTempC: signals[0]?.condition === 'live' ? (signals[0].tempC ?? null) : null,
    planTempC: 188,
    climbCPerMin: 0.8,
    toastS: 1600,
    stage: { position: 3, name: 'Hold', elapsedS: 400, leftS: 680 },
    next: { words: 'then lid on', dueInS: 680 },
    dose: { minutes: 3.6, targetMinutes: 10, planMinutesNow: 3.1, goodToPercent: 10.9, isIncomplete: false },
    forecast: null,
    stave: null,
    troubles: [],
    alarms: [],
    alarm: null,
    ...more,
  }
}

function renderWood(state: FiringState | null, nowMs = NOW) {
  const reading = readProbe(state, 'lead', nowMs)
  return render(
    <WoodFigure
      depthMm={2}
      lead={reading}
      opposite={{ kind: 'absent' }}
      planTempC={188}
      climbCPerMin={0.8}
      isFar={false}
      unit="C"
      zone="Europe/Paris"
    />,
  )
}

describe('letters and targets on the stated panel (LOOK "Type", TARGETS)', () => {
  test('wood temperature, stage time and hearth number fill 20 arc-minutes at 3 m', () => {
    expect(letterArcMinutes(firesideType.numeral.px, 3)).toBeGreaterThanOrEqual(20)
  })

  test('next action, dose, alarm and NO READING fill 16 arc-minutes at 2 m, by their 62 px', () => {
    expect(firesideType.action.px).toBeGreaterThanOrEqual(62)
    expect(letterArcMinutes(firesideType.action.px, 2)).toBeGreaterThanOrEqual(15.9)
  })

  test('marks have 28 px, and nothing is under 17 px', () => {
    expect(firesideType.mark.px).toBeGreaterThanOrEqual(28)
    for (const { px } of [...Object.values(firesideType), ...Object.values(roomType)]) {
      expect(px).toBeGreaterThanOrEqual(17)
    }
  })

  test('the class of a size says that size', () => {
    for (const { px, className } of [...Object.values(firesideType), ...Object.values(roomType)]) {
      expect(className).toContain(`text-[${px}px]`)
    }
  })

  test('a target is 19 mm', () => {
    expect(panelMm(TARGET_PX)).toBeGreaterThanOrEqual(19)
  })
})

describe('the wood temperature', () => {
  test('a live reading is shown with its place against the plan', () => {
    renderWood(stateOf({}))
    expect(screen.getByText('191')).toBeTruthy()
    expect(screen.getByText('3 above plan')).toBeTruthy()
  })

  test('no reading stands in two lines in place of the number, and the last value nowhere', () => {
    const { container } = renderWood(
      stateOf({ condition: 'no reading', cause: 'open circuit', tempC: null, lastAtMs: NOW - 42_000 }),
    )
    expect(container.innerHTML).toContain('NO<br>READING')
    expect(container.textContent).toContain('open circuit, 42')
    expect(container.textContent).not.toContain('191')
    expect(container.textContent).not.toContain('above plan')
  })

  test('a stale value is marked with its age, and is no reading once it is 8 s old', () => {
    const stale = stateOf({ condition: 'stale', cause: 'nothing more received', lastAtMs: NOW - 4_000 })
    const { container } = renderWood(stale)
    expect(container.textContent).toContain('4\u00a0s old')
    expect(screen.getByText('191').className).toContain('text-amber')
    expect(container.textContent).not.toContain('above plan')
    expect(readProbe({ ...stale, atMs: NOW + 4_000 }, 'lead', NOW + 4_000).kind).toBe('none')
  })

  test('when this screen has lost the server the figure is dated', () => {
    const { container } = renderWood(stateOf({}), NOW + 5_000)
    expect(container.textContent).toContain('as at 14:26:59')
    expect(screen.getByText('191').className).toContain('text-amber')
  })

  test('never shows a value as live unless the state is fresh and says live', () => {
    fc.assert(
      fc.property(
        fc.constantFrom('live' as const, 'stale' as const, 'no reading' as const),
        fc.integer({ min: 0, max: 60_000 }),
        fc.integer({ min: 0, max: 60_000 }),
        (condition, stateAgeMs, readingAgeMs) => {
          const state = stateOf(
            { condition, lastAtMs: NOW - stateAgeMs - readingAgeMs },
            { atMs: NOW - stateAgeMs },
          )
          const isShownLive = readProbe(state, 'lead', NOW).kind === 'live'
          expect(isShownLive).toBe(condition === 'live' && stateAgeMs <= 3_000)
        },
      ),
      fixed,
    )
  })
})

describe('the line across the top', () => {
  const none: ReadonlySet<string> = new Set()
  const base = {
    queue: [],
    refusal: null,
    seenHere: none,
    unit: 'C' as const,
    nowMs: NOW,
    zone: 'Europe/Paris',
  }
  const alarm: FiringState['alarms'][number] = {
    id: 'a',
    kind: 'no reading',
    words: 'Bilge A has no reading. Look at the barrel, then its lead.',
    level: 'amber',
    sinceMs: NOW - 42_000,
    state: 'unacknowledged',
    mayAcknowledge: true,
    shelvedUntilMs: null,
  }
  const hot = {
    ...alarm,
    id: 'b',
    kind: 'wood maximum' as const,
    words: 'Wood at 2 mm is over 215 °C. Lid off, lower the fire.',
    level: 'red' as const,
  }
  const seen = { state: 'acknowledged' as const, mayAcknowledge: false }

  test('says the alarm large, what to do beneath, and how long', () => {
    const line = topLineOf({ ...base, state: stateOf({}, { alarms: [alarm] }) })
    expect(line).toMatchObject({
      headline: 'Bilge A has no reading.',
      instruction: 'Look at the barrel, then its lead.',
      age: '0:42',
      isSeen: false,
    })
  })

  test('changes once a second only until it is seen', () => {
    const line = { headline: 'a', instruction: 'b', age: '', level: 'red' as const }
    const { container, rerender } = render(<TopLine {...line} isSeen={false} onSeen={() => {}} />)
    expect(container.querySelector('.alarm-unseen')).not.toBeNull()
    expect(screen.getByText('NOW')).toBeTruthy()
    rerender(<TopLine {...line} isSeen />)
    expect(container.querySelector('.alarm-unseen')).toBeNull()
  })

  test('a touch holds for this coming of the alarm at once, and not for the next', () => {
    const seenHere = new Set(['a'])
    expect(topLineOf({ ...base, seenHere, state: stateOf({}, { alarms: [alarm] }) })?.isSeen).toBe(true)
    const next = { ...alarm, id: 'c' }
    expect(topLineOf({ ...base, seenHere, state: stateOf({}, { alarms: [next] }) })?.isSeen).toBe(false)
  })

  test('what nobody has seen stands before what was seen, however grave; the others are counted', () => {
    const line = topLineOf({ ...base, state: stateOf({}, { alarms: [{ ...hot, ...seen }, alarm] }) })
    expect(line).toMatchObject({ alarmId: 'a', isSeen: false, moreCount: 1 })
    const both = topLineOf({ ...base, state: stateOf({}, { alarms: [hot, alarm] }) })
    expect(both).toMatchObject({ alarmId: 'b', level: 'red', moreCount: 1 })
  })

  test('one that is over stays until it is seen, and then goes at once', () => {
    const over = { ...alarm, state: 'returned unacknowledged' as const }
    expect(topLineOf({ ...base, state: stateOf({}, { alarms: [over] }) })?.isSeen).toBe(false)
    const seenHere = new Set(['a'])
    expect(topLineOf({ ...base, seenHere, state: stateOf({}, { alarms: [over] }) })).toBeNull()
  })

  test('a shelved alarm has no line; the list still has it', () => {
    const state = stateOf({}, { alarms: [{ ...alarm, state: 'shelved', shelvedUntilMs: NOW + 60_000 }] })
    expect(topLineOf({ ...base, state })).toBeNull()
    expect(listedAlarms(state, none)).toHaveLength(1)
  })

  test('the words come in the person’s unit, a rate and a difference without the 32', () => {
    const line = topLineOf({ ...base, unit: 'F', state: stateOf({}, { alarms: [hot] }) })
    expect(line?.headline).toBe('Wood at 2 mm is over 419 °F.')
    expect(shownAlarmWords('Climbs over 22 °C a minute. ', 'F')).toBe('Climbs over 40 °F a minute. ')
    expect(shownAlarmWords('The sides are over 8 °C apart.', 'F')).toBe('The sides are over 14 °F apart.')
  })

  test('Seen is a target for gloves, and the list opens from the line', () => {
    const onSeen = vi.fn()
    const onList = vi.fn()
    const line = { headline: 'a', instruction: 'b', age: '', level: 'amber' as const, moreCount: 2 }
    render(<TopLine {...line} isSeen={false} onSeen={onSeen} onList={onList} />)
    const button = screen.getByRole('button', { name: 'Seen' })
    expect(Number(/min-h-\[(\d+)px\]/.exec(button.className)?.[1])).toBeGreaterThanOrEqual(TARGET_PX)
    fireEvent.click(button)
    fireEvent.click(screen.getByRole('button', { name: 'and 2 more' }))
    expect([onSeen.mock.calls.length, onList.mock.calls.length]).toEqual([1, 1])
  })

  test('a reminder has no alarm’s colour and does not change', () => {
    const { container } = render(
      <TopLine headline="Feed was due." instruction="" age="" level="grey" isSeen={false} />,
    )
    expect(container.querySelector('.alarm-unseen')).toBeNull()
    expect(container.innerHTML).not.toMatch(/bg-alarm/)
  })

  const amber = { words: alarm.words, level: 'amber' as const, sinceMs: alarm.sinceMs }

  test('a lost connection is said with its time and with the marks that wait', () => {
    const queue = [
      { mark: { id: '1', kind: 'feed' as const, at: '2027-02-01T13:27:01Z' }, tries: 1, refusal: null },
    ]
    const line = topLineOf({ ...base, queue, nowMs: NOW + 20_000, state: stateOf({}, { alarm: amber }) })
    expect(line?.headline).toBe('As of 14:27:00. Not live.')
    expect(line?.instruction).toContain('1 mark waits here')
    expect(line?.instruction).toContain('Bilge A has no reading')
  })
})

describe('a press of a second', () => {
  beforeEach(() => {
    vi.useFakeTimers()
  })
  afterEach(() => {
    vi.useRealTimers()
  })
  const pass = (ms: number) => act(() => vi.advanceTimersByTime(ms))

  test('does it once after a second, and nothing before', () => {
    const onDone = vi.fn()
    render(<PressButton label="End hold" isDue={false} onDone={onDone} />)
    const button = screen.getByRole('button')
    fireEvent.pointerDown(button)
    pass(PRESS_MS - 100)
    expect(onDone).not.toHaveBeenCalled()
    expect(button.querySelector('[aria-hidden]')?.getAttribute('style')).toMatch(/width: (8|9)\d%/)
    pass(300)
    expect(onDone).toHaveBeenCalledTimes(1)
    fireEvent.pointerUp(button)
    fireEvent.click(button)
    pass(3_000)
    expect(onDone).toHaveBeenCalledTimes(1)
  })

  test('let go early it does nothing and says what is wanted', () => {
    const onDone = vi.fn()
    render(<PressButton label="End hold" isDue onDone={onDone} />)
    fireEvent.pointerDown(screen.getByRole('button'))
    pass(600)
    fireEvent.pointerUp(screen.getByRole('button'))
    pass(2_000)
    expect(onDone).not.toHaveBeenCalled()
    expect(screen.getByText(/press until it is full/)).toBeTruthy()
  })

  test('Enter held does it as a finger does', () => {
    const onDone = vi.fn()
    render(<PressButton label="End hold" isDue onDone={onDone} />)
    const button = screen.getByRole('button')
    fireEvent.keyDown(button, { key: 'Enter' })
    pass(500)
    fireEvent.keyDown(button, { key: 'Enter', repeat: true })
    pass(600)
    expect(onDone).toHaveBeenCalledTimes(1)
  })

  test('by a screen reader or a switch, which has no length, it is asked once more', () => {
    const onDone = vi.fn()
    render(<PressButton label="End hold" isDue onDone={onDone} />)
    fireEvent.click(screen.getByRole('button'))
    expect(onDone).not.toHaveBeenCalled()
    fireEvent.click(screen.getByRole('button'))
    expect(onDone).toHaveBeenCalledTimes(1)
  })

  test('is outlined until it is due and filled when it is', () => {
    const { rerender } = render(<PressButton label="End hold" isDue={false} onDone={() => {}} />)
    expect(screen.getByRole('button').className).not.toContain('bg-water')
    rerender(<PressButton label="End hold" isDue onDone={() => {}} />)
    expect(screen.getByRole('button').className).toContain('bg-water')
  })
})

describe('after a touch', () => {
  const touched: Touched = {
    id: '1',
    words: 'Feed',
    atMs: NOW,
    touchedMs: NOW,
    minutesAgo: 0,
    isUndoable: true,
    endedStage: null,
    call: null,
  }
  const show = (change: Partial<Touched>, nowMs: number, earliestMs = 0) =>
    render(
      <AfterTouch
        touched={{ ...touched, ...change }}
        markedAt="14:27:00"
        nowMs={nowMs}
        earliestMs={earliestMs}
        onUndo={() => {}}
        onMinutesAgo={() => {}}
        onCall={() => {}}
      />,
    )

  test('a mark can be taken back for 10 s', () => {
    expect(undoLeftS(touched, NOW)).toBe(UNDO_S)
    expect(undoLeftS(touched, NOW + 9_500)).toBe(1)
    expect(undoLeftS(touched, NOW + 10_000)).toBe(0)
    expect(isTouchShown(touched, NOW + 9_999)).toBe(true)
    expect(isTouchShown(touched, NOW + 10_000)).toBe(false)
  })

  test('a minute ago is offered only after the firing began', () => {
    show({}, NOW, NOW - 90_000)
    expect(screen.queryByText('1 min ago')).not.toBeNull()
    expect(screen.queryByText('2 min ago')).toBeNull()
  })

  test('a phase cannot be taken back', () => {
    show({ isUndoable: false }, NOW)
    expect(screen.queryByText(/Undo/)).toBeNull()
  })

  test('the end of a stage asks for the toaster’s call, and may go without', () => {
    show({ endedStage: 2, words: 'Climb ended' }, NOW)
    expect(screen.getByText('early')).toBeTruthy()
    expect(isTouchShown({ ...touched, endedStage: 2 }, NOW + 15_000)).toBe(true)
    expect(isTouchShown({ ...touched, endedStage: 2 }, NOW + 20_000)).toBe(false)
  })

  test('lid, mist and turn over carry their caution, which ends with whom to follow', () => {
    show({ words: 'Lid off' }, NOW)
    expect(screen.getByText(cautions.lid)).toBeTruthy()
    expect(cautionFor('mist')).toBe(cautions.mist)
    expect(cautionFor('then turn over')).toBe(cautions.turnOver)
    expect(cautionFor('feed')).toBeNull()
    for (const words of Object.values(cautions)) {
      expect(words.endsWith('Follow local code and the responsible person.')).toBe(true)
    }
  })
})

describe('the clock', () => {
  test('counts down so that 0:00 means nothing is left', () => {
    expect(clockFigures(680)).toBe('11:20')
    expect(clockFigures(0.4)).toBe('0:01')
    expect(clockFigures(0)).toBe('0:00')
    expect(clockFigures(3_900)).toBe('65:00')
    expect(clockFigures(6_300)).toBe('105')
  })

  test('never has more than five figures and marks, so that it fits beside the picture', () => {
    fc.assert(
      fc.property(fc.double({ min: 0, max: 50_000, noNaN: true }), (seconds) => {
        expect(clockFigures(seconds).length).toBeLessThanOrEqual(5)
      }),
      fixed,
    )
  })

  test('a stage’s name goes into a sentence without its capital, an abbreviation with it', () => {
    expect(inSentence('Hold')).toBe('hold')
    expect(inSentence('LD 2')).toBe('LD 2')
  })

  test('the offset follows the least delayed instant, and a clock that was set', () => {
    expect(nextOffsetMs(100, 40)).toBe(99)
    expect(nextOffsetMs(100, 130)).toBe(130)
    expect(nextOffsetMs(100, -60_000)).toBe(-60_000)
  })
})

describe('keys', () => {
  const type = (text: string, gapMs: number) => {
    let reading = noKeys
    let atMs = 1_000
    for (const key of text) {
      reading = takeKey(reading, key, atMs).reading
      atMs += gapMs
    }
    return { reading, atMs }
  }

  test('a key that a hand pressed is one of ours once nothing followed', () => {
    const { reading, atMs } = type('f', 10)
    expect(settledKey(reading, atMs)).toBeNull()
    expect(settledKey(reading, atMs + 60)).toBe('f')
  })

  test('a scanner presses nothing, whatever the code', () => {
    fc.assert(
      fc.property(fc.stringMatching(/^[A-Za-z0-9-]{3,20}$/), (code) => {
        const { reading, atMs } = type(code, 8)
        expect(settledKey(reading, atMs + 500)).toBeNull()
        expect(takeKey(reading, 'Enter', atMs).found).toEqual({ kind: 'scan', text: code })
      }),
      fixed,
    )
  })
})

describe('what goes to the picture', () => {
  test('each reading goes once while the feed grows at its end, and all again when one came late', () => {
    fc.assert(
      fc.property(
        fc.array(fc.integer({ min: 0, max: 50 }), { maxLength: 60 }),
        fc.nat(4),
        (instants, every) => {
          const feed = createPointFeed()
          const shown = new Map<number, number>()
          let taken = nothingTaken
          instants.forEach((atMs, i) => {
            feed.put(atMs, i)
            if (i % (every + 1) !== 0) return
            const from = takeFrom(feed, taken)
            taken = takenAll(feed)
            for (let k = from ?? feed.length; k < feed.length; k += 1) {
              shown.set(feed.atMs()[k] ?? -1, feed.tempC()[k] ?? -1)
            }
          })
          const from = takeFrom(feed, taken) ?? feed.length
          for (let k = from; k < feed.length; k += 1) shown.set(feed.atMs()[k] ?? -1, feed.tempC()[k] ?? -1)
          const held = new Map(Array.from(feed.atMs(), (atMs, k) => [atMs, feed.tempC()[k] ?? -1]))
          expect(new Map([...shown].sort((a, b) => a[0] - b[0]))).toEqual(held)
        },
      ),
      fixed,
    )
  })
})
