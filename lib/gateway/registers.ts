/** What a Modbus register or a pair of them holds. */
export const registerTypes = ['int16', 'uint16', 'int32', 'float32'] as const
export type RegisterType = (typeof registerTypes)[number]

/**
 * How the bytes A B C D of a number, most significant first, lie in two registers: `big` AB CD, `little` DC BA,
 * `mixed` CD AB (low register first), `byte-swapped` BA DC. Of one register only the bytes can be turned: `big` and
 * `mixed` AB, `little` and `byte-swapped` BA.
 */
export const wordOrders = ['big', 'little', 'mixed', 'byte-swapped'] as const
export type WordOrder = (typeof wordOrders)[number]

/** Registers that a value takes. */
export function registerCount(type: RegisterType): 1 | 2 {
  return type === 'int16' || type === 'uint16' ? 1 : 2
}

/** Least and greatest value that the type can hold; a float's are those of a finite one. */
export function registerRange(type: RegisterType): readonly [least: number, greatest: number] {
  switch (type) {
    case 'int16':
      return [-0x8000, 0x7fff]
    case 'uint16':
      return [0, 0xffff]
    case 'int32':
      return [-0x80000000, 0x7fffffff]
    case 'float32':
      return [-3.4028234663852886e38, 3.4028234663852886e38]
  }
}

/**
 * The number in `words` (each 0–65535, as many as the type takes). A float may come out as NaN or infinite.
 * @throws RangeError when the count of words does not fit the type
 */
export function decodeRegisters(words: readonly number[], type: RegisterType, order: WordOrder): number {
  if (words.length !== registerCount(type)) {
    throw new RangeError(`words: ${type} takes ${registerCount(type)}, not ${words.length}`)
  }
  const bytes = Buffer.alloc(2 * words.length)
  words.forEach((word, i) => bytes.writeUInt16BE(word, 2 * i))
  reorder(bytes, order)
  switch (type) {
    case 'int16':
      return bytes.readInt16BE(0)
    case 'uint16':
      return bytes.readUInt16BE(0)
    case 'int32':
      return bytes.readInt32BE(0)
    case 'float32':
      return bytes.readFloatBE(0)
  }
}

/**
 * The words that hold `value`, for a module that is simulated. A float is rounded to the nearest that 32 bits hold.
 * @throws RangeError when an integer type cannot hold it
 */
export function encodeRegisters(value: number, type: RegisterType, order: WordOrder): number[] {
  const bytes = Buffer.alloc(2 * registerCount(type))
  switch (type) {
    case 'int16':
      bytes.writeInt16BE(value, 0)
      break
    case 'uint16':
      bytes.writeUInt16BE(value, 0)
      break
    case 'int32':
      bytes.writeInt32BE(value, 0)
      break
    case 'float32':
      bytes.writeFloatBE(value, 0)
      break
  }
  reorder(bytes, order)
  return Array.from({ length: bytes.length / 2 }, (_, i) => bytes.readUInt16BE(2 * i))
}

/** Big-endian to the order, and back: each order is its own inverse. */
function reorder(bytes: Buffer, order: WordOrder) {
  if (order === 'little' || order === 'byte-swapped') bytes.swap16()
  if ((order === 'little' || order === 'mixed') && bytes.length === 4) {
    const [high, low] = [bytes.readUInt16BE(0), bytes.readUInt16BE(2)]
    bytes.writeUInt16BE(low, 0)
    bytes.writeUInt16BE(high, 2)
  }
}
