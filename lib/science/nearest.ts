import { warpingDistance } from './curve'
import { requireFinite, requireNotNegative, requireWhole } from './domain'
import { valueAt } from './straight-line'

/*
 * Which firings are most like one? (PRODUCT, "make me that one again".)
 *
 * A firing is laid down as a *stage curve*: each stage of the plan gives the same count of temperatures, taken at the
 * middles of so many equal parts of the stage as it was really fired. Two stage curves are therefore aligned by stage
 * (SCIENCE §7) before anything is compared; how long a stage took is a fact beside the curve, not in it. Only firings
 * with the same count of stages, read at the same place of the wood, may stand in one set: the caller sees to that.
 *
 * Distances, °C:
 * - `aligned`: root mean square difference, each stage weighing what the caller says (its planned minutes);
 * - `warped`: dynamic time warping within a band, divided by the count of temperatures, so that a climb which came a
 *   little sooner or later inside its stage costs little; every stage weighs alike.
 *
 * Most candidates are never compared in full. A lower bound, which can not exceed the distance, is taken first:
 * - aligned: means of pieces. By Cauchy and Schwarz the mean of squares is at least the square of the mean, piece by
 *   piece (piecewise aggregate approximation, Keogh et al., Knowledge and Information Systems 3 (2001) 263);
 * - warped: each temperature of the candidate outside the envelope of the wanted curve's band costs at least its
 *   distance from it, and the two ends cost theirs (Keogh and Ratanamahatana, same journal 7 (2005) 358).
 * Candidates are then taken in the order of their bounds until a bound exceeds the k-th best distance: what comes out is
 * exactly what comparing all of them would give.
 */

/** Temperatures of each stage, one stage after the other, °C. */
export type StageCurve = Float64Array

/** Temperatures that a stage is laid down with unless told otherwise: one in 15–30 s of a usual stage. */
export const STAGE_CURVE_POINTS = 32
/** Temperatures that one mean of the lower bound stands for. */
const PIECE_POINTS = 8
/** A bound is held against a distance with this much room for rounding. */
const ROUNDING = 1 - 1e-12

/**
 * Lays a firing down as a stage curve, from its readings with gaps joined.
 *
 * @param points times, s, never falling, and temperatures, °C, as many; straight between them
 * @param boundariesS start of the first stage, then the end of each, s; inside the points' span
 * @returns null when a temperature that is needed is not there (a gap left open, or a stage beyond the readings)
 * @throws RangeError for fewer than two boundaries, one that falls or is not finite, or no whole count of points
 */
export function stageCurve(
  points: { timeS: ArrayLike<number>; tempC: ArrayLike<number> },
  boundariesS: readonly number[],
  pointsPerStage: number = STAGE_CURVE_POINTS,
): StageCurve | null {
  requireWhole('pointsPerStage', pointsPerStage, 1)
  if (boundariesS.length < 2) throw new RangeError('boundariesS must hold at least two boundaries')
  const curve = new Float64Array((boundariesS.length - 1) * pointsPerStage)
  for (let stage = 0; stage < boundariesS.length - 1; stage += 1) {
    const startS = requireFinite(`boundariesS[${stage}]`, boundariesS[stage] ?? NaN)
    const endS = requireFinite(`boundariesS[${stage + 1}]`, boundariesS[stage + 1] ?? NaN)
    if (endS < startS)
      throw new RangeError(`boundariesS[${stage + 1}] must not fall: ${endS} after ${startS}`)
    for (let part = 0; part < pointsPerStage; part += 1) {
      const timeS = startS + ((part + 0.5) / pointsPerStage) * (endS - startS)
      const tempC = valueAt(points.timeS, points.tempC, timeS)
      if (Number.isNaN(tempC)) return null
      curve[stage * pointsPerStage + part] = tempC
    }
  }
  return curve
}

/** Many stage curves of one shape, packed with the means that the lower bound needs. Made once, asked often. */
export type CurveSet = {
  readonly stages: number
  readonly pointsPerStage: number
  readonly count: number
  /** Curve after curve. */
  readonly tempC: Float64Array
  /** Means of the pieces, curve after curve. */
  readonly meansC: Float64Array
  readonly piecesPerStage: number
}

/**
 * Packs stage curves for `nearestCurves`.
 *
 * @throws RangeError for a stage count or point count that is not whole, a curve of another length, or a temperature
 *   that is not finite
 */
