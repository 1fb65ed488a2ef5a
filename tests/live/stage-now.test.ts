import { expect, it } from 'vitest'
import type { FiringFacts, LiveMark } from '@/lib/live/firing-facts'
import { nextAction, stageNow } from '@/lib/live/stage-now'
import { planOf } from '@/lib/recipes/plan-of'
import { defaultSiteRules } from '@/lib/science/site-rules'
import { testRecipe } from '@/tests/support/room'

const toastMs = Date.parse('2026-03-02T09:00:00.000Z')

function factsWith(more: Partial<FiringFacts>): FiringFacts {
  return {
    firingId: 'f',
    revision: 1,
    state: 'toasting',
    hearthNumber: 1,
    serial: 'TST-0001-A',
    preheatMs: toastMs - 20 * 60_000,
    bendMs: toastMs - 12 * 60_000,
    toastMs,
    restMs: null,
    endedMs: null,
    moisturePercent: 18,
    recipeName: 'Test medium',
    content: testRecipe,
    plan: planOf(testRecipe, defaultSiteRules.dose),
    rules: defaultSiteRules,
    assignments: [],
    marks: [],
    ...more,
  }
}

const at = (minutes: number) => toastMs + minutes * 60_000
const mark = (kind: string, minutes: number, stagePosition: number | null = null): LiveMark => ({
  kind,
  atMs: at(minutes),
  stagePosition,
})

it('without its mark a stage waits two minutes, then the plan goes on; the last one runs over its end', () => {
  const facts = factsWith({})
  expect(stageNow(facts, at(5))).toMatchObject({ position: 1, name: 'Climb', elapsedS: 300, leftS: 420 })
  expect(stageNow(facts, at(13))).toMatchObject({ position: 1, name: 'Climb', leftS: -60 })
  expect(stageNow(facts, at(14.5))).toMatchObject({ position: 2, name: 'Hold', elapsedS: 150, leftS: 330 })
  expect(stageNow(facts, at(25))).toMatchObject({ position: 2, leftS: -300 })
})

it("a stage's mark ends it there, early or late", () => {
  const facts = factsWith({ marks: [mark('stage', 10, 1)] })
  expect(stageNow(facts, at(11))).toMatchObject({ position: 2, elapsedS: 60, leftS: 420 })
})

it.each([
  [1, [], 'then feed', 300],
  [6.5, [], 'feed now', -30],
  [6.5, [mark('feed', 5)], 'then lid on', 330],
  [9, [], 'then lid on', 180],
  [12.5, [], 'lid on now', -30],
  [12.5, [mark('lid on', 12.2)], 'Hold now', -30],
  [14.5, [mark('lid on', 12.2)], 'then rest', 330],
  [20.5, [mark('lid on', 12.2)], 'rest now', -30],
])('at %s min, with these marks, the next action is said', (minutes, marks, words, dueInS) => {
  expect(nextAction(factsWith({ marks }), at(minutes))).toEqual({ words, dueInS })
})

it('before and after the toast it says what the phase waits for', () => {
  expect(nextAction(factsWith({ state: 'preheating', toastMs: null, bendMs: null }), at(-18))).toEqual({
    words: 'then bend',
    dueInS: 180,
  })
  expect(nextAction(factsWith({ state: 'bending', toastMs: null }), at(-3))).toEqual({
    words: 'then toast',
    dueInS: 60,
  })
  expect(nextAction(factsWith({ state: 'resting', restMs: at(20) }), at(31)).words).toBe('finish now')
  expect(nextAction(factsWith({ state: 'finished' }), at(31))).toEqual({
    words: 'Nothing to do',
    dueInS: null,
  })
})
