import { spansOfChannel, type ChannelConfig, type ModuleConfig } from '@/lib/gateway/config'
import type { RegisterTable } from '@/lib/gateway/poll-plan'
import type { ChannelValue } from '@/lib/gateway/read-channel'
import { encodeRegisters, registerRange, type RegisterType, type WordOrder } from '@/lib/gateway/registers'
import type { ReadingFlag } from '@/lib/gateway/protocol'
import { startModbusServer, type ModbusRequest, type ModbusServer } from './modbus-server'

/*
 * A thermocouple module for tests and for the demo: it holds in its registers what it is told, laid out as the
 * gateway program's own configuration of a module says, so that one register map serves both ends.
 */

export type SimulatedModule = Omit<ModbusServer, 'close'> & {
  /** Puts values into the registers, all of them before the next question is answered. */
  show: (values: ReadonlyMap<string, ChannelValue>) => void
  /** Puts one register as it is. */
  setRegister: (table: RegisterTable, address: number, word: number) => void
  close: () => Promise<void>
}

type ModuleOptions = {
  /** `host` and `port` are not looked at: it listens on loopback, on `port` below or any that is free. */
  config: Pick<ModuleConfig, 'channels' | 'unitId'>
  port?: number
  onAnswered?: (request: ModbusRequest) => void
}

/** Until it is told a value a channel shows an open circuit, as a terminal with nothing on it. */
export async function startSimulatedModule(options: ModuleOptions): Promise<SimulatedModule> {
  const { config, port, onAnswered } = options
  const words = new Map<string, number>()
  const put = (table: RegisterTable, address: number, list: readonly number[]) => {
    list.forEach((word, i) => words.set(`${table}/${address + i}`, word))
  }
  for (const span of config.channels.flatMap(spansOfChannel)) {
    put(span.table, span.address, new Array<number>(span.count).fill(0))
  }
  for (const channel of config.channels) showChannel(channel, { flag: 'open' }, put, words)
  const server = await startModbusServer({
    unitId: config.unitId,
    register: (table, address) => words.get(`${table}/${address}`) ?? null,
    ...(port === undefined ? {} : { port }),
    ...(onAnswered === undefined ? {} : { onAnswered }),
  })
  return {
    ...server,
    show: (values) => {
      for (const channel of config.channels) {
        const value = values.get(channel.probeId)
        if (value !== undefined) showChannel(channel, value, put, words)
      }
    },
    setRegister: (table, address, word) => put(table, address, [word]),
  }
}

type Put = (table: RegisterTable, address: number, words: readonly number[]) => void

function showChannel(channel: ChannelConfig, value: ChannelValue, put: Put, words: Map<string, number>) {
  showStatus(channel, value.flag, put, words)
  const { table, address, type, wordOrder } = channel
  if (value.flag !== undefined) {
    const raw = errorValue(channel, value.flag)
    if (raw !== null) put(table, address, encodeRegisters(raw, type, wordOrder))
    return
  }
  if (channel.kind === 'temperature') {
    if (value.tempC === undefined)
      throw new RangeError(`${channel.probeId}: this channel shows a temperature`)
    put(table, address, wordsFor((value.tempC - channel.offset) / channel.scale, type, wordOrder))
    return
  }
  if (value.emf === undefined) throw new RangeError(`${channel.probeId}: this channel shows a voltage`)
  put(table, address, wordsFor(value.emf.microvolts / channel.scale, type, wordOrder))
  const { coldJunction } = channel
  if (!('table' in coldJunction)) return
  const raw = (value.emf.coldJunctionC - coldJunction.offset) / coldJunction.scale
  put(coldJunction.table, coldJunction.address, wordsFor(raw, coldJunction.type, coldJunction.wordOrder))
}

/** The register holds whole steps, and its end values beyond its range; a float holds the value itself. */
function wordsFor(raw: number, type: RegisterType, wordOrder: WordOrder): number[] {
  const [least, greatest] = registerRange(type)
  const held = type === 'float32' ? raw : Math.round(raw)
  return encodeRegisters(Math.min(greatest, Math.max(least, held)), type, wordOrder)
}

function showStatus(
  channel: ChannelConfig,
  flag: ReadingFlag | undefined,
  put: Put,
  words: ReadonlyMap<string, number>,
) {
  const { status } = channel
  if (status === undefined) return
  const own = status.bits.reduce((mask, { bit }) => mask | (1 << bit), 0)
  const bit = status.bits.find(({ means }) => means === flag)?.bit
  const before = words.get(`${status.table}/${status.address}`) ?? 0
  put(status.table, status.address, [(before & ~own) | (bit === undefined ? 0 : 1 << bit)])
}

/** The raw value by which this channel tells of a fault, or null when only its status bits do. */
function errorValue(channel: ChannelConfig, flag: ReadingFlag): number | null {
  const code = channel.errorCodes.find(({ means }) => means === flag)
  if (code === undefined) return null
  return 'raw' in code ? code.raw : code.from
}
