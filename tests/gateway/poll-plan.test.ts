import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { planReads, type RegisterSpan } from '@/lib/gateway/poll-plan'

const SEED = 20260211

const spans: fc.Arbitrary<RegisterSpan[]> = fc.array(
  fc.record({
    table: fc.constantFrom('input' as const, 'holding' as const),
    address: fc.integer({ min: 0, max: 400 }),
    count: fc.integer({ min: 1, max: 2 }),
  }),
  { maxLength: 60 },
)

function registersOf(list: readonly RegisterSpan[]): string[] {
  return list.flatMap(({ table, address, count }) =>
    Array.from({ length: count }, (_, i) => `${table}/${address + i}`),
  )
}

describe('the plan of reads', () => {
  it('covers each wanted register exactly once, and without gaps allowed no other', () => {
    fc.assert(
      fc.property(spans, (wanted) => {
        const read = registersOf(planReads(wanted))
        expect(new Set(read).size).toBe(read.length)
        expect(new Set(read)).toEqual(new Set(registersOf(wanted)))
      }),
      { seed: SEED, numRuns: 300 },
    )
  })

  it('keeps every number whole, blocks within the limit, and gaps within theirs', () => {
    fc.assert(
      fc.property(
        spans,
        fc.integer({ min: 2, max: 125 }),
        fc.integer({ min: 0, max: 20 }),
        (given, mostRegisters, mostGapRegisters) => {
          // Numbers that cover half of one another are refused by the configuration; here they would unite.
          const wanted = given.map((span) => ({ ...span, address: 2 * span.address }))
          const blocks = planReads(wanted, { mostRegisters, mostGapRegisters })
          const read = registersOf(blocks)
          expect(new Set(read).size).toBe(read.length)
          for (const block of blocks) expect(block.count).toBeLessThanOrEqual(mostRegisters)
          for (const span of wanted) {
            const holders = blocks.filter(
              (block) =>
                block.table === span.table &&
                block.address <= span.address &&
                span.address + span.count <= block.address + block.count,
            )
            expect(holders).toHaveLength(1)
          }
          const asked = new Set(registersOf(wanted))
          const along = read.filter((register) => !asked.has(register))
          expect(along.length).toBeLessThanOrEqual(mostGapRegisters * wanted.length)
        },
      ),
      { seed: SEED, numRuns: 300 },
    )
  })

  it('neighbours are one request, tables never mix, and a gap is read along only where allowed', () => {
    const wanted: RegisterSpan[] = [
      { table: 'input', address: 4, count: 2 },
      { table: 'input', address: 0, count: 2 },
      { table: 'input', address: 2, count: 2 },
      { table: 'input', address: 9, count: 1 },
      { table: 'holding', address: 6, count: 1 },
    ]
    expect(planReads(wanted)).toEqual([
      { table: 'holding', address: 6, count: 1 },
      { table: 'input', address: 0, count: 6 },
      { table: 'input', address: 9, count: 1 },
    ])
    expect(planReads(wanted, { mostGapRegisters: 3 })).toEqual([
      { table: 'holding', address: 6, count: 1 },
      { table: 'input', address: 0, count: 10 },
    ])
  })

  it('a span that fits no request is refused', () => {
    expect(() => planReads([{ table: 'input', address: 0, count: 2 }], { mostRegisters: 1 })).toThrow(
      RangeError,
    )
  })
})
