/** What a reading did to a curve: at the end, somewhere before it, in place of another, or nothing new. */
export type PutEffect = 'appended' | 'inserted' | 'changed' | 'same'

/** One role's readings in time order, one an instant: ms since 1970 UTC and °C, NaN where there is no reading. */
export type RoleCurve = {
  readonly length: number
  atMs: (i: number) => number
  tempC: (i: number) => number
  /**
   * Puts a reading where its instant belongs. Of two at one instant the warmer stands and a number stands before
   * none, as in `firingReadings`, so the order of arrival never matters.
   */
  put: (atMs: number, tempC: number) => PutEffect
  /** First index at or after an instant. */
  indexFrom: (atMs: number) => number
  /** The readings from `fromMs` on, as copies. */
  since: (fromMs: number) => { atMs: number[]; tempC: number[] }
}

const firstCapacity = 4_096
/** 27 h at 5 readings a second: far beyond any firing. The oldest half goes when it is reached. */
const mostPoints = 500_000

export function createRoleCurve(): RoleCurve {
  let ats = new Float64Array(firstCapacity)
  let temps = new Float64Array(firstCapacity)
  let length = 0

  const makeRoom = () => {
    if (length < ats.length) return
    if (length >= mostPoints) {
      const half = length >> 1
      ats.copyWithin(0, half, length)
      temps.copyWithin(0, half, length)
      length -= half
      return
    }
    const [wider, widerTemps] = [new Float64Array(ats.length * 2), new Float64Array(ats.length * 2)]
    wider.set(ats)
    widerTemps.set(temps)
    ats = wider
    temps = widerTemps
  }
  const indexFrom = (atMs: number) => {
    let low = 0
    let high = length
    while (low < high) {
      const middle = (low + high) >> 1
      if ((ats[middle] ?? 0) < atMs) low = middle + 1
      else high = middle
    }
    return low
  }
  const put = (atMs: number, tempC: number): PutEffect => {
    makeRoom()
    const last = length === 0 ? -Infinity : (ats[length - 1] ?? 0)
    if (atMs > last) {
      ats[length] = atMs
      temps[length] = tempC
      length += 1
      return 'appended'
    }
    const i = indexFrom(atMs)
    if (ats[i] === atMs) {
      const before = temps[i] ?? NaN
      if (Number.isNaN(tempC) || before >= tempC) return 'same'
      temps[i] = tempC
      return 'changed'
    }
    ats.copyWithin(i + 1, i, length)
    temps.copyWithin(i + 1, i, length)
    ats[i] = atMs
    temps[i] = tempC
    length += 1
    return 'inserted'
  }
  return {
    get length() {
      return length
    },
    atMs: (i) => (i < length ? (ats[i] ?? NaN) : NaN),
    tempC: (i) => (i < length ? (temps[i] ?? NaN) : NaN),
    put,
    indexFrom,
    since: (fromMs) => {
      const from = indexFrom(fromMs)
      return { atMs: Array.from(ats.subarray(from, length)), tempC: Array.from(temps.subarray(from, length)) }
    },
  }
}
