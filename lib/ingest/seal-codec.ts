import { deflateRawSync, inflateRawSync } from 'node:zlib'
import type { ReadingColumns } from '@/lib/ingest/reading-columns'
import { emptyColumns } from '@/lib/ingest/reading-columns'

/**
 * Encoding 1 of one probe's readings. A stream of variable-length whole numbers (7 bits a byte, low first, the high
 * bit says that more follow; signed ones as zigzag 0, −1, 1, −2 …), then raw deflate:
 *
 *   count
 *   runs of what a row has: length, then 1·emf + 2·temperature + 4·flag, until `count` rows are told
 *   instants: the first, then the change of the step (delta of delta), all rows
 *   emf: change from the row before that had one; cold junction likewise; temperature likewise
 *
 * Steady 5 Hz costs a byte for the instant and one or two for noise, before deflate.
 */
export const sealEncoding = 1

const mostReadings = 10_000_000

/** @throws RangeError for a value that is not a whole number of at most 2^52, or columns of unequal length */
export function encodeReadings(columns: ReadingColumns): Buffer {
  const writer = createWriter()
  const count = columns.atMs.length
  for (const column of [columns.emfTenthUv, columns.coldCentiC, columns.tempCentiC, columns.flag]) {
    if (column.length !== count) throw new RangeError('columns must be equally long')
  }
  writer.unsigned(count)
  writeKinds(writer, columns)
  let last = 0
  let step = 0
  columns.atMs.forEach((atMs, i) => {
    writer.signed(i === 0 ? atMs : atMs - last - step)
    if (i > 0) step = atMs - last
    last = atMs
  })
  for (const column of [columns.emfTenthUv, columns.coldCentiC, columns.tempCentiC]) {
    let before = 0
    for (const value of column) {
      if (value === null) continue
      writer.signed(value - before)
      before = value
    }
  }
  return deflateRawSync(writer.bytes(), { level: 9 })
}

function kindOf(columns: ReadingColumns, i: number): number {
  const hasEmf = columns.emfTenthUv[i] !== null
  if (hasEmf !== (columns.coldCentiC[i] !== null)) {
    throw new RangeError('an emf and its cold junction come together')
  }
  return (hasEmf ? 1 : 0) + (columns.tempCentiC[i] !== null ? 2 : 0) + 4 * (columns.flag[i] ?? 0)
}

function writeKinds(writer: Writer, columns: ReadingColumns): void {
  const count = columns.atMs.length
  for (let i = 0; i < count;) {
    const kind = kindOf(columns, i)
    let end = i + 1
    while (end < count && kindOf(columns, end) === kind) end += 1
    writer.unsigned(end - i)
    writer.unsigned(kind)
    i = end
  }
}

/** @throws RangeError when the bytes are not encoding 1 */
export function decodeReadings(data: Uint8Array): ReadingColumns {
  const reader = createReader(inflateRawSync(data))
  const count = reader.unsigned()
  if (count > mostReadings) throw new RangeError('a seal says that it holds more readings than it can')
  const kinds = readKinds(reader, count)
  const columns = emptyColumns()
  let last = 0
  let step = 0
  for (let i = 0; i < count; i += 1) {
    if (i === 0) last = reader.signed()
    else {
      step += reader.signed()
      last += step
    }
    columns.atMs.push(last)
    columns.flag.push((kinds[i] ?? 0) >> 2)
  }
  columns.emfTenthUv = readColumn(reader, kinds, 1)
  columns.coldCentiC = readColumn(reader, kinds, 1)
  columns.tempCentiC = readColumn(reader, kinds, 2)
  if (!reader.isAtEnd()) throw new RangeError('a seal has bytes after its readings')
  return columns
}

function readKinds(reader: Reader, count: number): Uint8Array {
  const kinds = new Uint8Array(count)
  for (let i = 0; i < count;) {
    const length = reader.unsigned()
    if (length === 0 || i + length > count) throw new RangeError('a run of a seal does not fit its count')
    kinds.fill(reader.unsigned(), i, i + length)
    i += length
  }
  return kinds
}

function readColumn(reader: Reader, kinds: Uint8Array, bit: 1 | 2): (number | null)[] {
  let value = 0
  return Array.from(kinds, (kind) => ((kind & bit) === 0 ? null : (value += reader.signed())))
}

type Writer = {
  unsigned: (value: number) => void
  signed: (value: number) => void
  bytes: () => Buffer
}

const largest = 2 ** 52

function createWriter(): Writer {
  let buffer = Buffer.alloc(1 << 16)
  let length = 0
  const unsigned = (value: number) => {
    if (!(Number.isSafeInteger(value) && value >= 0)) {
      throw new RangeError(`a value must be a whole number that fits, not ${value}`)
    }
    if (length + 8 > buffer.length) buffer = Buffer.concat([buffer], buffer.length * 2)
    let rest = value
    while (rest > 127) {
      buffer[length] = (rest % 128) + 128
      length += 1
      rest = Math.floor(rest / 128)
    }
    buffer[length] = rest
    length += 1
  }
  return {
    unsigned,
    signed: (value) => {
      if (Math.abs(value) > largest) throw new RangeError(`a value must be at most 2^52, not ${value}`)
      unsigned(value >= 0 ? 2 * value : -2 * value - 1)
    },
    bytes: () => buffer.subarray(0, length),
  }
}

type Reader = { unsigned: () => number; signed: () => number; isAtEnd: () => boolean }

function createReader(bytes: Uint8Array): Reader {
  let offset = 0
  const unsigned = () => {
    let value = 0
    for (let scale = 1; ; scale *= 128) {
      const byte = bytes[offset]
      if (byte === undefined) throw new RangeError('a seal ends before its readings do')
      offset += 1
      value += (byte & 127) * scale
      if (byte < 128) return value
      if (scale > largest) throw new RangeError('a number of a seal is too long')
    }
  }
  return {
    unsigned,
    signed: () => {
      const value = unsigned()
      return value % 2 === 0 ? value / 2 : -(value + 1) / 2
    },
    isAtEnd: () => offset === bytes.length,
  }
}
