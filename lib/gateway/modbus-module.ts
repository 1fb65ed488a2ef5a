import { backoffMs } from './backoff'
import { spansOfChannel, type ModuleConfig } from './config'
import { createModbusConnection, ModuleRefusal, type ModbusConnection } from './modbus-connection'
import { planReads, type RegisterSpan } from './poll-plan'
import type { SteadyClock } from './poll-schedule'
import { readChannel, type ChannelValue, type RegisterImage } from './read-channel'

/** One channel at one poll; `steadyMs` is the instant of its registers on the steady clock. */
export type ChannelReading = ChannelValue & { probeId: string; steadyMs: number }

export type ModuleState = 'not tried yet' | 'answers' | 'does not answer'

export type ModbusModule = {
  name: string
  state: () => ModuleState
  /**
   * Reads every channel once. Of a module that does not answer each probe comes as a fault, at most once a second:
   * never the last value, and never nothing. Empty while the poll before is still under way.
   */
  poll: () => Promise<ChannelReading[]>
  close: () => void
}

type ModuleOptions = {
  config: ModuleConfig
  clock: SteadyClock
  connect?: (config: ModuleConfig) => ModbusConnection
  random?: () => number
  /** Said once when it begins and not again until it is over or something else is wrong. */
  onTrouble?: (sentence: string) => void
  onRecovered?: (sentence: string) => void
}

const FAULTS_EVERY_MS = 1_000
const RECONNECT_BASE_MS = 250
/** A module that was switched off is back within this after it is switched on. */
const RECONNECT_CAP_MS = 10_000

/**
 * One module with its one connection. After a request without a sensible answer the connection is made anew, since a
 * late answer could be taken for another's; between tries it waits longer each time. A module that answers "no" to a
 * block keeps its connection, and the probes of that block are faults.
 */
export function createModbusModule(options: ModuleOptions): ModbusModule {
  const { config, clock, connect = createModbusConnection, random = Math.random } = options
  const blocks = planReads(config.channels.flatMap(spansOfChannel), {
    mostRegisters: config.mostRegistersPerRead,
    mostGapRegisters: config.mostGapRegisters,
  })
  const trouble = createTroubleTeller(options)
  let connection: ModbusConnection | null = null
  let state: ModuleState = 'not tried yet'
  let failures = 0
  let nextTryMs = -Infinity
  let faultsToldMs = -Infinity
  let isBusy = false
  let isClosed = false

  const drop = () => {
    connection?.close()
    connection = null
  }
  const fail = (error: Error) => {
    drop()
    state = 'does not answer'
    nextTryMs = clock.steadyMs() + backoffMs(failures, random, RECONNECT_BASE_MS, RECONNECT_CAP_MS)
    failures += 1
    if (!isClosed) trouble.begin('does not answer', error.message)
  }
  const faults = (): ChannelReading[] => {
    const steadyMs = clock.steadyMs()
    if (isClosed || steadyMs - faultsToldMs < FAULTS_EVERY_MS) return []
    faultsToldMs = steadyMs
    return config.channels.map(({ probeId }) => ({ probeId, steadyMs, flag: 'fault' }))
  }
  const opened = async (): Promise<ModbusConnection | null> => {
    if (connection?.isOpen() === true) return connection
    drop()
    if (clock.steadyMs() < nextTryMs) return null
    const opening = connect(config)
    connection = opening
    await opening.open()
    return opening
  }
  const pollOnce = async (): Promise<ChannelReading[]> => {
    const open = await opened()
    if (open === null) return faults()
    const { reads, refusal } = await readBlocks(open, blocks, clock)
    state = 'answers'
    failures = 0
    if (refusal === null) trouble.end()
    else trouble.begin('refuses registers', refusal)
    return readingsOf(config, reads, clock.steadyMs())
  }
  return {
    name: config.name,
    state: () => state,
    poll: async () => {
      if (isClosed) return []
      // While a module that failed before is tried again its probes are still faults.
      if (isBusy) return state === 'does not answer' ? faults() : []
      isBusy = true
      try {
        return await pollOnce()
      } catch (error) {
        fail(error instanceof Error ? error : new Error(String(error)))
        return faults()
      } finally {
        isBusy = false
      }
    },
    close: () => {
      isClosed = true
      drop()
    },
  }
}

type BlockRead = { block: RegisterSpan; words: readonly number[]; steadyMs: number }

/** Reads all blocks; what the module refuses is left out. Rejects at the first that gets no sensible answer. */
async function readBlocks(
  connection: ModbusConnection,
  blocks: readonly RegisterSpan[],
  clock: SteadyClock,
): Promise<{ reads: BlockRead[]; refusal: string | null }> {
  const reads: BlockRead[] = []
  let refusal: string | null = null
  for (const block of blocks) {
    const askedMs = clock.steadyMs()
    try {
      const words = await connection.read(block)
      // The module took its registers somewhere between question and answer.
      reads.push({ block, words, steadyMs: (askedMs + clock.steadyMs()) / 2 })
    } catch (error) {
      if (!(error instanceof ModuleRefusal)) throw error
      const last = block.address + block.count - 1
      refusal = `${block.table} registers ${block.address} to ${last}: ${error.message}`
    }
  }
  return { reads, refusal }
}

function readingsOf(config: ModuleConfig, reads: readonly BlockRead[], nowMs: number): ChannelReading[] {
  const find = (table: string, address: number, count: number) =>
    reads.find(
      ({ block }) =>
        block.table === table && block.address <= address && address + count <= block.address + block.count,
    )
  const image: RegisterImage = (table, address, count) => {
    const read = find(table, address, count)
    return read?.words.slice(address - read.block.address, address - read.block.address + count) ?? null
  }
  return config.channels.map((channel) => ({
    probeId: channel.probeId,
    steadyMs: find(channel.table, channel.address, 1)?.steadyMs ?? nowMs,
    ...readChannel(channel, image),
  }))
}

type Trouble = 'does not answer' | 'refuses registers'

function createTroubleTeller({ config, clock, onTrouble, onRecovered }: ModuleOptions) {
  const where = `${config.name} (${config.host}:${config.port}, unit ${config.unitId})`
  let current: Trouble | null = null
  let sinceMs = 0
  return {
    begin: (kind: Trouble, detail: string) => {
      if (current === kind) return
      current = kind
      sinceMs = clock.steadyMs()
      onTrouble?.(`${where} ${kind} (${detail}). Probes that it cannot give are sent as faults.`)
    },
    end: () => {
      if (current === null) return
      current = null
      const seconds = Math.round((clock.steadyMs() - sinceMs) / 1_000)
      onRecovered?.(`${where} answers again, after ${seconds} s.`)
    },
  }
}
