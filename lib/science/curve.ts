import { requireEqualLength, requireFinite, requireNumbers, requirePositive, requireWhole } from './domain'
import type { CurvePoint } from './heat-dose'

/**
 * Dynamic time warping distance of two series: the least Σ|aᵢ − bⱼ| over monotone paths with steps (1,0), (0,1), (1,1),
 * no weights, not normalised; in the series' own unit. With `band`, only |i − j| ≤ band; null when no path fits it.
 * (Sakoe and Chiba, IEEE Trans. ASSP 26 (1978) 43.)
 *
 * @throws RangeError for an empty series, a value that is not finite, or a band that is not a whole number from 0
 */
export function dynamicTimeWarping(a: readonly number[], b: readonly number[], band?: number): number | null {
  requireNumbers('a', a)
  requireNumbers('b', b)
  const reach = band === undefined ? Infinity : requireWhole('band', band, 0)
  if (Math.abs(a.length - b.length) > reach) return null
  return warpingDistance(Float64Array.from(a), Float64Array.from(b), reach)
}

/**
 * The same over arrays that are known to hold numbers, for whoever compares one curve with thousands; gives up and
 * returns Infinity once every path costs more than `giveUpAbove`. Two rows of the table are kept; of each only the band.
 *
 * @param reach at least the difference of the lengths
 */
export function warpingDistance(
  a: Float64Array,
  b: Float64Array,
  reach: number,
  giveUpAbove = Infinity,
): number {
  const columns = b.length
  let above = new Float64Array(columns + 2).fill(Infinity)
  let row = new Float64Array(columns + 2).fill(Infinity)
  above[0] = 0
  for (let i = 0; i < a.length; i += 1) {
    const from = Math.max(0, i - reach)
    const to = Math.min(columns - 1, i + reach)
    const value = a[i] ?? NaN
    // Left of the band there is no path; right of it no row has been yet.
    row[from] = Infinity
    let left = Infinity
    let least = Infinity
    let corner = above[from] ?? Infinity
    for (let j = from; j <= to; j += 1) {
      const up = above[j + 1] ?? Infinity
      let best = corner < up ? corner : up
      if (left < best) best = left
      left = best + Math.abs(value - (b[j] ?? NaN))
      row[j + 1] = left
      corner = up
      if (left < least) least = left
    }
    if (least > giveUpAbove) return Infinity
    const spare = above
    above = row
    row = spare
  }
  return above[columns] ?? Infinity
}

/**
 * Discrete Fréchet distance of two polygonal curves, Euclidean: the shortest leash with which both are walked point by
 * point without turning back (Eiter and Mannila 1994). Scale the axes before, if they have different units.
 *
 * @throws RangeError for an empty curve or a coordinate that is not finite
 */
export function discreteFrechet(
  p: readonly (readonly [number, number])[],
  q: readonly (readonly [number, number])[],
): number {
  requirePlanePoints('p', p)
  requirePlanePoints('q', q)
  const row = new Float64Array(q.length)
  p.forEach(([px, py], i) => {
    let left = Infinity
    let corner = Infinity
    q.forEach(([qx, qy], j) => {
      const distance = Math.hypot(px - qx, py - qy)
      const up = i === 0 ? Infinity : (row[j] ?? Infinity)
      const leash = i === 0 && j === 0 ? distance : Math.min(up, corner, left)
      left = Math.max(leash, distance)
      corner = up
      row[j] = left
    })
  })
  return row[q.length - 1] ?? 0
}

function requirePlanePoints(name: string, points: readonly (readonly [number, number])[]): void {
  if (points.length === 0) throw new RangeError(`${name} must hold at least one point`)
  points.forEach(([x, y], i) => {
    requireFinite(`${name}[${i}][0]`, x)
    requireFinite(`${name}[${i}][1]`, y)
  })
}

/** Window (an odd count of points), polynomial degree and derivative order of a filter; `spacing` in the time unit. */
export type SavitzkyGolayOptions = { window: number; degree: number; derivative: number; spacing: number }

/**
 * Gram polynomials of 2·half + 1 points and their derivatives at `at`: table[k][s], order k, derivative s (Gorry,
 * Analytical Chemistry 62 (1990) 570).
 */