export function createCurveSet(
  curves: readonly StageCurve[],
  stages: number,
  pointsPerStage: number = STAGE_CURVE_POINTS,
): CurveSet {
  requireWhole('stages', stages, 1)
  requireWhole('pointsPerStage', pointsPerStage, 1)
  const length = stages * pointsPerStage
  const piecesPerStage = Math.ceil(pointsPerStage / PIECE_POINTS)
  const tempC = new Float64Array(curves.length * length)
  const meansC = new Float64Array(curves.length * stages * piecesPerStage)
  curves.forEach((curve, i) => {
    requireCurve(`curves[${i}]`, curve, length)
    tempC.set(curve, i * length)
    meansC.set(pieceMeansC(curve, stages, pointsPerStage), i * stages * piecesPerStage)
  })
  return { stages, pointsPerStage, count: curves.length, tempC, meansC, piecesPerStage }
}

function requireCurve(name: string, curve: StageCurve, length: number): void {
  if (curve.length !== length)
    throw new RangeError(`${name} must hold ${length} temperatures, not ${curve.length}`)
  // The name is made only on failure: there are thousands of curves.
  const odd = curve.findIndex((tempC) => !Number.isFinite(tempC))
  if (odd !== -1) requireFinite(`${name}[${odd}]`, curve[odd] ?? NaN)
}

/** Mean temperature of each piece of each stage; the last piece of a stage takes what is left. */
function pieceMeansC(curve: ArrayLike<number>, stages: number, pointsPerStage: number): Float64Array {
  const pieces = Math.ceil(pointsPerStage / PIECE_POINTS)
  return Float64Array.from({ length: stages * pieces }, (_, index) => {
    const stage = Math.floor(index / pieces)
    const from = (index % pieces) * PIECE_POINTS
    const to = Math.min(pointsPerStage, from + PIECE_POINTS)
    let sum = 0
    for (let i = from; i < to; i += 1) sum += curve[stage * pointsPerStage + i] ?? NaN
    return sum / (to - from)
  })
}

export type NearestRequest = {
  wanted: StageCurve
  among: CurveSet
  /** How many; fewer come back when the set holds fewer. */
  k: number
  /** What each stage weighs, 0 or more, not all 0: usually its planned minutes. Only shares of their sum matter. */
  stageWeights: readonly number[]
  /** Default 'aligned'. */
  distance?: 'aligned' | 'warped'
  /** Half-width of the band of 'warped', in temperatures; default a tenth of the curve. */
  bandPoints?: number
}

/** How one stage of a candidate differs from the wanted one's, °C: root mean square, mean and largest, candidate less wanted. */
export type StageDifference = { rmsC: number; meanC: number; largestC: number }

/** One of the nearest: its place in the set, its distance, and stage by stage what makes it. */
export type NearestCurve = { index: number; distanceC: number; stages: StageDifference[] }

export type NearestResult = {
  /** Nearest first; of equal ones the earlier in the set. */
  nearest: NearestCurve[]
  /** How many were compared in full; the rest were ruled out by the lower bound. */
  comparedCount: number
}

/**
 * The `k` stage curves of a set that are nearest to a wanted one: exactly those that comparing all would give.
 *
 * @throws RangeError for a wanted curve or weights of another shape, a weight below 0 or none above 0, or a k or band
 *   that is not a whole number (from 1 and 0)
 */
export function nearestCurves(request: NearestRequest): NearestResult {
  const { among, k } = request
  requireRequest(request)
  const measure = request.distance === 'warped' ? warpedMeasure(request) : alignedMeasure(request)
  const bounds = Float64Array.from({ length: among.count }, (_, i) => measure.lowerBound(i) * ROUNDING)
  const order = Uint32Array.from({ length: among.count }, (_, i) => i)
  order.sort((a, b) => (bounds[a] ?? 0) - (bounds[b] ?? 0))
  const best: { index: number; distanceC: number }[] = []
  let comparedCount = 0
  for (const index of order) {
    const worstC = best.length < k ? Infinity : (best.at(-1)?.distanceC ?? Infinity)
    if ((bounds[index] ?? 0) > worstC) break
    const distanceC = measure.distanceC(index, worstC)
    comparedCount += 1
    if (distanceC === Infinity) continue
    const at = best.findLastIndex(
      (other) => other.distanceC < distanceC || (other.distanceC === distanceC && other.index < index),
    )
    best.splice(at + 1, 0, { index, distanceC })
    if (best.length > k) best.pop()
  }
  return {
    nearest: best.map(({ index, distanceC }) => ({
      index,
      distanceC,
      stages: stageDifferences(request.wanted, among, index),
    })),
    comparedCount,
  }
}

function requireRequest({ wanted, among, k, stageWeights, bandPoints }: NearestRequest): void {
  requireCurve('wanted', wanted, among.stages * among.pointsPerStage)
  requireWhole('k', k, 1)
  if (stageWeights.length !== among.stages) {
    throw new RangeError(`stageWeights must hold ${among.stages} weights, not ${stageWeights.length}`)
  }
  stageWeights.forEach((weight, i) => requireNotNegative(`stageWeights[${i}]`, weight))
  if (!stageWeights.some((weight) => weight > 0))
    throw new RangeError('stageWeights must hold a weight above 0')
  if (bandPoints !== undefined) requireWhole('bandPoints', bandPoints, 0)
}

