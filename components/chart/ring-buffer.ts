/**
 * A ring of rows of numbers in typed arrays: constant memory, no garbage, and every column readable as one
 * contiguous view, because each row is written twice, half the storage apart. NaN is "no reading".
 */
export type RingBuffer = {
  readonly capacity: number
  /** Rows held now, at most `capacity`. */
  length: () => number
  /**
   * Adds a row; column 0 is its key (time), which never falls from row to row. A later key goes to the end
   * and may push out the oldest row; a key that is there already is written over; an older one is put in its
   * place, or dropped when the ring is full and it is older than all.
   */
  put: (row: readonly number[]) => void
  /** A column from oldest to newest; valid until the next put. */
  column: (index: number) => Float64Array
  clear: () => void
}

/** @throws RangeError when capacity or the count of columns is not a whole number above 0. */
export function createRingBuffer(capacity: number, columnCount: number): RingBuffer {
  if (!Number.isInteger(capacity) || capacity < 1) throw new RangeError('capacity')
  if (!Number.isInteger(columnCount) || columnCount < 1) throw new RangeError('columnCount')
  const store = Array.from({ length: columnCount }, () => new Float64Array(capacity * 2))
  const keys = store[0] ?? new Float64Array(0)
  let start = 0
  let length = 0

  function write(position: number, row: readonly number[]) {
    const slot = (start + position) % capacity
    store.forEach((values, index) => {
      const value = row[index] ?? NaN
      values[slot] = value
      values[slot + capacity] = value
    })
  }

  function read(position: number): number[] {
    return store.map((values) => values[start + position] ?? NaN)
  }

  /** The first position whose key is not below `key`. */
  function findPosition(key: number): number {
    let low = 0
    let high = length
    while (low < high) {
      const middle = (low + high) >> 1
      if ((keys[start + middle] ?? NaN) < key) low = middle + 1
      else high = middle
    }
    return low
  }

  function append(row: readonly number[]) {
    if (length === capacity) start = (start + 1) % capacity
    else length += 1
    write(length - 1, row)
  }

  /** Puts a row before the one at `position`; in a full ring the oldest row makes room. */
  function insert(position: number, row: readonly number[]) {
    const isFull = length === capacity
    if (isFull && position === 0) return
    const to = isFull ? position - 1 : position
    append(read(length - 1))
    for (let at = length - 2; at > to; at -= 1) write(at, read(at - 1))
    write(to, row)
  }

  function put(row: readonly number[]) {
    const key = row[0] ?? NaN
    if (Number.isNaN(key)) return
    const position = findPosition(key)
    if (position === length) append(row)
    else if (keys[start + position] === key) write(position, row)
    else insert(position, row)
  }

  return {
    capacity,
    length: () => length,
    put,
    column: (index) => (store[index] ?? new Float64Array(0)).subarray(start, start + length),
    clear: () => {
      start = 0
      length = 0
    },
  }
}
