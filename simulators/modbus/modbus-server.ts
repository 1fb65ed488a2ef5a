import { createServer, type AddressInfo, type Server, type Socket } from 'node:net'
import type { RegisterTable } from '@/lib/gateway/poll-plan'

/*
 * A Modbus TCP server that can misbehave: the wire of a simulated module. It is written on the socket itself, and not
 * on the package that the gateway reads with, because it has to hang, cut and send nonsense on demand; and so the two
 * ends are not the same code. Frame: transaction (2 bytes), protocol 0 (2), length (2), unit (1), function (1), data.
 */

/** How the module answers from now on. */
export type ModuleBehaviour =
  | { kind: 'normal' }
  /** Takes the question and never answers. */
  | { kind: 'hang' }
  /** Answers each question this much later. */
  | { kind: 'slow'; delayMs: number }
  /** Cuts the connection at each question. */
  | { kind: 'drop' }
  /** Answers each question with this exception code. */
  | { kind: 'exception'; code: number }
  /** Answers nonsense, another kind at each question: see `garbageFor`. */
  | { kind: 'garbage' }
  /** Takes no connection, as a module without power. */
  | { kind: 'off' }

export type ModbusRequest = { table: RegisterTable; address: number; count: number }

export type ModbusServer = {
  port: number
  behave: (behaviour: ModuleBehaviour) => Promise<void>
  /** Questions taken so far. */
  requestCount: () => number
  connectionCount: () => number
  close: () => Promise<void>
}

type ServerOptions = {
  /** One register, or null where the module has none. */
  register: (table: RegisterTable, address: number) => number | null
  unitId?: number
  /** 0 takes any free port. */
  port?: number
  /** Told of each question that is answered, after its answer was made. */
  onAnswered?: (request: ModbusRequest) => void
}

const HEAD_BYTES = 6
const EXCEPTION_ILLEGAL_FUNCTION = 1
const EXCEPTION_ILLEGAL_ADDRESS = 2
const EXCEPTION_ILLEGAL_VALUE = 3
const MOST_REGISTERS = 125

/** Listens on loopback. */
export async function startModbusServer(options: ServerOptions): Promise<ModbusServer> {
  const { register, unitId = 1, onAnswered } = options
  const sockets = new Set<Socket>()
  let behaviour: ModuleBehaviour = { kind: 'normal' }
  let requests = 0
  let connections = 0

  const take = (socket: Socket, frame: Buffer) => {
    if (frame.readUInt8(HEAD_BYTES) !== unitId) return
    requests += 1
    if (behaviour.kind === 'hang') return
    if (behaviour.kind === 'drop') {
      socket.destroy()
      return
    }
    if (behaviour.kind === 'garbage') {
      socket.write(garbageFor(frame, requests))
      return
    }
    const answer =
      behaviour.kind === 'exception' ? exceptionFor(frame, behaviour.code) : answerTo(frame, register)
    const send = () => {
      if (!socket.destroyed) socket.write(answer)
    }
    if (behaviour.kind === 'slow') setTimeout(send, behaviour.delayMs).unref()
    else send()
    const request = readRequest(frame)
    if (request !== null && behaviour.kind !== 'exception') onAnswered?.(request)
  }
  const server = createServer((socket) => {
    connections += 1
    sockets.add(socket)
    socket.on('close', () => sockets.delete(socket))
    socket.on('error', () => {})
    let received = Buffer.alloc(0)
    socket.on('data', (part) => {
      received = Buffer.concat([received, part])
      for (let frame = nextFrame(received); frame !== null; frame = nextFrame(received)) {
        received = received.subarray(frame.length)
        take(socket, frame)
      }
    })
  })
  await listen(server, options.port ?? 0)
  const port = portOf(server.address())
  const cutAll = () => {
    for (const socket of sockets) socket.destroy()
  }
  const stopListening = () =>
    new Promise<void>((resolve) => {
      cutAll()
      if (server.listening) server.close(() => resolve())
      else resolve()
    })
  return {
    port,
    behave: async (next) => {
      behaviour = next
      if (next.kind === 'off') await stopListening()
      else if (!server.listening) await listen(server, port)
    },
    requestCount: () => requests,
    connectionCount: () => connections,
    close: stopListening,
  }
}

