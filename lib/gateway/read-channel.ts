import type { ChannelConfig, ErrorCode } from './config'
import type { RegisterTable } from './poll-plan'
import { emfSchema, readingSchema, type Reading, type ReadingFlag } from './protocol'
import { decodeRegisters, registerCount, type RegisterType, type WordOrder } from './registers'

/** What a module's registers held at one poll; null where they could not be read. */
export type RegisterImage = (table: RegisterTable, address: number, count: number) => readonly number[] | null

/** What one channel said: a voltage with its cold junction, a temperature, or why there is none. */
export type ChannelValue = Pick<Reading, 'emf' | 'tempC' | 'flag'>

type CodedRegister = { type: RegisterType; errorCodes: readonly ErrorCode[] }
type RegisterConfig = { table: RegisterTable; address: number; type: RegisterType; wordOrder: WordOrder }

/**
 * One channel's value from the registers of its module. A flagged one carries no number: what a module shows beside
 * an error code means nothing. Unread registers, a float that is no number and values beyond what the server takes
 * are a fault.
 */
export function readChannel(channel: ChannelConfig, image: RegisterImage): ChannelValue {
  const raw = readRegister(channel, image)
  const flag = statusFlag(channel.status, image) ?? (raw === null ? 'fault' : errorFlag(channel, raw))
  if (flag !== null || raw === null) return { flag: flag ?? 'fault' }
  if (channel.kind === 'temperature') {
    const tempC = raw * channel.scale + channel.offset
    return readingSchema.shape.tempC.safeParse(tempC).success ? { tempC } : { flag: 'fault' }
  }
  const coldJunctionC = readColdJunction(channel.coldJunction, image)
  if (coldJunctionC === null) return { flag: 'fault' }
  const emf = emfSchema.safeParse({ microvolts: raw * channel.scale, coldJunctionC })
  return emf.success ? { emf: emf.data } : { flag: 'fault' }
}

type ColdJunction = Extract<ChannelConfig, { kind: 'microvolts' }>['coldJunction']

function readColdJunction(coldJunction: ColdJunction, image: RegisterImage): number | null {
  if ('fixedC' in coldJunction) return coldJunction.fixedC
  const raw = readRegister(coldJunction, image)
  if (raw === null || errorFlag(coldJunction, raw) !== null) return null
  return raw * coldJunction.scale + coldJunction.offset
}

function readRegister(register: RegisterConfig, image: RegisterImage): number | null {
  const words = image(register.table, register.address, registerCount(register.type))
  if (words === null) return null
  const raw = decodeRegisters(words, register.type, register.wordOrder)
  return Number.isFinite(raw) ? raw : null
}

function statusFlag(status: ChannelConfig['status'], image: RegisterImage): ReadingFlag | null {
  if (status === undefined) return null
  const word = image(status.table, status.address, 1)?.[0]
  if (word === undefined) return 'fault'
  return status.bits.find(({ bit }) => ((word >> bit) & 1) === 1)?.means ?? null
}

function errorFlag({ errorCodes, type }: CodedRegister, raw: number): ReadingFlag | null {
  const code = errorCodes.find((one) => {
    if ('raw' in one) return raw === (type === 'float32' ? Math.fround(one.raw) : one.raw)
    return raw >= one.from && raw <= one.to
  })
  return code?.means ?? null
}
