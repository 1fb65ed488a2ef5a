import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { firesideFacts, lidNow, pullOf } from '@/components/live/fireside-facts'
import type { FiresideFacts } from '@/components/live/fireside-facts'
import type { MarkDraft, MarkQueue } from '@/components/live/fireside-mark-queue'
import { mainStep, stepClock } from '@/components/live/fireside-step'
import { startItems } from '@/components/live/room-start-list'
import { roomTime } from '@/components/live/room-view'
import type { FiringDto, MarkDto } from '@/lib/firings/schema'
import { defaultSiteRules } from '@/lib/science/site-rules'
import { sampleContent } from '@/tests/support/recipe-content'

const PREHEAT = Date.UTC(2027, 1, 1, 13, 0, 0)
const MINUTE = 60_000
const iso = (ms: number) => new Date(ms).toISOString()

function mark(change: Partial<MarkDto>): MarkDto {
  return {
    id: 'm',
    kind: 'feed',
    at: iso(PREHEAT),
    recordedAt: iso(PREHEAT),
    by: 'N. Brandt',
    phase: null,
    stagePosition: null,
    call: null,
    words: '',
    step: null,
    answer: null,
    replacesId: null,
    isInForce: true,
    ...change,
  }
}

function firing(change: Partial<FiringDto> = {}): FiringDto {
  return {
    id: 'f',
    state: 'preheating',
    piece: { id: 'p', kind: 'barrel', serial: 'SML-0427-P', position: 6 },
    batch: { id: 'b', number: 118, pieceCount: 14, woodLot: 'L1', customerName: 'C' },
    recipe: { id: 'r', name: 'Quay medium', versionId: 'v', versionNumber: 4 },
    hearthNumber: 2,
    toaster: null,
    isTrial: false,
    isImported: false,
    isFirstOfDay: false,
    queuedAt: iso(PREHEAT),
    preheatAt: iso(PREHEAT),
    bendAt: null,
    toastAt: null,
    restAt: null,
    endedAt: null,
    endReason: null,
    score: null,
    revision: 1,
    recipeCopy: {
      recipeId: 'r',
      recipeName: 'Quay medium',
      versionId: 'v',
      versionNumber: 4,
      content: sampleContent(),
    },
    recipeSha256: null,
    siteSettingsVersion: 1,
    moisturePercent: 21,
    moistureMethod: 'meter',
    colour: null,
    smell: null,
    outsideTempC: null,
    remarks: '',
    probes: [],
    marks: [],
    ...change,
  }
}

const queued = (draft: MarkDraft): MarkQueue[number] => ({ mark: draft, tries: 0, refusal: null })

function factsOf(change: Partial<FiringDto>, queue: MarkQueue = []): FiresideFacts {
  const facts = firesideFacts(firing(change), queue, defaultSiteRules)
  if (facts === null) throw new Error('not started')
  return facts
}

const toastAt = iso(PREHEAT + 30 * MINUTE)
const TOAST = Date.parse(toastAt)
const toasting = { state: 'toasting' as const, bendAt: iso(PREHEAT + 12 * MINUTE), toastAt }

describe('the one large control', () => {
  test('goes from preheat to finish, each due at its own time', () => {
    const steps = [
      mainStep(factsOf({}), PREHEAT + 11 * MINUTE),
      mainStep(factsOf({}), PREHEAT + 12 * MINUTE),
      mainStep(factsOf({ state: 'bending', bendAt: iso(PREHEAT) }), PREHEAT + 10 * MINUTE),
      mainStep(factsOf(toasting), TOAST + 5 * MINUTE),
      mainStep(factsOf(toasting), TOAST + 12 * MINUTE),
      mainStep(factsOf({ ...toasting, state: 'resting', restAt: iso(TOAST) }), TOAST + 10 * MINUTE),
    ]
    expect(steps.map((step) => [step?.label, step?.isDue])).toEqual([
      ['Start the bend', false],
      ['Start the bend', true],
      ['Pull done', true],
      ['End warm', false],
      ['End warm', true],
      ['Finish', true],
    ])
  })

  test('after the pull is marked the toast is started', () => {
    const pulled = factsOf({
      state: 'bending',
      bendAt: iso(PREHEAT),
      marks: [mark({ kind: 'pull', at: iso(PREHEAT + 8 * MINUTE) })],
    })
    expect(mainStep(pulled, PREHEAT + 9 * MINUTE)).toMatchObject({ label: 'Start the toast', isDue: true })
    expect(pullOf(pulled)).toEqual({ minutes: 8, isShort: true })
    expect(stepClock(pulled, PREHEAT + 9 * MINUTE)).toEqual({ words: 'Pull took', seconds: 480 })
  })

  test('a head is not bent', () => {
    const copy = firing().recipeCopy
    if (copy === null) throw new Error('no copy')
    const head = factsOf({ recipeCopy: { ...copy, content: sampleContent({ pieceKind: 'head' }) } })
    expect(mainStep(head, PREHEAT)?.label).toBe('Start the toast')
  })

  test('an ended stage gives the next, and the last gives the rest', () => {
    const first = mark({ id: '1', kind: 'stage', stagePosition: 1, at: iso(TOAST + 12 * MINUTE) })
    const second = mark({ id: '2', kind: 'stage', stagePosition: 2, at: iso(TOAST + 21 * MINUTE) })
    expect(mainStep(factsOf({ ...toasting, marks: [first] }), TOAST + 13 * MINUTE)?.label).toBe('End climb')
    const last = mainStep(factsOf({ ...toasting, marks: [first, second] }), TOAST + 45 * MINUTE)
    expect(last).toMatchObject({
      label: 'Start rest',
      isDue: true,
      mark: { kind: 'phase', phase: 'resting' },
    })
  })

  test('a stage that is over waits two minutes for its mark before the plan goes on without it', () => {
    const facts = factsOf(toasting)
    expect(stepClock(facts, TOAST + 12.5 * MINUTE)).toEqual({ words: 'Warm, over by', seconds: 30 })
    expect(mainStep(facts, TOAST + 14.1 * MINUTE)?.label).toBe('End climb')
  })
})

