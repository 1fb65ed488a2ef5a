import type { ReadingSeries } from './gaps'
import { straightBetween } from './straight-line'

/** A limit that was exceeded for too long; °C or °C/min. */
export type Exceedance = { atS: number; heldS: number; worst: number }

/**
 * The longest time for which a series stood above a limit, if it is longer than `heldS`: from crossing to crossing,
 * straight between readings. A silence longer than `breakS` ends it.
 */
export function findHeldAbove(
  series: { timeS: ArrayLike<number>; tempC: ArrayLike<number> },
  limit: number,
  window: { fromS: number; toS: number },
  heldS: number,
  breakS: number,
): Exceedance | null {
  const longest: Exceedance = { atS: NaN, heldS: heldS, worst: NaN }
  const present: Exceedance = { atS: NaN, heldS: 0, worst: NaN }
  let isAbove = false
  let lastS = NaN
  let lastC = NaN
  for (let i = 0; i < series.timeS.length; i += 1) {
    const time = series.timeS[i] ?? NaN
    const temp = series.tempC[i] ?? NaN
    if (!(time >= window.fromS && time <= window.toS) || !Number.isFinite(temp)) continue
    const isJoined = time - lastS <= breakS
    const crossingS = isJoined ? straightBetween(lastC, lastS, temp, time, limit) : time
    if (temp > limit && !(isAbove && isJoined))
      Object.assign(present, { atS: crossingS, heldS: 0, worst: temp })
    else if (temp > limit)
      Object.assign(present, { heldS: time - present.atS, worst: Math.max(present.worst, temp) })
    else if (isAbove && isJoined) present.heldS = crossingS - present.atS
    if (present.heldS > longest.heldS) Object.assign(longest, present)
    isAbove = temp > limit
    lastS = time
    lastC = temp
  }
  return Number.isNaN(longest.atS) ? null : longest
}

/**
 * Climb over a window, °C/min: the slope of the straight line that fits the points of the last `windowS` best (least
 * squares), for each point that has a whole window behind it; NaN before.
 */
export function climbsCPerMin(
  series: { timeS: ArrayLike<number>; tempC: ArrayLike<number> },
  windowS: number,
): Float64Array {
  const count = series.timeS.length
  const climbs = new Float64Array(count).fill(NaN)
  const firstS = series.timeS[0] ?? NaN
  const sum = { n: 0, t: 0, tt: 0, y: 0, ty: 0 }
  let oldest = 0
  const move = (i: number, sign: 1 | -1) => {
    const t = (series.timeS[i] ?? NaN) - firstS
    const y = series.tempC[i] ?? NaN
    sum.n += sign
    sum.t += sign * t
    sum.tt += sign * t * t
    sum.y += sign * y
    sum.ty += sign * t * y
  }
  for (let i = 0; i < count; i += 1) {
    const time = series.timeS[i] ?? NaN
    move(i, 1)
    while ((series.timeS[oldest] ?? Infinity) < time - windowS) {
      move(oldest, -1)
      oldest += 1
    }
    const spread = sum.n * sum.tt - sum.t * sum.t
    if (time - firstS < windowS || sum.n < 2 || !(spread > 0)) continue
    climbs[i] = (60 * (sum.n * sum.ty - sum.t * sum.y)) / spread
  }
  return climbs
}

/** The steepest climb above a limit, with how long the climb stood above it in all; null when none did. */
export function findClimbAbove(
  series: { timeS: ArrayLike<number>; tempC: ArrayLike<number> },
  limitCPerMin: number,
  windowS: number,
): Exceedance | null {
  const climbs = climbsCPerMin(series, windowS)
  const found: Exceedance = { atS: NaN, heldS: 0, worst: -Infinity }
  for (let i = 0; i < climbs.length; i += 1) {
    const climb = climbs[i] ?? NaN
    if (!(climb > limitCPerMin)) continue
    const time = series.timeS[i] ?? NaN
    const isFirst = Number.isNaN(found.atS)
    if (isFirst) found.atS = time - windowS
    found.heldS += isFirst ? windowS : time - (series.timeS[i - 1] ?? time)
    found.worst = Math.max(found.worst, climb)
  }
  return Number.isNaN(found.atS) ? null : found
}

/**
 * Mean absolute difference of two probes over the readings of the first, °C, by time; the second straight between
 * its readings, and nothing where it was silent for longer than `breakS`. `coveredS` is the time that could be compared.
 */
export function meanSpreadC(
  first: { timeS: ArrayLike<number>; tempC: ArrayLike<number>; isInterpolated: ArrayLike<number> },
  second: ReadingSeries,
  breakS: number,
): { spreadC: number; coveredS: number } | null {
  const other = validPoints(second)
  let sum = 0
  let coveredS = 0
  let next = 0
  for (let i = 0; i < first.timeS.length; i += 1) {
    const time = first.timeS[i] ?? NaN
    while (next < other.timeS.length && (other.timeS[next] ?? Infinity) < time) next += 1
    if (first.isInterpolated[i] === 1) continue
    const otherC = otherTempC(other, next, time, breakS)
    if (otherC === null) continue
    const beforeS = Math.min(breakS, time - (first.timeS[i - 1] ?? time))
    const afterS = Math.min(breakS, (first.timeS[i + 1] ?? time) - time)
    const weightS = (beforeS + afterS) / 2
    sum += weightS * Math.abs((first.tempC[i] ?? NaN) - otherC)
    coveredS += weightS
  }
  return coveredS > 0 ? { spreadC: sum / coveredS, coveredS } : null
}

function validPoints(series: ReadingSeries): { timeS: number[]; tempC: number[] } {
  const points: { timeS: number[]; tempC: number[] } = { timeS: [], tempC: [] }
  for (let i = 0; i < series.timeS.length; i += 1) {
    const temp = series.tempC[i] ?? NaN
    if (!Number.isFinite(temp)) continue
    points.timeS.push(series.timeS[i] ?? NaN)
    points.tempC.push(temp)
  }
  return points
}

function otherTempC(
  other: { timeS: number[]; tempC: number[] },
  next: number,
  timeS: number,
  breakS: number,
): number | null {
  const afterS = other.timeS[next]
  const afterC = other.tempC[next]
  if (afterS === undefined || afterC === undefined) return null
  if (afterS === timeS) return afterC
  const beforeS = other.timeS[next - 1]
  const beforeC = other.tempC[next - 1]
  if (beforeS === undefined || beforeC === undefined || afterS - beforeS > breakS) return null
  return straightBetween(beforeS, beforeC, afterS, afterC, timeS)
}
