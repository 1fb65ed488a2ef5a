import { describe, expect, it } from 'vitest'
import { canMoveAlarm } from '@/lib/alarms/alarm-states'
import { replayAlarms } from '@/lib/live/replay-alarms'
import { demoRecipes } from '@/simulators/scenarios/demo-recipes'
import type { HearthOptions } from '@/simulators/hearth/hearth'
import { sixNormalFirings } from '@/tests/bench/alarm-rate'
import type { PlayedFire } from '@/tests/support/six-fires'
import { playFire } from '@/tests/support/six-fires'

const content = demoRecipes[0]?.versions.at(-1)?.content
const options = { stepMs: 1_000, seenAfterMs: 12_000 }

function fire(engine: Partial<HearthOptions>, spoil: (fire: PlayedFire) => void = () => {}) {
  if (content === undefined) throw new Error('the demo has no recipes')
  const played = playFire(content, Date.UTC(2027, 1, 1, 7), { seed: 77, skill: 0.8, ...engine })
  spoil(played)
  const moves = replayAlarms(played.facts, played.series, options)
  const came = moves.filter((move) => move.to === 'unacknowledged').map((move) => move.kind)
  return { played, moves, came }
}

/** Changes the lead's readings from a minute of the toast on, for some seconds. */
function spoilLead(minute: number, seconds: number, tempC: (wasC: number, atS: number) => number) {
  return ({ facts, series }: PlayedFire) => {
    const fromMs = (facts.toastMs ?? 0) + minute * 60_000
    const lead = series.find((one) => one.role === 'lead')
    lead?.atMs.forEach((atMs, i) => {
      const atS = (atMs - fromMs) / 1000
      if (atS >= 0 && atS < seconds) lead.tempC[i] = tempC(lead.tempC[i] ?? NaN, atS)
    })
  }
}

it.each([1, 2])(
  'six normal firings together give their toaster at most one alarm in ten minutes (%s)',
  (seed) => {
    const rate = sixNormalFirings(seed)
    expect(rate.hours).toBeGreaterThan(1.5)
    expect(rate.perTenMin).toBeLessThanOrEqual(1)
  },
)

describe('a firing that runs off has the alarm that says so', () => {
  it.each<[string, Partial<HearthOptions>, string]>([
    ['a slow fire', { skill: 0.6, fuelQuality: 0.65 }, 'below band'],
    ['a damp lot', { skill: 0.6, moisturePercent: 28 }, 'below band'],
    ['a hand that forgets', { skill: 0.1 }, 'stage overrun'],
  ])('%s', (_what, engine, kind) => {
    expect(fire(engine).came).toContain(kind)
  })

  it.each<[string, (fire: PlayedFire) => void, string]>([
    ['wood over its maximum for half a minute', spoilLead(30, 30, (wasC) => wasC + 35), 'wood maximum'],
    ['a lead that came off', spoilLead(25, 60, () => NaN), 'no reading'],
    ['a probe that is stuck', spoilLead(25, 120, () => 185), 'no reading'],
    ['a loose plug', spoilLead(25, 60, (wasC, atS) => wasC + 70 + 60 * (atS % 3)), 'no reading'],
    [
      'a climb beyond its limit',
      spoilLead(25, 90, (wasC, atS) => wasC + Math.min(25, atS / 2)),
      'climb maximum',
    ],
    ['one side far hotter', spoilLead(25, 120, (wasC) => wasC - 20), 'spread'],
  ])('%s', (_what, spoil, kind) => {
    expect(fire({}, spoil).came).toContain(kind)
  })

  it('a short pull is said once and has to be seen', () => {
    const { came, moves } = fire({}, ({ facts }) => {
      facts.bendMs = (facts.toastMs ?? 0) - 5 * 60_000
    })
    expect(came.filter((kind) => kind === 'short pull')).toHaveLength(1)
    expect(moves.some((move) => move.kind === 'short pull' && move.isByHand)).toBe(true)
  })

  it('a peak that is over in three seconds has none', () => {
    expect(
      fire(
        {},
        spoilLead(30, 3, (wasC) => wasC + 35),
      ).came,
    ).not.toContain('wood maximum')
  })
})

it('a replay makes legal moves in time order, and leaves nothing on at the end', () => {
  const { moves, played } = fire({ skill: 0.1, fuelQuality: 0.6 })
  expect(moves.length).toBeGreaterThan(4)
  const stands = new Map<string, string>()
  let lastMs = 0
  for (const move of moves) {
    const key = `${move.kind}/${move.subject}`
    expect(move.from).toBe(stands.get(key) ?? 'normal')
    expect(canMoveAlarm(move.from, move.to)).toBe(true)
    expect(move.atMs).toBeGreaterThanOrEqual(lastMs)
    lastMs = move.atMs
    stands.set(key, move.to)
  }
  expect([...stands.values()].every((state) => state === 'normal' || state === 'suppressed')).toBe(true)
  expect(lastMs).toBeLessThanOrEqual(played.facts.endedMs ?? 0)
})
