import ModbusClient from 'modbus-serial'
import type { RegisterSpan } from './poll-plan'

/*
 * One connection to a Modbus TCP module, by the package modbus-serial. Its main file also asks for the native package
 * `serialport` and goes on without it where it is not installed; only its TCP part is used here.
 */

export type ModbusConnection = {
  isOpen: () => boolean
  /** Rejects with an Error when the module cannot be reached within its timeout. */
  open: () => Promise<void>
  /**
   * The registers of one block. Rejects with ModuleRefusal when the module answers that it will not or cannot, with
   * another Error when it does not answer in time or answers something that makes no sense.
   */
  read: (block: RegisterSpan) => Promise<number[]>
  close: () => void
}

/** The module answered, and said no: by a Modbus exception code (1 function, 2 address, 3 value, 4 failure, 6 busy). */
export class ModuleRefusal extends Error {
  readonly exceptionCode: number
  constructor(exceptionCode: number, sentence: string) {
    super(sentence)
    this.name = 'ModuleRefusal'
    this.exceptionCode = exceptionCode
  }
}

type ConnectionOptions = { host: string; port: number; unitId: number; timeoutMs: number }

export function createModbusConnection(options: ConnectionOptions): ModbusConnection {
  const { host, port, unitId, timeoutMs } = options
  const client = new ModbusClient()
  client.setID(unitId)
  client.setTimeout(timeoutMs)
  // Errors come through the promises as well; without a listener the emitter would end the program.
  client.on('error', () => {})
  const close = () => client.destroy(() => {})
  return {
    isOpen: () => client.isOpen,
    open: async () => {
      try {
        await client.connectTCP(host, { port })
      } catch (error) {
        close()
        throw asError(error)
      }
    },
    read: async ({ table, address, count }) => {
      try {
        const { data } = await (table === 'input'
          ? client.readInputRegisters(address, count)
          : client.readHoldingRegisters(address, count))
        if (data.length !== count) {
          throw new Error(`the module answered ${data.length} registers instead of ${count}`)
        }
        return data
      } catch (error) {
        throw asError(error)
      }
    },
    close,
  }
}

/** The package rejects with errors, with errors that carry `modbusCode`, and with plain objects with a message. */
function asError(error: unknown): Error {
  if (typeof error !== 'object' || error === null) return new Error(String(error))
  const sentence = 'message' in error && typeof error.message === 'string' ? error.message : String(error)
  if ('modbusCode' in error && typeof error.modbusCode === 'number') {
    return new ModuleRefusal(error.modbusCode, sentence)
  }
  return new Error(sentence === 'Timed out' ? 'no answer in time' : sentence)
}