describe('what waits in this browser', () => {
  test('a phase that is not sent yet moves the screen on', () => {
    const facts = factsOf({}, [
      queued({ id: 'q', kind: 'phase', phase: 'bending', at: iso(PREHEAT + 12 * MINUTE) }),
    ])
    expect(facts.state).toBe('bending')
    expect(stepClock(facts, PREHEAT + 13 * MINUTE)).toEqual({ words: 'Bend, at least', seconds: 540 })
  })

  test('what the server took stays on the screen until the firing is fetched with it', () => {
    const bend: MarkDraft = { id: 'q', kind: 'phase', phase: 'bending', at: iso(PREHEAT + 12 * MINUTE) }
    const between = firesideFacts(firing(), [], defaultSiteRules, [bend])
    expect(between?.state).toBe('bending')
    const feed: MarkDraft = { id: 'a', kind: 'feed', at: iso(PREHEAT) }
    const after = firesideFacts(firing({ marks: [mark({ id: 'a' })] }), [queued(feed)], defaultSiteRules, [
      feed,
    ])
    expect(after?.shownMarks.map((one) => one.id)).toEqual(['a'])
  })

  test('a mark shows at once, an undone one goes at once, a moved one moves', () => {
    const marks = [mark({ id: 'a', kind: 'lid on', at: iso(TOAST) })]
    const undone = factsOf({ ...toasting, marks }, [
      queued({ id: 'u', kind: 'undone', at: iso(TOAST), replacesId: 'a' }),
    ])
    expect(undone.shownMarks).toEqual([])
    const moved = factsOf({ ...toasting, marks }, [
      queued({ id: 'n', kind: 'lid on', at: iso(TOAST - MINUTE), replacesId: 'a' }),
    ])
    expect(lidNow(moved.shownMarks)).toEqual({ isOn: true, sinceMs: TOAST - MINUTE })
  })

  test('a mark that the server has already is not shown twice', () => {
    fc.assert(
      fc.property(fc.uniqueArray(fc.uuid(), { minLength: 1, maxLength: 8 }), fc.nat(8), (ids, known) => {
        const marks = ids.slice(0, known).map((id) => mark({ id }))
        const queue = ids.map((id) => queued({ id, kind: 'feed', at: iso(PREHEAT) }))
        expect(
          factsOf({ marks }, queue)
            .shownMarks.map((one) => one.id)
            .sort(),
        ).toEqual([...ids].sort())
      }),
      { seed: 20270201, numRuns: 200 },
    )
  })
})

describe('the start list', () => {
  const water = {
    id: 'w',
    source: 'Mains',
    tcaNgPerL: 0.4,
    freeChlorineMgPerL: 0.01,
    checkedAt: iso(PREHEAT),
    dueAt: iso(PREHEAT + 7 * 24 * 60 * MINUTE),
    checkedBy: 'N. Brandt',
    isInDate: true,
    isDueSoon: false,
    overLimit: null,
    isNewest: true,
  }

  test('has the cautions, the water and the lead probe with their dates', () => {
    const items = startItems(water, null, 'Europe/Paris')
    expect(items.map((item) => item.id)).toEqual([
      'extraction',
      'carbon-monoxide',
      'fire-watch',
      'not-alone',
      'gloves',
      'water w',
      'probe',
    ])
    expect(items.find((item) => item.id === 'water w')?.words).toBe('Water checked, good until 8 February.')
    expect(items.find((item) => item.id === 'probe')?.isWrong).toBe(true)
  })

  test('says that a check is out of date, and since when', () => {
    const [, , , , , old] = startItems({ ...water, isInDate: false }, null, 'Europe/Paris')
    expect(old).toMatchObject({ words: 'Water check out of date since 8 February.', isWrong: true })
  })

  test('says that water is above the site’s limits, though its check is in date', () => {
    const overLimit = 'TCA 2.40 ng/L is above 1.50.'
    const [, , , , , bad] = startItems({ ...water, overLimit }, null, 'Europe/Paris')
    expect(bad).toMatchObject({
      words: 'This water is not to be used.',
      more: `Mains: ${overLimit}`,
      isWrong: true,
    })
  })
})

test('a row of the room counts on between two states of the server', () => {
  const room = {
    firingId: 'f',
    epoch: 'e',
    atMs: TOAST,
    state: 'toasting' as const,
    revision: 1,
    signals: [],
    woodTempC: null,
    planTempC: null,
    climbCPerMin: null,
    toastS: 0,
    stage: { position: 3, name: 'Hold', elapsedS: 0, leftS: 680 },
    next: { words: 'then lid on', dueInS: 300 },
    dose: { minutes: 0, targetMinutes: 1, planMinutesNow: 0, goodToPercent: 11, isIncomplete: false },
    alarm: null,
    hearthNumber: 2,
    serial: 'SML-0427-P',
    recipeName: 'Quay medium',
    isFarFromPlan: false,
  }
  expect(roomTime(room, TOAST + 400)).toEqual({ leftS: 679.6, isOver: false, words: 'Hold, then lid on' })
})
