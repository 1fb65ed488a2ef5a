import erfc from '@stdlib/math-base-special-erfc'
import { LuDecomposition, Matrix } from 'ml-matrix'
import { requireEqualLength, requireNumbers } from './domain'

/**
 * Linear regression with results below a limit (Tobin 1958), by maximum likelihood with normal errors: a result below
 * its limit counts with the probability of being below it, never as the limit, half of it, or zero.
 */

export type CensoredRegressionInput = {
  /** One row of the design for each result, the constant's 1 included. */
  design: readonly (readonly number[])[]
  /** The result, or its limit where `isBelow`. */
  y: readonly number[]
  isBelow: readonly boolean[]
}

export type CensoredRegression = {
  coefficients: number[]
  /** Of the coefficients, with the residual variance of `residualSd`. */
  covariance: number[][]
  /** √(n/(n − p))·σ̂, so that without results below a limit this is exactly the residual sd of least squares. */
  residualSd: number
  logLikelihood: number
}

const MOST_STEPS = 200
const HALF_LOG_2_PI = 0.5 * Math.log(2 * Math.PI)

/** ln Φ(a) and φ(a)/Φ(a). Far below 0 both come from the asymptotic series of Mills' ratio, to 1e-11 at −25. */
function lowerTail(a: number): { logProbability: number; ratio: number } {
  const logDensity = -0.5 * a * a - HALF_LOG_2_PI
  if (a > -25) {
    const logProbability = Math.log(0.5 * erfc(-a / Math.SQRT2))
    return { logProbability, ratio: Math.exp(logDensity - logProbability) }
  }
  const u = 1 / (a * a)
  const mills = (1 - u * (1 - 3 * u * (1 - 5 * u * (1 - 7 * u)))) / -a
  return { logProbability: logDensity + Math.log(mills), ratio: 1 / mills }
}

type Point = { logLikelihood: number; gradient: number[]; information: number[][] }

/**
 * Log-likelihood in Olsen's parameters (1978), γ = β/σ and θ = 1/σ, in which it is concave, so that Newton's method
 * finds the one maximum. Result: ln θ − ½(θy − x·γ)²; below a limit: ln Φ(θy − x·γ).
 */
function likelihoodAt(input: CensoredRegressionInput, parameters: readonly number[]): Point | null {
  const count = parameters.length
  const theta = parameters[count - 1] ?? 0
  if (!(theta > 0)) return null
  const gradient = parameters.map(() => 0)
  const information = parameters.map(() => parameters.map(() => 0))
  let logLikelihood = 0
  for (const [i, row] of input.design.entries()) {
    const y = input.y[i] ?? 0
    const off = theta * y - row.reduce((sum, value, j) => sum + value * (parameters[j] ?? 0), 0)
    // The derivative of `off` by each parameter.
    const slopes = [...row.map((value) => -value), y]
    let first = -off
    let second = 1
    if (input.isBelow[i] === true) {
      const { logProbability, ratio } = lowerTail(off)
      logLikelihood += logProbability
      first = ratio
      second = ratio * (ratio + off)
    } else {
      logLikelihood += Math.log(theta) - 0.5 * off * off - HALF_LOG_2_PI
      gradient[count - 1] = (gradient[count - 1] ?? 0) + 1 / theta
      addTo(information, count - 1, count - 1, 1 / (theta * theta))
    }
    slopes.forEach((slope, j) => {
      gradient[j] = (gradient[j] ?? 0) + first * slope
      slopes.forEach((other, k) => addTo(information, j, k, second * slope * other))
    })
  }
  return Number.isFinite(logLikelihood) ? { logLikelihood, gradient, information } : null
}

function addTo(table: number[][], i: number, j: number, value: number): void {
  const row = table[i]
  if (row !== undefined) row[j] = (row[j] ?? 0) + value
}

function failFit(reason: string): never {
  const failure = new Error(reason)
  failure.name = 'FitError'
  throw failure
}

/** Newton's method with halved steps, from `start`, until what a step still promises is rounding. */
function climb(input: CensoredRegressionInput, start: readonly number[]): { at: number[]; point: Point } {
  let at = [...start]
  let point = likelihoodAt(input, at)
  let lastPromise = Infinity
  for (let step = 0; step < MOST_STEPS && point !== null; step += 1) {
    const move = solve(point.information, point.gradient)
    const promise = point.gradient.reduce((sum, value, j) => sum + value * (move[j] ?? 0), 0)
    const size = Math.max(1, Math.abs(point.logLikelihood))
    const isTop = promise < 1e-12 * size
    // At the top the likelihood shows rounding only: there steps go on as long as they promise less and less.
    if (promise < 1e-26 * size || (isTop && promise > lastPromise / 2)) return { at, point }
    lastPromise = promise
    const least: number = point.logLikelihood - (isTop ? 1e-12 * size : 0)
    let next: { at: number[]; point: Point } | null = null
    for (let share = 1; share > 1e-12 && next === null; share /= 2) {
      const tried = at.map((value, j) => value + share * (move[j] ?? 0))
      const found = likelihoodAt(input, tried)
      if (found !== null && found.logLikelihood > least) next = { at: tried, point: found }
    }
    if (next === null) return { at, point }
    ;({ at, point } = next)
    if ((at.at(-1) ?? 0) > 1e9) {
      failFit('The results that were measured leave no residual: there is nothing to weigh by.')
    }
  }
  return failFit('No best fit was reached.')
}

