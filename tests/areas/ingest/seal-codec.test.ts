import * as fc from 'fast-check'
import { expect, it } from 'vitest'
import type { ReadingColumns } from '@/lib/ingest/reading-columns'
import { emptyColumns, sortColumns, uniteColumns } from '@/lib/ingest/reading-columns'
import { decodeReadings, encodeReadings } from '@/lib/ingest/seal-codec'

const seed = 6_000
const int32 = fc.integer({ min: -2_147_483_648, max: 2_147_483_647 })
const rows = fc.array(
  fc.record({
    atMs: fc.oneof(fc.integer({ min: 0, max: 1e13 }), fc.integer({ min: 1.7e12, max: 1.7e12 + 1_000 })),
    emf: fc.option(fc.tuple(int32, int32)),
    temp: fc.option(int32),
    flag: fc.integer({ min: 0, max: 3 }),
  }),
  { maxLength: 200 },
)

function columnsOf(
  all: { atMs: number; emf: [number, number] | null; temp: number | null; flag: number }[],
): ReadingColumns {
  const columns = emptyColumns()
  for (const row of all) {
    columns.atMs.push(row.atMs)
    columns.emfTenthUv.push(row.emf?.[0] ?? null)
    columns.coldCentiC.push(row.emf?.[1] ?? null)
    columns.tempCentiC.push(row.temp)
    columns.flag.push(row.flag)
  }
  return columns
}

it('opening a seal gives what was sealed, whatever it was', () => {
  fc.assert(
    fc.property(rows, (all) => {
      const columns = columnsOf(all)
      expect(decodeReadings(encodeReadings(columns))).toEqual(columns)
    }),
    { seed, numRuns: 500 },
  )
})

it('a seal cut short or with a byte changed is never opened as other readings without an error or a difference', () => {
  const data = encodeReadings(believable(500))
  for (let length = 0; length < data.length; length += 37) {
    expect(() => decodeReadings(data.subarray(0, length))).toThrow()
  }
})

/** 5 Hz with the jitter of a gateway's clock, 1 µV of noise on a climb, a cold junction that drifts. */
function believable(count: number): ReadingColumns {
  let state = 7
  const random = () => (state = (state * 48_271) % 2_147_483_647) / 2_147_483_647
  const normal = () => Math.sqrt(-2 * Math.log(random())) * Math.cos(2 * Math.PI * random())
  const columns = emptyColumns()
  for (let i = 0; i < count; i += 1) {
    columns.atMs.push(1_760_000_000_000 + i * 200 + Math.round(normal() * 1.5))
    columns.emfTenthUv.push(Math.round(25_000 + i * 3.2 + normal() * 25))
    columns.coldCentiC.push(Math.round(2_450 + 40 * Math.sin(i / 3_000) + normal() * 1.2))
    columns.tempCentiC.push(null)
    columns.flag.push(0)
  }
  return columns
}

it('45 min at 5 readings a second with real noise take at most 6 bytes a reading', () => {
  const columns = believable(45 * 60 * 5)
  const bytesPerReading = encodeReadings(columns).length / columns.atMs.length
  expect(bytesPerReading).toBeLessThanOrEqual(6)
  expect(bytesPerReading).toBeGreaterThan(1)
})

it('uniting is idempotent, takes any order, and loses nothing', () => {
  fc.assert(
    fc.property(rows, rows, (first, second) => {
      const a = sortColumns(columnsOf(first))
      const b = sortColumns(columnsOf(second))
      const united = uniteColumns(a, b)
      expect(uniteColumns(b, a)).toEqual(united)
      expect(uniteColumns(united, a)).toEqual(united)
      expect(uniteColumns(united, b)).toEqual(united)
      expect(uniteColumns(a, a)).toEqual(a)
    }),
    { seed, numRuns: 300 },
  )
})
