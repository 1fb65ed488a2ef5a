import { randomUUID } from 'node:crypto'
import * as fc from 'fast-check'
import { expect, it } from 'vitest'
import { ingestEnvelopeSchema, readingSchema } from '@/lib/gateway/protocol'
import { readEnvelope } from '@/lib/ingest/read-envelope'
import type { ReadingCells } from '@/lib/ingest/read-reading'
import { readReading } from '@/lib/ingest/read-reading'

const seed = 41
const probeId = randomUUID()

const instants = fc.oneof(
  fc
    .date({ min: new Date('1999-01-01'), max: new Date('2099-01-01'), noInvalidDate: true })
    .map((at) => at.toISOString()),
  fc.constantFrom(
    '2026-03-01T10:00:00.000Z',
    '2026-03-01T23:59:60.000Z',
    '2026-03-01T24:00:00.000Z',
    '2026-02-30T10:00:00.000Z',
    '2026-03-01T10:00:00+02:00',
    '2026-03-01T10:00:00.1234567Z',
    '2026-03-01 10:00:00.000Z',
    '2026-03-01T1a:00:00.000Z',
    '2026-03-01',
    '',
  ),
  fc.string({ maxLength: 24 }),
)
const numbers = fc.oneof(
  fc.double({ noDefaultInfinity: true }),
  fc.double({ min: -4_000, max: 4_000 }),
  fc.constantFrom(
    -200_000,
    200_000,
    200_000.01,
    -300,
    3_000,
    3_000.5,
    -60,
    125,
    125.01,
    NaN,
    Infinity,
    null,
    '12',
  ),
)
const emfs = fc.oneof(
  fc.record({ microvolts: numbers, coldJunctionC: numbers }, { requiredKeys: [] }),
  fc.record({ microvolts: numbers, coldJunctionC: numbers, more: numbers }),
  fc.constantFrom(null, [], 'x', { microvolts: 12.34, coldJunctionC: 20 }),
)
const anything = fc.record(
  {
    seq: fc.nat(),
    probeId: fc.oneof(
      fc.constantFrom(probeId, probeId.toUpperCase(), `${probeId}0`, probeId.slice(1), 'x'.repeat(36), 5),
      fc.uuid(),
    ),
    at: instants,
    emf: emfs,
    tempC: numbers,
    flag: fc.constantFrom('open', 'short', 'fault', 'closed', '', null, 1),
    extra: fc.anything(),
  },
  { requiredKeys: ['seq'] },
)

/** Right but for what chance changes of it, so that both sides of every bound are met. */
const nearlyRight = fc
  .record({ seq: fc.nat(), probeId: fc.constant(probeId), at: fc.constant('2026-03-01T10:00:00.000Z') })
  .chain((base) =>
    fc.oneof(
      fc.record({ emf: emfs }).map((more) => ({ ...base, ...more })),
      fc.record({ tempC: numbers }).map((more) => ({ ...base, ...more })),
      fc.record({ flag: fc.constantFrom('open', 'short', 'fault') }).map((more) => ({ ...base, ...more })),
      fc
        .record({ at: instants, tempC: fc.double({ min: -300, max: 3_000, noNaN: true }) })
        .map((more) => ({ ...base, ...more })),
    ),
  )
const readings = fc.oneof(anything, nearlyRight)

function emptyCells(): ReadingCells {
  return { probeId: '', atMs: 0, emfTenthUv: null, coldCentiC: null, tempCentiC: null, flag: 0 }
}

it('a reading read by hand is taken or refused exactly as the schema says, with the same values', () => {
  let taken = 0
  fc.assert(
    fc.property(readings, (reading) => {
      const cells = emptyCells()
      const fault = readReading(reading, cells)
      const parsed = readingSchema.safeParse(reading)
      expect(fault === null).toBe(parsed.success)
      if (!parsed.success) return
      taken += 1
      const { emf, tempC, flag, at } = parsed.data
      expect(cells).toEqual({
        probeId: parsed.data.probeId.toLowerCase(),
        atMs: Date.parse(at),
        emfTenthUv: emf === undefined ? null : Math.round(emf.microvolts * 10),
        coldCentiC: emf === undefined ? null : Math.round(emf.coldJunctionC * 100),
        tempCentiC: tempC === undefined ? null : Math.round(tempC * 100),
        flag: flag === undefined ? 0 : { open: 1, short: 2, fault: 3 }[flag],
      })
    }),
    { seed, numRuns: 6_000 },
  )
  expect(taken).toBeGreaterThan(200)
})

it('a usual reading, its instant moved about its day, keeps its millisecond', () => {
  const day = Date.parse('2026-03-01T00:00:00.000Z')
  fc.assert(
    fc.property(
      fc.integer({ min: 0, max: 2 * 86_400_000 - 1 }),
      fc.double({ min: -200_000, max: 200_000, noNaN: true }),
      (ms, microvolts) => {
        const cells = emptyCells()
        const at = new Date(day + ms).toISOString()
        const reading = { seq: 1, probeId, at, emf: { microvolts, coldJunctionC: 20 } }
        expect(readReading(reading, cells)).toBeNull()
        expect(cells.atMs).toBe(day + ms)
      },
    ),
    { seed, numRuns: 2_000 },
  )
})

it('the frame of a message is taken or refused exactly as its schema says', () => {
  const messages = fc.record(
    {
      bootId: fc.oneof(fc.uuid(), fc.constant('x'), fc.constant(3)),
      sentAt: instants,
      readings: fc.oneof(
        fc.array(
          fc.oneof(
            readings,
            fc.constant({}),
            fc.constant(null),
            fc.constant({ seq: -1 }),
            fc.constant({ seq: 1.5 }),
          ),
          { maxLength: 4 },
        ),
        fc.constant('none'),
      ),
      lost: fc.oneof(
        fc.constant(undefined),
        fc.array(
          fc.record({
            from: fc.integer({ min: -1, max: 9 }),
            to: fc.nat(9),
            reason: fc.string({ maxLength: 3 }),
          }),
          { maxLength: 3 },
        ),
      ),
    },
    { requiredKeys: [] },
  )
  fc.assert(
    fc.property(messages, (message) => {
      let isTaken = true
      try {
        readEnvelope(message)
      } catch {
        isTaken = false
      }
      expect(isTaken).toBe(ingestEnvelopeSchema.safeParse(message).success)
    }),
    { seed, numRuns: 2_000 },
  )
})