function listen(server: Server, port: number): Promise<void> {
  return new Promise((resolve, reject) => {
    server.once('error', reject)
    server.listen(port, '127.0.0.1', () => {
      server.off('error', reject)
      resolve()
    })
  })
}

function portOf(address: AddressInfo | string | null): number {
  if (address === null || typeof address === 'string') throw new Error('the module has no port')
  return address.port
}

function nextFrame(received: Buffer): Buffer | null {
  if (received.length < HEAD_BYTES) return null
  const length = HEAD_BYTES + received.readUInt16BE(4)
  return received.length < length ? null : received.subarray(0, length)
}

/** The question in a frame, or null when it is none that this module knows. */
function readRequest(frame: Buffer): ModbusRequest | null {
  const functionCode = frame.readUInt8(7)
  if (frame.length !== 12 || (functionCode !== 3 && functionCode !== 4)) return null
  return {
    table: functionCode === 4 ? 'input' : 'holding',
    address: frame.readUInt16BE(8),
    count: frame.readUInt16BE(10),
  }
}

function answerTo(frame: Buffer, register: ServerOptions['register']): Buffer {
  const request = readRequest(frame)
  if (request === null) return exceptionFor(frame, EXCEPTION_ILLEGAL_FUNCTION)
  const { table, address, count } = request
  if (count < 1 || count > MOST_REGISTERS) return exceptionFor(frame, EXCEPTION_ILLEGAL_VALUE)
  const data = Buffer.alloc(1 + 2 * count)
  data.writeUInt8(2 * count, 0)
  for (let i = 0; i < count; i += 1) {
    const word = register(table, address + i)
    if (word === null) return exceptionFor(frame, EXCEPTION_ILLEGAL_ADDRESS)
    data.writeUInt16BE(word, 1 + 2 * i)
  }
  return frameFor(frame, frame.readUInt8(7), data)
}

function exceptionFor(frame: Buffer, code: number): Buffer {
  return frameFor(frame, frame.readUInt8(7) | 0x80, Buffer.from([code]))
}

/** An answer to `question`: its transaction and unit, then function and data. */
function frameFor(question: Buffer, functionCode: number, data: Buffer): Buffer {
  const frame = Buffer.alloc(HEAD_BYTES + 2 + data.length)
  question.copy(frame, 0, 0, 2)
  frame.writeUInt16BE(2 + data.length, 4)
  frame.writeUInt8(question.readUInt8(HEAD_BYTES), HEAD_BYTES)
  frame.writeUInt8(functionCode, 7)
  data.copy(frame, 8)
  return frame
}

/**
 * In turn: bytes without a frame, too few registers, a byte count that lies, another transaction's answer, another
 * function's answer, another unit's answer, and a frame that claims to be far longer than it is.
 */
function garbageFor(question: Buffer, turn: number): Buffer {
  const right = answerTo(question, () => 0x1234)
  switch (turn % 7) {
    case 0:
      return Buffer.from('HTTP/1.1 400 Bad Request\r\n\r\n')
    case 1:
      return frameFor(question, question.readUInt8(7), Buffer.from([2, 0x12, 0x34]))
    case 2:
      right.writeUInt8(2, 8)
      return right
    case 3:
      right.writeUInt16BE((right.readUInt16BE(0) + 77) & 0xffff, 0)
      return right
    case 4:
      right.writeUInt8(right.readUInt8(7) ^ 0x07, 7)
      return right
    case 5:
      right.writeUInt8(right.readUInt8(6) ^ 0x05, 6)
      return right
    default:
      right.writeUInt16BE(0xffff, 4)
      return right
  }
}
