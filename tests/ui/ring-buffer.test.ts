import fc from 'fast-check'
import { expect, test } from 'vitest'
import { createRingBuffer } from '@/components/chart/ring-buffer'

const rows = fc.array(fc.tuple(fc.integer({ min: 0, max: 60 }), fc.integer({ min: -100, max: 300 })), {
  maxLength: 200,
})

/** What a ring must hold, said plainly: keys in order, the latest value of each, the newest `capacity` of them. */
function expected(puts: readonly (readonly [number, number])[], capacity: number): [number, number][] {
  let held: [number, number][] = []
  for (const [key, value] of puts) {
    const isKnown = held.some(([each]) => each === key)
    const isTooOld = held.length === capacity && key < (held[0]?.[0] ?? -Infinity)
    if (!isKnown && isTooOld) continue
    held = [...held.filter(([each]) => each !== key), [key, value] as [number, number]]
      .sort((a, b) => a[0] - b[0])
      .slice(-capacity)
  }
  return held
}

test('a ring holds the newest rows in order of time, each time once, whatever order they come in', () => {
  fc.assert(
    fc.property(rows, fc.integer({ min: 1, max: 40 }), (puts, capacity) => {
      const ring = createRingBuffer(capacity, 2)
      for (const put of puts) ring.put(put)
      const held = expected(puts, capacity)
      expect([...ring.column(0)]).toEqual(held.map(([key]) => key))
      expect([...ring.column(1)]).toEqual(held.map(([, value]) => value))
      expect(ring.length()).toBe(held.length)
    }),
    { seed: 4_310, numRuns: 1_000 },
  )
})

test('putting everything twice changes nothing', () => {
  fc.assert(
    fc.property(rows, (puts) => {
      const once = createRingBuffer(500, 2)
      const twice = createRingBuffer(500, 2)
      for (const put of puts) once.put(put)
      for (const put of puts) twice.put(put)
      for (const put of puts) twice.put(put)
      expect([...twice.column(0)]).toEqual([...once.column(0)])
      expect([...twice.column(1)]).toEqual([...once.column(1)])
    }),
    { seed: 4_310, numRuns: 300 },
  )
})

test('a column is one contiguous view of the store, also after the ring has turned', () => {
  const ring = createRingBuffer(4, 1)
  for (let i = 0; i < 11; i += 1) ring.put([i])
  const view = ring.column(0)
  expect([...view]).toEqual([7, 8, 9, 10])
  expect(view.buffer.byteLength).toBe(4 * 2 * 8)
})

test('a row without a time is not taken, and a missing value is no reading', () => {
  const ring = createRingBuffer(4, 2)
  ring.put([NaN, 1])
  ring.put([5])
  expect(ring.length()).toBe(1)
  expect(ring.column(1)[0]).toBeNaN()
})

test('sizes that make no sense are refused by name', () => {
  expect(() => createRingBuffer(0, 2)).toThrow(new RangeError('capacity'))
  expect(() => createRingBuffer(2, 1.5)).toThrow(new RangeError('columnCount'))
})
