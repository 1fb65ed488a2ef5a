import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  decodeRegisters,
  encodeRegisters,
  registerCount,
  registerRange,
  registerTypes,
  wordOrders,
  type RegisterType,
} from '@/lib/gateway/registers'

const SEED = 20260210

function valuesOf(type: RegisterType): fc.Arbitrary<number> {
  if (type === 'float32') return fc.float({ noNaN: true })
  const [min, max] = registerRange(type)
  return fc.oneof(fc.integer({ min, max }), fc.constantFrom(min, max, Math.max(min, -1), 0, 1))
}

describe('registers', () => {
  describe.each(registerTypes)('%s', (type) => {
    it.each(wordOrders)('is read back as it was written, in the order %s', (order) => {
      fc.assert(
        fc.property(valuesOf(type), (value) => {
          const words = encodeRegisters(value, type, order)
          expect(words).toHaveLength(registerCount(type))
          expect(decodeRegisters(words, type, order)).toBe(value)
        }),
        { seed: SEED, numRuns: 200 },
      )
    })

    it.each(wordOrders)(
      'takes any words, and gives them back when they are written again, in the order %s',
      (order) => {
        const word = fc.integer({ min: 0, max: 0xffff })
        const words = fc.array(word, { minLength: registerCount(type), maxLength: registerCount(type) })
        fc.assert(
          fc.property(words, (given) => {
            const value = decodeRegisters(given, type, order)
            fc.pre(!Number.isNaN(value))
            expect(encodeRegisters(value, type, order)).toEqual(given)
          }),
          { seed: SEED, numRuns: 200 },
        )
      },
    )
  })

  it('the orders lie as their letters say', () => {
    // 0x41424344 is A B C D.
    const lies = Object.fromEntries(wordOrders.map((order) => [order, lettersOf('int32', order)]))
    expect(lies).toEqual({ big: 'ABCD', little: 'DCBA', mixed: 'CDAB', 'byte-swapped': 'BADC' })
    const one = Object.fromEntries(wordOrders.map((order) => [order, lettersOf('uint16', order)]))
    expect(one).toEqual({ big: 'AB', little: 'BA', mixed: 'AB', 'byte-swapped': 'BA' })
  })

  function lettersOf(type: RegisterType, order: (typeof wordOrders)[number]): string {
    const value = registerCount(type) === 2 ? 0x41424344 : 0x4142
    const words = encodeRegisters(value, type, order)
    return words.map((word) => String.fromCharCode(word >> 8, word & 0xff)).join('')
  }

  it('the numbers of IEEE 754 and two’s complement come out as known', () => {
    // 123.456 in single precision is 0x42f6e979 (IEEE 754 binary32).
    expect(decodeRegisters([0x42f6, 0xe979], 'float32', 'big')).toBe(Math.fround(123.456))
    expect(decodeRegisters([0xffff], 'int16', 'big')).toBe(-1)
    expect(decodeRegisters([0x8000], 'int16', 'big')).toBe(-32_768)
    expect(decodeRegisters([0xfffe, 0xffff], 'int32', 'mixed')).toBe(-2)
    expect(decodeRegisters([0x7fc0, 0], 'float32', 'big')).toBeNaN()
  })

  it('refuses too few and too many words', () => {
    expect(() => decodeRegisters([1], 'int32', 'big')).toThrow(RangeError)
    expect(() => decodeRegisters([1, 2], 'uint16', 'big')).toThrow('words')
  })
})