/** A distance to the wanted curve; it may answer Infinity as soon as it is larger than `giveUpAboveC`. */
type Measure = {
  lowerBound: (index: number) => number
  distanceC: (index: number, giveUpAboveC: number) => number
}

function alignedMeasure({ wanted, among, stageWeights }: NearestRequest): Measure {
  const { stages, pointsPerStage, piecesPerStage, tempC, meansC } = among
  const weightSum = stageWeights.reduce((sum, weight) => sum + weight, 0)
  const weights = Float64Array.from(stageWeights, (weight) => weight / weightSum / pointsPerStage)
  const wantedMeansC = pieceMeansC(wanted, stages, pointsPerStage)
  const piecePoints = Float64Array.from({ length: piecesPerStage }, (_, piece) =>
    Math.min(PIECE_POINTS, pointsPerStage - piece * PIECE_POINTS),
  )
  return {
    lowerBound(index) {
      let squares = 0
      for (let stage = 0; stage < stages; stage += 1) {
        let ofStage = 0
        for (let piece = 0; piece < piecesPerStage; piece += 1) {
          const i = stage * piecesPerStage + piece
          const differenceC = (meansC[index * stages * piecesPerStage + i] ?? NaN) - (wantedMeansC[i] ?? NaN)
          ofStage += (piecePoints[piece] ?? NaN) * differenceC * differenceC
        }
        squares += (weights[stage] ?? NaN) * ofStage
      }
      return Math.sqrt(squares)
    },
    distanceC(index) {
      let squares = 0
      for (let stage = 0; stage < stages; stage += 1) {
        let ofStage = 0
        const first = stage * pointsPerStage
        for (let i = first; i < first + pointsPerStage; i += 1) {
          const differenceC = (tempC[index * stages * pointsPerStage + i] ?? NaN) - (wanted[i] ?? NaN)
          ofStage += differenceC * differenceC
        }
        squares += (weights[stage] ?? NaN) * ofStage
      }
      return Math.sqrt(squares)
    },
  }
}

function warpedMeasure({ wanted, among, bandPoints }: NearestRequest): Measure {
  const length = wanted.length
  const reach = bandPoints ?? Math.floor(length / 10)
  const { highC, lowC } = envelopeC(wanted, reach)
  const { tempC } = among
  return {
    lowerBound(index) {
      let sum = 0
      const first = index * length
      for (let i = 0; i < length; i += 1) {
        const valueC = tempC[first + i] ?? NaN
        // Both ends are matched with each other by every path, whatever the band.
        if (i === 0 || i === length - 1) sum += Math.abs(valueC - (wanted[i] ?? NaN))
        else sum += Math.max(0, valueC - (highC[i] ?? NaN), (lowC[i] ?? NaN) - valueC)
      }
      return sum / length
    },
    distanceC(index, giveUpAboveC) {
      const candidate = tempC.subarray(index * length, (index + 1) * length)
      // A hair of room, so that what is exactly as far as the k-th best is still told apart by its place.
      return warpingDistance(wanted, candidate, reach, (giveUpAboveC * length) / ROUNDING) / length
    },
  }
}

/** Highest and lowest of a curve within `reach` points of each of its points, °C. */
function envelopeC(curve: StageCurve, reach: number): { highC: Float64Array; lowC: Float64Array } {
  const highC = new Float64Array(curve.length)
  const lowC = new Float64Array(curve.length)
  for (let i = 0; i < curve.length; i += 1) {
    let high = -Infinity
    let low = Infinity
    for (let j = Math.max(0, i - reach); j <= Math.min(curve.length - 1, i + reach); j += 1) {
      high = Math.max(high, curve[j] ?? NaN)
      low = Math.min(low, curve[j] ?? NaN)
    }
    highC[i] = high
    lowC[i] = low
  }
  return { highC, lowC }
}

function stageDifferences(wanted: StageCurve, among: CurveSet, index: number): StageDifference[] {
  const { stages, pointsPerStage, tempC } = among
  return Array.from({ length: stages }, (_, stage) => {
    let squares = 0
    let sum = 0
    let largestC = 0
    const first = stage * pointsPerStage
    for (let i = first; i < first + pointsPerStage; i += 1) {
      const differenceC = (tempC[index * wanted.length + i] ?? NaN) - (wanted[i] ?? NaN)
      squares += differenceC * differenceC
      sum += differenceC
      if (Math.abs(differenceC) > Math.abs(largestC)) largestC = differenceC
    }
    return { rmsC: Math.sqrt(squares / pointsPerStage), meanC: sum / pointsPerStage, largestC }
  })
}
