import erfc from '@stdlib/math-base-special-erfc'
import { createHash } from 'node:crypto'
import { crc32 } from 'node:zlib'
import { describe, expect } from 'vitest'
import { expectClose, numbersShape, testPublished } from './published-checks'
import * as z from 'zod'

/** Kept code that the product builds on without a function of its own around it. */
describe('kept code gives the published values', () => {
  testPublished('special.erf', (check) => {
    const expected = numbersShape.parse(check.expected)
    numbersShape.parse(check.inputs.x).forEach((x, i) => expectClose(check, 1 - erfc(x), expected[i] ?? NaN))
  })
  testPublished('hash.sha256_hex', (check) => {
    const texts = z.array(z.string()).parse(check.inputs.text)
    expect(texts.map((text) => createHash('sha256').update(text).digest('hex'))).toEqual(check.expected)
  })
  testPublished('crc32_ieee', (check) => {
    expect(`0x${crc32(z.string().parse(check.inputs.ascii)).toString(16)}`).toBe(check.expected)
  })
})