function solve(matrix: readonly (readonly number[])[], right: readonly number[]): number[] {
  return invert(matrix).map((row) => row.reduce((sum, value, j) => sum + value * (right[j] ?? 0), 0))
}

function invert(matrix: readonly (readonly number[])[]): number[][] {
  const scale = matrix.map((row, i) => Math.sqrt(row[i] ?? 0))
  if (scale.some((size) => !(size > 0))) return failFit('The data say nothing about one of the parameters.')
  const scaled = new Matrix(
    matrix.map((row, i) => row.map((value, j) => value / ((scale[i] ?? 1) * (scale[j] ?? 1)))),
  )
  const decomposition = new LuDecomposition(scaled)
  if (decomposition.isSingular() || Math.abs(decomposition.determinant) < 1e-18) {
    return failFit('The data do not determine all parameters: two of them do the same to the curve.')
  }
  return decomposition
    .solve(Matrix.eye(scale.length))
    .to2DArray()
    .map((row, i) => row.map((value, j) => value / ((scale[i] ?? 1) * (scale[j] ?? 1))))
}

/**
 * Maximum likelihood fit of y = x·β + normal error, where some y are only known to be below their limit.
 *
 * Covariance from the observed information, carried from (γ, θ) to β and multiplied by n/(n − p), the correction of the
 * variance that makes it the one of least squares when nothing is below a limit (judgement where something is).
 *
 * @throws RangeError for no results, unequal lengths, not more results than columns, or a value that is not finite
 * @throws Error named FitError when the parameters are not determined, no result was measured, or nothing is left over
 */
export function censoredRegression(input: CensoredRegressionInput): CensoredRegression {
  const columns = input.design[0]?.length ?? 0
  requireNumbers('y', input.y, columns + 1)
  requireEqualLength('y', input.y, 'design', input.design)
  requireEqualLength('y', input.y, 'isBelow', input.isBelow)
  input.design.forEach((row, i) => requireNumbers(`design[${i}]`, row, columns))
  if (input.isBelow.every((isBelow) => isBelow)) return failFit('Every result is below its limit.')

  // In columns and results of size about 1, where Newton's steps are well behaved.
  const sizeY = Math.max(...input.y.map(Math.abs)) || 1
  const sizes = Array.from(
    { length: columns },
    (_, j) => Math.max(...input.design.map((row) => Math.abs(row[j] ?? 0))) || 1,
  )
  const scaled: CensoredRegressionInput = {
    design: input.design.map((row) => row.map((value, j) => value / (sizes[j] ?? 1))),
    y: input.y.map((value) => value / sizeY),
    isBelow: input.isBelow,
  }
  const { at, point } = climb(scaled, startOf(scaled, columns))
  const theta = at.at(-1) ?? 1
  const n = input.y.length
  const correction = n / (n - columns)
  const beta = at.slice(0, -1).map((value) => value / theta)
  const inner = invert(point.information)
  const carry = beta.map((value, i) => [...beta.map((_, j) => (i === j ? 1 / theta : 0)), -value / theta])
  const unit = (j: number) => sizeY / (sizes[j] ?? 1)
  return {
    coefficients: beta.map((value, j) => value * unit(j)),
    covariance: carry.map((left, i) =>
      carry.map((right, j) => correction * unit(i) * unit(j) * quadratic(left, inner, right)),
    ),
    residualSd: (Math.sqrt(correction) * sizeY) / theta,
    logLikelihood: point.logLikelihood - measuredCount(input) * Math.log(sizeY),
  }
}

function measuredCount(input: CensoredRegressionInput): number {
  return input.isBelow.filter((isBelow) => !isBelow).length
}

function quadratic(
  left: readonly number[],
  table: readonly (readonly number[])[],
  right: readonly number[],
): number {
  return table.reduce(
    (sum, row, i) =>
      sum + (left[i] ?? 0) * row.reduce((inner, value, j) => inner + value * (right[j] ?? 0), 0),
    0,
  )
}

/** Anywhere does, since there is one maximum: no slope, and a spread as large as the results. */
function startOf(input: CensoredRegressionInput, columns: number): number[] {
  const level = input.y.reduce((sum, value) => sum + value, 0) / input.y.length
  const spread = Math.sqrt(input.y.reduce((sum, value) => sum + (value - level) ** 2, 0) / input.y.length)
  return [...Array.from({ length: columns }, () => 0), 1 / Math.max(spread, 1e-3)]
}