function gramTable(at: number, half: number, degree: number, derivative: number): number[][] {
  const table: number[][] = [[1, ...Array.from({ length: derivative }, () => 0)]]
  for (let k = 1; k <= degree; k += 1) {
    const lower = table[k - 1] ?? []
    const lowest = table[k - 2] ?? []
    const divisor = k * (2 * half - k + 1)
    table.push(
      Array.from({ length: derivative + 1 }, (_, s) => {
        const first = at * (lower[s] ?? 0) + (s === 0 ? 0 : s * (lower[s - 1] ?? 0))
        return ((4 * k - 2) * first - (k - 1) * (2 * half + k) * (lowest[s] ?? 0)) / divisor
      }),
    )
  }
  return table
}

/** Weight of each Gram polynomial: (2k + 1)·(2m)!/(2m − k)! · (2m)!/(2m + k + 1)!, m half the window. */
function gramWeight(k: number, half: number): number {
  let weight = (2 * k + 1) / (2 * half + 1)
  for (let i = 1; i <= k; i += 1) weight *= (2 * half - i + 1) / (2 * half + i + 1)
  return weight
}

function fitWeights(options: SavitzkyGolayOptions, at: 'centre' | 'newest'): number[] {
  const { window, degree, derivative, spacing } = options
  requireWhole('window', window, 1)
  if (window % 2 === 0) throw new RangeError(`window must be an odd number of points, not ${window}`)
  requireWhole('degree', degree, 0)
  if (degree >= window) throw new RangeError(`degree must be below the window of ${window}, not ${degree}`)
  requireWhole('derivative', derivative, 0)
  if (derivative > degree)
    throw new RangeError(`derivative must not exceed the degree of ${degree}, not ${derivative}`)
  requirePositive('spacing', spacing)
  const half = (window - 1) / 2
  const target = gramTable(at === 'centre' ? 0 : half, half, degree, derivative)
  const scale = spacing ** derivative
  return Array.from({ length: window }, (_, i) => {
    const values = gramTable(i - half, half, degree, 0)
    let weight = 0
    for (let k = 0; k <= degree; k += 1) {
      weight += gramWeight(k, half) * (values[k]?.[0] ?? 0) * (target[k]?.[derivative] ?? 0)
    }
    return weight / scale
  })
}

/**
 * Savitzky–Golay weights for the window's centre, oldest point first: Σ wᵢ·yᵢ is the value (or the derivative, per
 * spacing^derivative) of the polynomial fitted to the window. Savitzky and Golay, Analytical Chemistry 36 (1964) 1627.
 *
 * @throws RangeError for an even window, a degree not below it, a derivative above the degree, or spacing not above 0
 */
export function savitzkyGolayWeights(options: SavitzkyGolayOptions): number[] {
  return fitWeights(options, 'centre')
}

/**
 * Weights of the slope at the window's newest point, oldest point first: the one-sided form for the live edge, where
 * nothing newer is known. Per unit of `spacing`.
 *
 * @throws RangeError as `savitzkyGolayWeights`
 */
export function liveEdgeSlopeWeights(options: { window: number; degree: number; spacing: number }): number[] {
  return fitWeights({ ...options, derivative: 1 }, 'newest')
}

const CLIMB_LEAST_POINTS = 4
const CLIMB_LEAST_SPAN_SHARE = 0.5

/**
 * Climb rate at the last reading, °C/min: the slope there of a parabola fitted by least squares to the last `windowS`
 * seconds, so that uneven spacing does no harm; on even spacing the one-sided Savitzky–Golay slope of degree 2.
 *
 * A temperature that is NaN is a missing reading and is left out. Null when the last one is missing, when there are
 * fewer than four readings, or when they span less than half the window: then no rate is known.
 *
 * @param timesS s, never falling
 * @param tempsC °C, as long as `timesS`; NaN where there is no reading
 * @throws RangeError for no readings, unequal lengths, a time that is not finite or falls, an infinite temperature, or a
 *   window not above 0
 */
