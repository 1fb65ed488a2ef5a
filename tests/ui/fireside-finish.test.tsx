import { cleanup, fireEvent, render, screen } from '@testing-library/react'
import fc from 'fast-check'
import { afterEach, describe, expect, test, vi } from 'vitest'
import { siteInstant } from '@/components/conditions/site-instant'
import { FiresideFinish } from '@/components/live/fireside-finish'
import type { FinishWords } from '@/components/live/fireside-finish'
import { startItems } from '@/components/live/room-start-list'
import { draftFaults, lossBody, newLossDraft } from '@/components/losses/loss-draft'
import type { LossDraft } from '@/components/losses/loss-draft'
import { lossWords } from '@/components/losses/loss-words'
import { wordsOf } from '@/components/site/word-list'
import { blisterPlaces, lossKinds, replacedWhens } from '@/lib/barrels/loss-kinds'
import { addLossSchema } from '@/lib/barrels/schema'
import type { LossDto } from '@/lib/barrels/schema'

afterEach(cleanup)

const siteWords = { colour: ['honey', 'walnut'], smell: ['crust', 'resin'] }

function renderFinish(onFinish: (words: FinishWords) => void, unit: 'C' | 'F' = 'C') {
  // happy-dom has no modal dialogs; what is in one is what is tested.
  HTMLDialogElement.prototype.showModal = function () {
    this.open = true
  }
  return render(
    <FiresideFinish
      unit={unit}
      siteWords={siteWords}
      isBusy={false}
      problem={null}
      waitingCount={0}
      losses={<p>losses stand here</p>}
      photos={<p>photos stand here</p>}
      onFinish={onFinish}
      onClose={() => undefined}
    />,
  )
}

describe('the finish', () => {
  test('offers the site’s own words, and a touch on one is what is kept', () => {
    const onFinish = vi.fn<(words: FinishWords) => void>()
    renderFinish(onFinish)
    for (const word of [...siteWords.colour, ...siteWords.smell]) {
      expect(screen.getByRole('button', { name: word })).toBeDefined()
    }
    fireEvent.click(screen.getByRole('button', { name: 'walnut' }))
    fireEvent.click(screen.getByRole('button', { name: 'resin' }))
    fireEvent.click(screen.getByRole('button', { name: 'Finish' }))
    expect(onFinish).toHaveBeenCalledWith({
      colour: 'walnut',
      smell: 'resin',
      outsideTempC: null,
      remarks: '',
    })
  })

  test('takes any other words, and takes a word back by a second touch', () => {
    const onFinish = vi.fn<(words: FinishWords) => void>()
    renderFinish(onFinish)
    fireEvent.change(screen.getByLabelText(/Colour/), { target: { value: ' as an old shoe ' } })
    fireEvent.click(screen.getByRole('button', { name: 'crust' }))
    fireEvent.click(screen.getByRole('button', { name: 'crust' }))
    fireEvent.click(screen.getByRole('button', { name: 'Finish' }))
    expect(onFinish.mock.calls[0]?.[0]).toMatchObject({ colour: 'as an old shoe', smell: null })
  })

  test('reads the outside temperature in the person’s unit and keeps °C', () => {
    const onFinish = vi.fn<(words: FinishWords) => void>()
    renderFinish(onFinish, 'F')
    fireEvent.change(screen.getByLabelText(/Outside/), { target: { value: '140' } })
    fireEvent.click(screen.getByRole('button', { name: 'Finish' }))
    expect(onFinish.mock.calls[0]?.[0].outsideTempC).toBeCloseTo(60, 6)
  })

  test('has its caution, and the photos and losses beside it', () => {
    renderFinish(() => undefined)
    expect(screen.getByText(/Follow local code and the responsible person\.$/)).toBeDefined()
    expect(screen.getByText('losses stand here')).toBeDefined()
    expect(screen.getByText('photos stand here')).toBeDefined()
  })
})

const uuid = '7b0c8c1e-1111-4a7e-9c52-2a1f6f1d0001'
const draft = fc.record({
  kind: fc.constantFrom(...lossKinds),
  firingId: fc.constantFrom(null, uuid),
  stavePosition: fc.option(fc.integer({ min: 1, max: 60 }), { nil: null }),
  woodLot: fc.constantFrom('L1', ''),
  blisterPlace: fc.option(fc.constantFrom(...blisterPlaces), { nil: null }),
  blisterSizeMm: fc.option(fc.integer({ min: 1, max: 500 }), { nil: null }),
  replacedWhen: fc.option(fc.constantFrom(...replacedWhens), { nil: null }),
  replacementLot: fc.constantFrom('L2', ''),
  isUntoasted: fc.boolean(),
  replacementToast: fc.constantFrom('medium', ''),
})

describe('a loss while it is written', () => {
  test('law: the form finds no fault exactly when the server finds none', () => {
    fc.assert(
      fc.property(draft, (part) => {
        const whole: LossDraft = {
          ...newLossDraft({ firingId: null, woodLot: 'L1', kind: 'leak' }),
          ...part,
        }
        const isFaultless = Object.keys(draftFaults(whole)).length === 0
        expect(addLossSchema.safeParse(lossBody(whole)).success).toBe(isFaultless)
      }),
      { seed: 20270314, numRuns: 300 },
    )
  })

  test('sends nothing that belongs to another kind, whatever was touched before', () => {
    const whole: LossDraft = {
      ...newLossDraft({ firingId: uuid, woodLot: 'L1', kind: 'blister' }),
      blisterPlace: 'bilge',
      blisterSizeMm: 20,
      replacedWhen: 'after the toast',
      kind: 'leak',
    }
    expect(lossBody(whole)).toMatchObject({
      blisterPlace: null,
      blisterSizeMm: null,
      replacedWhen: null,
      replacementLot: null,
      replacementToast: null,
    })
  })

  test('is said in one sentence', () => {
    const loss: LossDto = {
      id: uuid,
      pieceId: uuid,
      firingId: uuid,
      kind: 'stave replaced',
      stavePosition: 12,
      woodLot: 'L1',
      blisterPlace: null,
      blisterSizeMm: null,
      replacedWhen: 'after the toast',
      replacementLot: 'L2',
      replacementToast: 'untoasted',
      words: '',
      at: '2027-03-14T13:41:00.000Z',
      by: 'T. Okafor',
      ended: null,
    }
    expect(lossWords(loss)).toBe('Stave 12: replaced after the toast by one of lot L2, untoasted.')
    expect(lossWords({ ...loss, kind: 'leak', stavePosition: null })).toBe('Leak, no stave known.')
  })
})

describe('beside the fire', () => {
  test('the start list says what today’s record has of carbon monoxide, and what decides', () => {
    const line = 'No CO reading today. The alarm you wear decides.'
    const item = startItems(null, null, 'UTC', line).find((one) => one.id === 'carbon-monoxide')
    expect(item?.more).toMatch(
      /An 8-hour mean is no alarm\. No CO reading today\. The alarm you wear decides\.$/,
    )
  })

  test('a time is taken in the site’s zone, summer and winter', () => {
    expect(siteInstant('2027-03-14', '13:41', 'Europe/Paris')).toBe('2027-03-14T12:41:00.000Z')
    expect(siteInstant('2027-07-14', '13:41', 'Europe/Paris')).toBe('2027-07-14T11:41:00.000Z')
    expect(siteInstant('2027-07-14', '25:00', 'Europe/Paris')).toBeNull()
  })

  test('words are a line each, and empty lines are none', () => {
    expect(wordsOf(' straw \n\n gold\n')).toEqual(['straw', 'gold'])
  })
})
