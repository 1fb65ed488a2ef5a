import { cleanup, render, screen } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { afterEach, describe, expect, test, vi } from 'vitest'
import { FiresideAdvice } from '@/components/live/fireside-advice'
import { beepsOf, createSoundPlayer } from '@/components/live/fireside-sound'
import { FiresideWhy } from '@/components/live/fireside-why'
import { isSameAdvice } from '@/components/live/use-advice'
import { recordWords } from '@/components/live/use-room-memory'
import type { ShortStep } from '@/lib/firings/short-steps'

afterEach(cleanup)

const step: ShortStep = {
  step: 'preheat',
  stagePosition: null,
  name: 'Preheat',
  isSkipped: false,
  actualMinutes: 4,
  askedMinutes: 20,
  reason: null,
}

describe('a step that was short', () => {
  test('asks why in one touch, and may be put off', async () => {
    const [onReason, onOtherWords, onLater] = [vi.fn(), vi.fn(), vi.fn()]
    render(<FiresideWhy step={step} onReason={onReason} onOtherWords={onOtherWords} onLater={onLater} />)
    expect(screen.getByRole('status').textContent).toBe('Preheat was 4:00 of 20 min. Why?')
    await userEvent.click(screen.getByRole('button', { name: 'Staves hot already' }))
    expect(onReason).toHaveBeenCalledWith('Staves hot already')
    await userEvent.click(screen.getByRole('button', { name: 'Later' }))
    expect(onLater).toHaveBeenCalledOnce()
  })
})

describe('advice', () => {
  test('is taken or waved away by a touch, which only says so', async () => {
    const onAnswer = vi.fn()
    render(<FiresideAdvice words="On the plan from here, hold 3 min longer." onAnswer={onAnswer} />)
    await userEvent.click(screen.getByRole('button', { name: 'Do it' }))
    await userEvent.click(screen.getByRole('button', { name: 'Not now' }))
    expect(onAnswer.mock.calls).toEqual([['taken'], ['not now']])
  })

  test('that was answered is put again only when it has become another', () => {
    const hold = { kind: 'hold longer', minutes: 3 } as const
    expect(isSameAdvice(hold, { ...hold, minutes: 4 })).toBe(true)
    expect(isSameAdvice(hold, { ...hold, minutes: 5 })).toBe(false)
    expect(isSameAdvice(hold, { kind: 'rest early', minutes: 3 })).toBe(false)
  })
})

test('the forecast’s record says its n, its count and the interval of its share', () => {
  const record = { n: 30, rightCount: 24, withinMinutes: 1.5, shareLow: 0.614, shareHigh: 0.923 }
  expect(recordWords(record)).toBe('Last 30: within 1.5 min, 24 times (61 to 92 %).')
})

describe('the two sounds', () => {
  test('differ in pitch, rhythm and length, and no two notes of one overlap', () => {
    const { act, alarm } = beepsOf
    const lengthS = (beeps: typeof act) => Math.max(...beeps.map((beep) => beep.atS + beep.lengthS))
    expect(lengthS(alarm)).toBeGreaterThan(2 * lengthS(act))
    expect(Math.min(...alarm.map((beep) => beep.hz))).toBeGreaterThan(Math.max(...act.map((beep) => beep.hz)))
    for (const beeps of [act, alarm]) {
      beeps.slice(1).forEach((beep, i) => {
        const before = beeps[i]
        expect(beep.atS).toBeGreaterThanOrEqual((before?.atS ?? 0) + (before?.lengthS ?? 0) - 1e-9)
      })
    }
  })

  test('are silent before a touch has unlocked them, and where the browser has none', () => {
    const open = vi.fn(() => {
      throw new Error('no audio here')
    })
    const player = createSoundPlayer(open)
    player.play('alarm', 'loud')
    expect(open).not.toHaveBeenCalled()
    player.unlock()
    player.play('alarm', 'loud')
    expect(open).toHaveBeenCalledOnce()
  })
})
