import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { gatewayConfigSchema, type ChannelConfig } from '@/lib/gateway/config'
import type { RegisterTable } from '@/lib/gateway/poll-plan'
import { readingSchema } from '@/lib/gateway/protocol'
import { readChannel } from '@/lib/gateway/read-channel'
import { encodeRegisters } from '@/lib/gateway/registers'

const PROBE = '8f14e45f-ceea-467f-a1b2-0c5d6e7f8a9b'
const channelSchema = gatewayConfigSchema.shape.modules.element.shape.channels.element

function channelOf(fields: object): ChannelConfig {
  return channelSchema.parse({ probeId: PROBE, table: 'input', address: 0, type: 'int16', ...fields })
}

/** A module whose registers are those given, and no others. */
function image(words: Record<string, readonly number[]>) {
  const held = new Map<string, number>()
  for (const [start, list] of Object.entries(words)) {
    const [table, address] = start.split('/')
    list.forEach((word, i) => held.set(`${table}/${Number(address) + i}`, word))
  }
  return (table: RegisterTable, address: number, count: number) => {
    const list = Array.from({ length: count }, (_, i) => held.get(`${table}/${address + i}`))
    return list.every((word) => word !== undefined) ? list : null
  }
}

describe('a temperature channel', () => {
  const channel = channelOf({
    kind: 'temperature',
    scale: 0.1,
    offset: -50,
    errorCodes: [
      { raw: 32_767, means: 'open' },
      { from: -32_768, to: -32_000, means: 'short' },
    ],
  })
  const readWord = (word: number) => readChannel(channel, image({ 'input/0': [word & 0xffff] }))

  it('is scaled, then shifted', () => {
    expect(readWord(2_345)).toEqual({ tempC: 2_345 * 0.1 - 50 })
    expect(readWord(-10)).toEqual({ tempC: -51 })
  })

  it('an error code is its fault and carries no number', () => {
    expect(readWord(32_767)).toEqual({ flag: 'open' })
    expect(readWord(-32_768)).toEqual({ flag: 'short' })
    expect(readWord(-32_000)).toEqual({ flag: 'short' })
    // No code any more, but colder than cold: -3249.9 °C.
    expect(readWord(-31_999)).toEqual({ flag: 'fault' })
  })

  it('registers that could not be read are a fault', () => {
    expect(readChannel(channel, image({}))).toEqual({ flag: 'fault' })
  })
})

describe('a float channel', () => {
  const channel = channelOf({
    kind: 'temperature',
    type: 'float32',
    wordOrder: 'little',
    errorCodes: [{ raw: 9_999.9, means: 'open' }],
  })
  const readFloat = (value: number) =>
    readChannel(channel, image({ 'input/0': encodeRegisters(value, 'float32', 'little') }))

  it('gives its number; what is none, or beyond everything, is a fault', () => {
    expect(readFloat(187.25)).toEqual({ tempC: 187.25 })
    for (const value of [NaN, Infinity, -Infinity, 1e30, 3_001]) {
      expect(readFloat(value)).toEqual({ flag: 'fault' })
    }
  })

  it('an error code that 32 bits do not hold exactly is still met', () => {
    expect(readFloat(9_999.9)).toEqual({ flag: 'open' })
  })
})

describe('a microvolts channel', () => {
  const coldJunction = {
    table: 'holding',
    address: 7,
    type: 'int16',
    scale: 0.01,
    errorCodes: [{ raw: -1, means: 'fault' }],
  }
  const channel = channelOf({
    kind: 'microvolts',
    type: 'int32',
    wordOrder: 'mixed',
    scale: 0.1,
    coldJunction,
  })
  const words = encodeRegisters(81_235, 'int32', 'mixed')

  it('comes with the temperature of its terminals', () => {
    const read = readChannel(channel, image({ 'input/0': words, 'holding/7': [2_462] }))
    expect(read).toEqual({ emf: { microvolts: 81_235 * 0.1, coldJunctionC: 2_462 * 0.01 } })
  })

  it('without a cold junction there is no reading', () => {
    expect(readChannel(channel, image({ 'input/0': words }))).toEqual({ flag: 'fault' })
    expect(readChannel(channel, image({ 'input/0': words, 'holding/7': [0xffff] }))).toEqual({
      flag: 'fault',
    })
    expect(readChannel(channel, image({ 'input/0': words, 'holding/7': [30_000] }))).toEqual({
      flag: 'fault',
    })
  })

  it('a reference that is held at a temperature is taken as given', () => {
    const ice = channelOf({ kind: 'microvolts', scale: 1, coldJunction: { fixedC: 0 } })
    expect(readChannel(ice, image({ 'input/0': [4_096] }))).toEqual({
      emf: { microvolts: 4_096, coldJunctionC: 0 },
    })
  })

  it('a voltage that no thermocouple gives is a fault', () => {
    const huge = encodeRegisters(2_147_483_000, 'int32', 'mixed')
    expect(readChannel(channel, image({ 'input/0': huge, 'holding/7': [2_462] }))).toEqual({ flag: 'fault' })
  })
})

describe('status bits', () => {
  const status = {
    table: 'input',
    address: 9,
    bits: [
      { bit: 3, means: 'short' },
      { bit: 0, means: 'open' },
    ],
  }
  const channel = channelOf({ kind: 'temperature', scale: 0.1, status })
  const withStatus = (word: number) => readChannel(channel, image({ 'input/0': [1_000], 'input/9': [word] }))

  it('the first listed bit that is set counts, and others are not looked at', () => {
    expect(withStatus(0)).toEqual({ tempC: 100 })
    expect(withStatus(0b0010)).toEqual({ tempC: 100 })
    expect(withStatus(0b0001)).toEqual({ flag: 'open' })
    expect(withStatus(0b1001)).toEqual({ flag: 'short' })
  })

  it('a status that could not be read is a fault, whatever the value says', () => {
    expect(readChannel(channel, image({ 'input/0': [1_000] }))).toEqual({ flag: 'fault' })
  })
})

it('whatever the registers hold, the reading fits the protocol and is a value or a flag, never both', () => {
  const word = fc.integer({ min: 0, max: 0xffff })
  const channels = fc.constantFrom(
    channelOf({ kind: 'temperature', type: 'float32' }),
    channelOf({
      kind: 'temperature',
      type: 'int16',
      scale: 1,
      errorCodes: [{ from: 20_000, to: 32_767, means: 'open' }],
    }),
    channelOf({ kind: 'temperature', type: 'uint16', scale: -0.1, offset: 400 }),
    channelOf({
      kind: 'microvolts',
      type: 'int32',
      scale: 0.1,
      coldJunction: { table: 'input', address: 4, type: 'float32', wordOrder: 'mixed' },
    }),
  )
  fc.assert(
    fc.property(channels, fc.array(word, { minLength: 8, maxLength: 8 }), (channel, words) => {
      const value = readChannel(channel, image({ 'input/0': words }))
      expect(Number('flag' in value) + Number('tempC' in value) + Number('emf' in value)).toBe(1)
      readingSchema.parse({ seq: 1, probeId: PROBE, at: '2026-02-01T10:00:00.000Z', ...value })
    }),
    { seed: 20260212, numRuns: 300 },
  )
})
