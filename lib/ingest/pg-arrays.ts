/**
 * One-dimensional PostgreSQL arrays in its binary wire form (array_recv): dimensions, null flag, element type, length
 * and lower bound, then each element behind its byte length, −1 for null; all big-endian. A Buffer goes over the
 * wire as a binary parameter, which spares both ends the decimal text. Whole numbers only.
 */
const headerBytes = 20
const int2Oid = 21
const int4Oid = 23
const int8Oid = 20

function startArray(length: number, elementOid: number, hasNulls: boolean, bodyBytes: number): Buffer {
  const buffer = Buffer.allocUnsafe(headerBytes + bodyBytes)
  buffer.writeInt32BE(1, 0)
  buffer.writeInt32BE(hasNulls ? 1 : 0, 4)
  buffer.writeInt32BE(elementOid, 8)
  buffer.writeInt32BE(length, 12)
  buffer.writeInt32BE(1, 16)
  return buffer
}

/** Numbers up to 2^53. */
export function int8Array(values: readonly number[]): Buffer {
  const buffer = startArray(values.length, int8Oid, false, values.length * 12)
  let offset = headerBytes
  for (const value of values) {
    const high = Math.floor(value / 4_294_967_296)
    buffer.writeInt32BE(8, offset)
    buffer.writeInt32BE(high, offset + 4)
    buffer.writeUInt32BE(value - high * 4_294_967_296, offset + 8)
    offset += 12
  }
  return buffer
}

export function int4Array(values: readonly (number | null)[]): Buffer {
  let nulls = 0
  for (const value of values) if (value === null) nulls += 1
  const buffer = startArray(values.length, int4Oid, nulls > 0, values.length * 8 - nulls * 4)
  let offset = headerBytes
  for (const value of values) {
    if (value === null) {
      buffer.writeInt32BE(-1, offset)
      offset += 4
    } else {
      buffer.writeInt32BE(4, offset)
      buffer.writeInt32BE(value, offset + 4)
      offset += 8
    }
  }
  return buffer
}

export function int2Array(values: readonly number[]): Buffer {
  const buffer = startArray(values.length, int2Oid, false, values.length * 6)
  let offset = headerBytes
  for (const value of values) {
    buffer.writeInt32BE(2, offset)
    buffer.writeInt16BE(value, offset + 4)
    offset += 6
  }
  return buffer
}
