/** One role's curve as the client holds it: a typed ring in time order, with no instant twice. */
export type PointFeed = {
  readonly length: number
  /** Counts up with each change, so that a drawing knows whether it is stale. */
  readonly version: number
  /** Ms since 1970 UTC and °C, NaN where there is no reading; views that hold until the next change. */
  atMs: () => Float64Array
  tempC: () => Float64Array
  put: (atMs: number, tempC: number) => void
  clear: () => void
}

const firstCapacity = 1_024

/**
 * @param most how many points are kept at most; the oldest go first. A firing of 3 h at 5 readings a second has
 *   54,000.
 */
export function createPointFeed(most = 120_000): PointFeed {
  let capacity = firstCapacity
  let ats = new Float64Array(capacity)
  let temps = new Float64Array(capacity)
  let start = 0
  let end = 0
  let version = 0

  /** Moves what is held to the front when the end is reached, into a larger array while that is allowed. */
  const makeRoom = () => {
    if (end < capacity) return
    const length = end - start
    const isFull = length >= most
    const from = isFull ? start + Math.ceil(most / 8) : start
    const wanted = length * 2 > capacity ? Math.min(capacity * 2, most * 2) : capacity
    const [nextAts, nextTemps] = [new Float64Array(wanted), new Float64Array(wanted)]
    nextAts.set(ats.subarray(from, end))
    nextTemps.set(temps.subarray(from, end))
    ;[ats, temps, capacity, end, start] = [nextAts, nextTemps, wanted, end - from, 0]
  }
  const indexFrom = (atMs: number) => {
    let low = start
    let high = end
    while (low < high) {
      const middle = (low + high) >> 1
      if ((ats[middle] ?? 0) < atMs) low = middle + 1
      else high = middle
    }
    return low
  }
  return {
    get length() {
      return end - start
    },
    get version() {
      return version
    },
    atMs: () => ats.subarray(start, end),
    tempC: () => temps.subarray(start, end),
    put: (atMs, tempC) => {
      version += 1
      makeRoom()
      const i = end === start || atMs > (ats[end - 1] ?? 0) ? end : indexFrom(atMs)
      if (i < end && ats[i] === atMs) {
        temps[i] = tempC
        return
      }
      ats.copyWithin(i + 1, i, end)
      temps.copyWithin(i + 1, i, end)
      ats[i] = atMs
      temps[i] = tempC
      end += 1
    },
    clear: () => {
      version += 1
      start = 0
      end = 0
    },
  }
}