export function climbRateCPerMin(
  timesS: readonly number[],
  tempsC: readonly number[],
  windowS: number = 30,
): number | null {
  requirePositive('windowS', windowS)
  requireReadings(timesS, tempsC)
  const lastTimeS = timesS.at(-1) ?? 0
  if (Number.isNaN(tempsC.at(-1) ?? NaN)) return null
  const ages: number[] = []
  const values: number[] = []
  for (let i = timesS.length - 1; i >= 0; i -= 1) {
    const age = ((timesS[i] ?? 0) - lastTimeS) / windowS
    if (age < -1 - 1e-9) break
    const value = tempsC[i] ?? NaN
    if (Number.isNaN(value)) continue
    ages.push(age)
    values.push(value)
  }
  const oldestAge = ages.at(-1) ?? 0
  if (ages.length < CLIMB_LEAST_POINTS || -oldestAge < CLIMB_LEAST_SPAN_SHARE) return null
  const slopePerWindow = slopeAtZero(ages, values)
  return slopePerWindow === null ? null : (slopePerWindow / windowS) * 60
}

function requireReadings(timesS: readonly number[], tempsC: readonly number[]): void {
  requireNumbers('timesS', timesS)
  requireEqualLength('timesS', timesS, 'tempsC', tempsC)
  tempsC.forEach((tempC, i) => {
    if (Math.abs(tempC) === Infinity)
      throw new RangeError(`tempsC[${i}] must be a finite number or NaN, not ${tempC}`)
    if ((timesS[i] ?? 0) < (timesS[i - 1] ?? -Infinity)) throw new RangeError(`timesS[${i}] must not fall`)
  })
}

/** Slope at u = 0 of the parabola fitted to (u, y), by orthogonal polynomials; null when u has fewer than 3 values. */
function slopeAtZero(us: readonly number[], ys: readonly number[]): number | null {
  const n = us.length
  const uMean = us.reduce((sum, u) => sum + u, 0) / n
  const yMean = ys.reduce((sum, y) => sum + y, 0) / n
  const linear = us.map((u) => u - uMean)
  const linearSquares = linear.reduce((sum, v) => sum + v * v, 0)
  const shift = us.reduce((sum, u, i) => sum + u * (linear[i] ?? 0) ** 2, 0) / linearSquares
  const square = us.map((u, i) => (u - shift) * (linear[i] ?? 0) - linearSquares / n)
  const squareSquares = square.reduce((sum, v) => sum + v * v, 0)
  if (!(squareSquares > 1e-12 * n)) return null
  const along = (basis: readonly number[]) => ys.reduce((sum, y, i) => sum + (y - yMean) * (basis[i] ?? 0), 0)
  return along(linear) / linearSquares - ((shift + uMean) * along(square)) / squareSquares
}

/**
 * Monotone piecewise cubic (PCHIP): slopes by Fritsch and Butland's weighted harmonic mean, 0 at local extremes, clamped
 * three-point slopes at the ends (Fritsch and Carlson 1980; SLATEC PCHIM). Never overshoots its data.
 *
 * The returned function throws RangeError outside [first x, last x]: it does not extrapolate.
 *
 * @param x strictly rising, at least two
 * @throws RangeError for fewer than two points, unequal lengths, a value that is not finite, or x that does not rise
 */
export function pchip(x: readonly number[], y: readonly number[]): (at: number) => number {
  requireNumbers('x', x, 2)
  requireNumbers('y', y, 2)
  requireEqualLength('x', x, 'y', y)
  const xs = Float64Array.from(x)
  const ys = Float64Array.from(y)
  const count = xs.length
  const widths = new Float64Array(count - 1)
  const slopes = new Float64Array(count - 1)
  for (let i = 0; i < count - 1; i += 1) {
    const width = (xs[i + 1] ?? 0) - (xs[i] ?? 0)
    if (!(width > 0)) throw new RangeError(`x[${i + 1}] must lie above x[${i}]`)
    widths[i] = width
    slopes[i] = ((ys[i + 1] ?? 0) - (ys[i] ?? 0)) / width
  }
  const tangents = pchipTangents(widths, slopes)
  const firstX = xs[0] ?? 0
  const lastX = xs[count - 1] ?? 0
  return (at) => {
    if (!(at >= firstX && at <= lastX))
      throw new RangeError(`at must lie from ${firstX} to ${lastX}, not ${at}`)
    let low = 0
    let high = count - 1
    while (high - low > 1) {
      const middle = (low + high) >> 1
      if ((xs[middle] ?? 0) <= at) low = middle
      else high = middle
    }
    const width = widths[low] ?? 1
    const s = (at - (xs[low] ?? 0)) / width
    const rest = 1 - s
    return (
      (1 + 2 * s) * rest * rest * (ys[low] ?? 0) +
      s * s * (3 - 2 * s) * (ys[low + 1] ?? 0) +
      width * s * rest * (rest * (tangents[low] ?? 0) - s * (tangents[low + 1] ?? 0))
    )
  }
}

