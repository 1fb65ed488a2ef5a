import { crc32 } from 'node:zlib'
import type { Loss, Reading } from './protocol'

/**
 * How a spool writes one record: sync byte, length of the body (2 bytes), CRC-32 of the body (4 bytes), body.
 * Numbers are little-endian. A reading's body is 41 bytes, so an hour of 12 probes at 5 Hz is about 10 MB.
 * Values are kept as the server keeps them: 0.1 µV, 0.01 °C, 1 ms.
 */
export type SpoolRecord =
  | { kind: 'reading'; reading: Reading }
  | { kind: 'loss'; loss: Loss }
  | { kind: 'acknowledged'; ackedSeq: number }
  /** What the wall clock was set by since the boot began, ms: its readings count from the clock as it was then. */
  | { kind: 'clock'; shiftMs: number }

const SYNC = 0xe5
const HEAD_BYTES = 7
const KIND_READING = 1
const KIND_LOSS = 2
const KIND_ACKNOWLEDGED = 3
const KIND_CLOCK = 4
const READING_BYTES = 41

const FLAG_CODES = { open: 1, short: 2, fault: 3 } as const
const FLAGS = [undefined, 'open', 'short', 'fault'] as const
const CARRIES_NOTHING = 0
const CARRIES_EMF = 1
const CARRIES_TEMPERATURE = 2

/** The bytes of one record. Throws RangeError when a probe id is not a UUID or `at` is no instant. */
export function encodeRecord(record: SpoolRecord): Buffer {
  const body = encodeBody(record)
  const bytes = Buffer.allocUnsafe(HEAD_BYTES + body.length)
  bytes.writeUInt8(SYNC, 0)
  bytes.writeUInt16LE(body.length, 1)
  bytes.writeUInt32LE(crc32(body), 3)
  body.copy(bytes, HEAD_BYTES)
  return bytes
}

/**
 * All whole records of a file, in order. A torn or damaged record is skipped: the search goes on byte by byte to
 * the next record whose CRC-32 agrees. `soundBytes` is the length up to the end of the last whole record.
 */
export function decodeRecords(bytes: Buffer): { records: SpoolRecord[]; soundBytes: number } {
  const records: SpoolRecord[] = []
  let soundBytes = 0
  for (let at = 0; at + HEAD_BYTES <= bytes.length;) {
    const found = decodeAt(bytes, at)
    if (found === null) {
      at += 1
      continue
    }
    records.push(found.record)
    at = found.end
    soundBytes = at
  }
  return { records, soundBytes }
}

/** Rounds a reading to what the spool and the server keep. */
export function roundedReading(reading: Reading): Reading {
  return decodeReading(encodeReading(reading))
}

function encodeBody(record: SpoolRecord): Buffer {
  if (record.kind === 'reading') return encodeReading(record.reading)
  if (record.kind === 'acknowledged') {
    const body = Buffer.allocUnsafe(9)
    body.writeUInt8(KIND_ACKNOWLEDGED, 0)
    body.writeDoubleLE(record.ackedSeq, 1)
    return body
  }
  if (record.kind === 'clock') {
    const body = Buffer.allocUnsafe(9)
    body.writeUInt8(KIND_CLOCK, 0)
    body.writeDoubleLE(record.shiftMs, 1)
    return body
  }
  const reason = Buffer.from(record.loss.reason, 'utf8')
  const body = Buffer.allocUnsafe(17 + reason.length)
  body.writeUInt8(KIND_LOSS, 0)
  body.writeDoubleLE(record.loss.from, 1)
  body.writeDoubleLE(record.loss.to, 9)
  reason.copy(body, 17)
  return body
}

function encodeReading(reading: Reading): Buffer {
  const probeHex = reading.probeId.replaceAll('-', '')
  if (!/^[0-9a-f]{32}$/i.test(probeHex)) throw new RangeError(`probeId is not a UUID: ${reading.probeId}`)
  const atMs = Date.parse(reading.at)
  if (!Number.isFinite(atMs)) throw new RangeError(`at is not an instant: ${reading.at}`)
  const body = Buffer.alloc(READING_BYTES)
  body.writeUInt8(KIND_READING, 0)
  body.writeDoubleLE(reading.seq, 1)
  body.write(probeHex, 9, 'hex')
  body.writeDoubleLE(atMs, 25)
  const flagCode = reading.flag === undefined ? 0 : FLAG_CODES[reading.flag]
  const carries = reading.emf
    ? CARRIES_EMF
    : reading.tempC !== undefined
      ? CARRIES_TEMPERATURE
      : CARRIES_NOTHING
  body.writeUInt8(flagCode | (carries << 4), 33)
  if (reading.emf) {
    body.writeIntLE(Math.round(reading.emf.microvolts * 10), 34, 4)
    body.writeIntLE(Math.round(reading.emf.coldJunctionC * 100), 38, 3)
  } else if (reading.tempC !== undefined) {
    body.writeIntLE(Math.round(reading.tempC * 100), 34, 4)
  }
  return body
}

function decodeAt(bytes: Buffer, at: number): { record: SpoolRecord; end: number } | null {
  if (bytes[at] !== SYNC) return null
  const start = at + HEAD_BYTES
  const end = start + bytes.readUInt16LE(at + 1)
  if (end === start || end > bytes.length) return null
  const body = bytes.subarray(start, end)
  if (crc32(body) !== bytes.readUInt32LE(at + 3)) return null
  const record = decodeBody(body)
  return record === null ? null : { record, end }
}

function decodeBody(body: Buffer): SpoolRecord | null {
  const kind = body.readUInt8(0)
  if (kind === KIND_READING && body.length === READING_BYTES) {
    return { kind: 'reading', reading: decodeReading(body) }
  }
  if (kind === KIND_ACKNOWLEDGED && body.length === 9) {
    return { kind: 'acknowledged', ackedSeq: body.readDoubleLE(1) }
  }
  if (kind === KIND_CLOCK && body.length === 9) {
    return { kind: 'clock', shiftMs: body.readDoubleLE(1) }
  }
  if (kind === KIND_LOSS && body.length > 17) {
    const loss = { from: body.readDoubleLE(1), to: body.readDoubleLE(9), reason: body.toString('utf8', 17) }
    return { kind: 'loss', loss }
  }
  return null
}

function decodeReading(body: Buffer): Reading {
  const hex = body.toString('hex', 9, 25)
  const flags = body.readUInt8(33)
  const flag = FLAGS[flags & 0x0f]
  const carries = flags >> 4
  return {
    seq: body.readDoubleLE(1),
    probeId: [8, 12, 16, 20, 32].map((to, i, ends) => hex.slice(ends[i - 1] ?? 0, to)).join('-'),
    at: new Date(body.readDoubleLE(25)).toISOString(),
    ...(carries === CARRIES_EMF && {
      emf: { microvolts: body.readIntLE(34, 4) / 10, coldJunctionC: body.readIntLE(38, 3) / 100 },
    }),
    ...(carries === CARRIES_TEMPERATURE && { tempC: body.readIntLE(34, 4) / 100 }),
    ...(flag !== undefined && { flag }),
  }
}
