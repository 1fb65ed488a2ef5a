import * as fc from 'fast-check'
import { expect, it } from 'vitest'
import { createPointFeed } from '@/components/live/point-feed'
import { createPointStream } from '@/lib/live/point-stream'
import type { RoleCurve } from '@/lib/live/role-curve'
import { createRoleCurve } from '@/lib/live/role-curve'
import { createRunningDose } from '@/lib/live/running-dose'
import { createDoseAccumulator } from '@/lib/science/heat-dose'
import { defaultSiteRules } from '@/lib/science/site-rules'

const seed = 55
const model = defaultSiteRules.dose
type Point = [atMs: number, tempC: number]
const points: fc.Arbitrary<Point[]> = fc.array(
  fc.tuple(
    fc.integer({ min: 0, max: 3_000 }).map((tick) => tick * 200),
    fc.oneof(
      { weight: 9, arbitrary: fc.double({ min: 60, max: 240, noNaN: true }) },
      { weight: 1, arbitrary: fc.constant(NaN) },
    ),
  ),
  { maxLength: 300 },
)

function listOf(curve: RoleCurve): Point[] {
  return Array.from({ length: curve.length }, (_, i): Point => [curve.atMs(i), curve.tempC(i)])
}

function curveOf(all: readonly Point[]): RoleCurve {
  const curve = createRoleCurve()
  for (const [atMs, tempC] of all) curve.put(atMs, tempC)
  return curve
}

it('a curve is in time order, one point an instant, the same for any order of arrival', () => {
  fc.assert(
    fc.property(points, fc.infiniteStream(fc.nat()), (all, keys) => {
      const list = listOf(curveOf(all))
      expect(list.map(([atMs]) => atMs)).toEqual(
        [...new Set(all.map(([atMs]) => atMs))].sort((a, b) => a - b),
      )
      const shuffled = all.map((point) => ({ point, key: keys.next().value })).sort((a, b) => a.key - b.key)
      expect(listOf(curveOf(shuffled.map(({ point }) => point)))).toEqual(list)
      expect(listOf(curveOf([...all, ...all]))).toEqual(list)
    }),
    { seed, numRuns: 200 },
  )
})

it('a running dose is bit for bit that of the whole curve, however late its readings come', () => {
  const toastMs = 100_000
  fc.assert(
    fc.property(points, fc.option(fc.integer({ min: 200_000, max: 600_000 })), (all, restMs) => {
      const window = { toastMs, restMs }
      const gapMsOf = () => 3_000
      const grown = createRoleCurve()
      const running = createRunningDose(model, gapMsOf)
      running.setWindow(window)
      for (const [atMs, tempC] of all) {
        if (grown.put(atMs, tempC) !== 'appended') running.touch(grown.indexFrom(atMs))
        running.advance(grown)
      }
      const whole = createRunningDose(model, gapMsOf)
      whole.setWindow(window)
      expect(running.advance(grown)).toBe(whole.advance(curveOf(all)))
    }),
    { seed, numRuns: 200 },
  )
})

it('readings before the toast and after the rest add nothing', () => {
  const readings: Point[] = Array.from({ length: 600 }, (_, i) => [i * 1_000, 180])
  const running = createRunningDose(model, () => 3_000)
  running.setWindow({ toastMs: 100_000, restMs: 400_000 })
  const minutes = running.advance(curveOf(readings))
  const plain = createDoseAccumulator(model)
  for (let s = 0; s <= 300; s += 1) plain.add(s, 180)
  expect(minutes).toBeCloseTo(plain.minutes, 12)
})

it("a viewer's feed holds the same curve, and the newest of two values at one instant", () => {
  fc.assert(
    fc.property(points, (all) => {
      const feed = createPointFeed()
      const newest = new Map<number, number>()
      for (const [atMs, tempC] of all) {
        feed.put(atMs, tempC)
        newest.set(atMs, tempC)
      }
      const ats = [...newest.keys()].sort((a, b) => a - b)
      expect(Array.from(feed.atMs())).toEqual(ats)
      expect(Array.from(feed.tempC())).toEqual(ats.map((atMs) => newest.get(atMs)))
    }),
    { seed, numRuns: 200 },
  )
})

it('a feed that is full lets the oldest go and keeps the newest', () => {
  const feed = createPointFeed(4_000)
  for (let i = 0; i < 50_000; i += 1) feed.put(i, i / 10)
  expect(feed.length).toBeLessThanOrEqual(8_000)
  expect(feed.length).toBeGreaterThanOrEqual(3_500)
  expect(feed.atMs().at(-1)).toBe(49_999)
  expect(feed.tempC().at(0)).toBe((feed.atMs().at(0) ?? 0) / 10)
})

it('a stream gives every point once, between any two numbers', () => {
  const stream = createPointStream()
  for (let i = 0; i < 10_000; i += 1)
    stream.push(i % 2 === 0 ? 'lead' : 'opposite', i * 100, i === 7 ? NaN : i / 50)
  expect(stream.between(-1, stream.lastIndex)).toHaveLength(10_000)
  const parts = [
    stream.between(-1, 99),
    stream.between(99, 5_000),
    stream.between(5_000, stream.lastIndex),
  ].flat()
  expect(parts.map(([index]) => index)).toEqual(Array.from({ length: 10_000 }, (_, i) => i))
  expect(parts[7]).toEqual([7, 'opposite', 700, null])
})