function pchipTangents(widths: Float64Array, slopes: Float64Array): Float64Array {
  const last = slopes.length
  const tangents = new Float64Array(last + 1)
  const width = (i: number) => widths[i] ?? 0
  const slope = (i: number) => slopes[i] ?? 0
  if (last === 1) return tangents.fill(slope(0))
  for (let i = 1; i < last; i += 1) {
    const left = slope(i - 1)
    const right = slope(i)
    if (Math.sign(left) * Math.sign(right) <= 0) continue
    const leftWeight = width(i - 1) + 2 * width(i)
    const rightWeight = 2 * width(i - 1) + width(i)
    tangents[i] = (leftWeight + rightWeight) / (leftWeight / left + rightWeight / right)
  }
  tangents[0] = endTangent(width(0), width(1), slope(0), slope(1))
  tangents[last] = endTangent(width(last - 1), width(last - 2), slope(last - 1), slope(last - 2))
  return tangents
}

/** Three-point end slope that keeps the shape: 0 when it turns against its segment, at most three times its slope. */
function endTangent(width: number, nextWidth: number, slope: number, nextSlope: number): number {
  const tangent = ((2 * width + nextWidth) * slope - width * nextSlope) / (width + nextWidth)
  if (Math.sign(tangent) !== Math.sign(slope)) return 0
  if (Math.sign(slope) !== Math.sign(nextSlope) && Math.abs(tangent) > 3 * Math.abs(slope)) return 3 * slope
  return tangent
}

/**
 * How far one series lies from another of the same length, value minus reference, in their own unit: root mean square,
 * mean absolute, mean, and largest absolute difference.
 *
 * @throws RangeError for empty series, unequal lengths, or a value that is not finite
 */
export function curveDeviation(
  reference: readonly number[],
  value: readonly number[],
): { rmse: number; mae: number; bias: number; maxAbs: number } {
  requireNumbers('reference', reference)
  requireNumbers('value', value)
  requireEqualLength('reference', reference, 'value', value)
  let squares = 0
  let absolutes = 0
  let sum = 0
  let maxAbs = 0
  reference.forEach((wanted, i) => {
    const error = (value[i] ?? 0) - wanted
    squares += error * error
    absolutes += Math.abs(error)
    sum += error
    maxAbs = Math.max(maxAbs, Math.abs(error))
  })
  const n = reference.length
  return { rmse: Math.sqrt(squares / n), mae: absolutes / n, bias: sum / n, maxAbs }
}

/**
 * Thins a series for display: in each of `buckets` equal spans of time it keeps the first, the last, the least and the
 * greatest reading. NaN is a gap: of each run of NaN one is kept, with the readings on both sides, so that a gap stays
 * as wide as it was. What is kept is a subset in order; stored data are never altered. A series of at most 4·buckets
 * readings is returned whole.
 *
 * @throws RangeError for no readings, unequal lengths, a time that is not finite or falls, an infinite value, or
 *   buckets that are not a whole number from 1
 */
export function downsampleKeepingExtremes(
  times: readonly number[],
  values: readonly number[],
  buckets: number,
): { times: number[]; values: number[] } {
  requireWhole('buckets', buckets, 1)
  requireNumbers('times', times)
  requireEqualLength('times', times, 'values', values)
  const timeAt = (i: number) => times[i] ?? 0
  const valueAt = (i: number) => values[i] ?? NaN
  for (let i = 0; i < times.length; i += 1) {
    if (Math.abs(valueAt(i)) === Infinity) throw new RangeError(`values[${i}] must be a finite number or NaN`)
    if (i > 0 && timeAt(i) < timeAt(i - 1)) throw new RangeError(`times[${i}] must not fall`)
  }
  const last = times.length - 1
  if (times.length <= 4 * buckets) return { times: [...times], values: [...values] }

  const isKept = new Uint8Array(times.length)
  const span = timeAt(last) - timeAt(0)
  const bucketOf = (i: number) =>
    span === 0 ? 0 : Math.min(buckets - 1, Math.floor(((timeAt(i) - timeAt(0)) / span) * buckets))
  for (let start = 0; start <= last;) {
    const bucket = bucketOf(start)
    let end = start
    let least = -1
    let greatest = -1
    for (; end <= last && bucketOf(end) === bucket; end += 1) {
      const value = valueAt(end)
      if (Number.isNaN(value)) continue
      if (least < 0 || value < valueAt(least)) least = end
      if (greatest < 0 || value > valueAt(greatest)) greatest = end
    }
    for (const i of [start, least, greatest, end - 1]) if (i >= 0) isKept[i] = 1
    start = end
  }
  for (let i = 0; i <= last; i += 1) {
    const isGap = Number.isNaN(valueAt(i))
    const wasGap = i > 0 && Number.isNaN(valueAt(i - 1))
    if (isGap && !wasGap) {
      isKept[i] = 1
      if (i > 0) isKept[i - 1] = 1
    }
    if (!isGap && wasGap) isKept[i] = 1
  }
  const kept = times.map((_, i) => i).filter((i) => isKept[i] === 1)
  return { times: kept.map(timeAt), values: kept.map(valueAt) }
}

/**
 * Stage alignment: takes a time on one curve to the time on another at which the same share of the same stage has gone
 * by. Both are given by their stage boundaries: start of the first stage, then the end of each. Null outside them. A
 * stage without length on the first curve is its boundary, which goes to that stage's end.
 *
 * @param fromBoundariesS s, never falling, at least two
 * @param toBoundariesS s, never falling, as many
 * @throws RangeError for fewer than two boundaries, unequal counts, or a boundary that is not finite or falls
 */
export function alignTimeByStage(
  fromBoundariesS: readonly number[],
  toBoundariesS: readonly number[],
): (timeS: number) => number | null {
  requireBoundaries('fromBoundariesS', fromBoundariesS)
  requireBoundaries('toBoundariesS', toBoundariesS)
  requireEqualLength('fromBoundariesS', fromBoundariesS, 'toBoundariesS', toBoundariesS)
  const from = [...fromBoundariesS]
  const to = [...toBoundariesS]
  const last = from.length - 1
  return (timeS) => {
    requireFinite('timeS', timeS)
    if (timeS < (from[0] ?? 0) || timeS > (from[last] ?? 0)) return null
    let stage = last
    while (stage > 0 && (from[stage] ?? 0) > timeS) stage -= 1
    const start = from[stage] ?? 0
    const target = to[stage] ?? 0
    const end = from[stage + 1]
    if (end === undefined || timeS === start) return target
    return target + ((timeS - start) / (end - start)) * ((to[stage + 1] ?? target) - target)
  }
}

function requireBoundaries(name: string, boundariesS: readonly number[]): void {
  requireNumbers(name, boundariesS, 2)
  boundariesS.forEach((boundaryS, i) => {
    if (boundaryS < (boundariesS[i - 1] ?? -Infinity)) throw new RangeError(`${name}[${i}] must not fall`)
  })
}

/**
 * A curve moved onto another's stages by `alignTimeByStage`; points outside the stages are left out.
 *
 * @throws RangeError as `alignTimeByStage`, and for a point whose time is not finite
 */
export function alignCurveByStage(
  points: readonly CurvePoint[],
  fromBoundariesS: readonly number[],
  toBoundariesS: readonly number[],
): CurvePoint[] {
  const alignTime = alignTimeByStage(fromBoundariesS, toBoundariesS)
  return points.flatMap((point) => {
    const timeS = alignTime(point.timeS)
    return timeS === null ? [] : [{ timeS, tempC: point.tempC }]
  })
}
