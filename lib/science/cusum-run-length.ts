import erfc from '@stdlib/math-base-special-erfc'
import { LuDecomposition, Matrix } from 'ml-matrix'
import { requireFinite, requireNotNegative, requirePositive } from './domain'

/** Chance that a standard normal value lies below `z`. */
function normalCdf(z: number): number {
  return 0.5 * erfc(-z / Math.SQRT2)
}

function normalDensity(z: number): number {
  return Math.exp(-0.5 * z * z) / Math.sqrt(2 * Math.PI)
}

/** Nodes and weights of Gauss and Legendre's rule on [0, length], by Newton's method on the Legendre polynomial. */
function gaussLegendre(count: number, length: number): { nodes: number[]; weights: number[] } {
  const nodes: number[] = []
  const weights: number[] = []
  for (let i = 0; i < count; i += 1) {
    let x = Math.cos((Math.PI * (i + 0.75)) / (count + 0.5))
    let slope = 1
    for (let step = 0; step < 100; step += 1) {
      let [value, last] = [x, 1]
      for (let k = 2; k <= count; k += 1)
        [value, last] = [((2 * k - 1) * x * value - (k - 1) * last) / k, value]
      slope = (count * (x * value - last)) / (x * x - 1)
      const move = value / slope
      x -= move
      if (Math.abs(move) < 1e-15) break
    }
    nodes.push((length * (1 + x)) / 2)
    weights.push(length / ((1 - x * x) * slope * slope))
  }
  return { nodes, weights }
}

const NODES = 40

/** Mean count of values until one sum, begun at 0, exceeds h, when the values' mean lies `shift` sigma above target. */
function oneSidedRunLength(k: number, h: number, shift: number): number {
  const { nodes, weights } = gaussLegendre(NODES, h)
  // The sum 0 is a state of its own, since the sums are held there; the others are the rule's nodes.
  const states = [0, ...nodes]
  const chances = Matrix.eye(states.length)
  states.forEach((from, i) => {
    states.forEach((to, j) => {
      const step = to - from + k - shift
      const chance = j === 0 ? normalCdf(step) : (weights[j - 1] ?? 0) * normalDensity(step)
      chances.set(i, j, chances.get(i, j) - chance)
    })
  })
  return new LuDecomposition(chances).solve(Matrix.ones(states.length, 1)).get(0, 0)
}

/**
 * Average run length of a two-sided tabular CUSUM: how many values pass, on average, until it signals. With no shift
 * that is the distance between false alarms. From the integral equation of one sum (Page, Biometrika 41 (1954) 100) by
 * Gauss–Legendre quadrature, the two sums joined by 1/ARL = 1/ARL⁺ + 1/ARL⁻. Normal, independent values.
 *
 * @param k allowance, h decision limit, shift of the mean from target, all in standard deviations of one value
 * @throws RangeError for k below 0, h not above 0, or a shift that is not finite
 */
export function cusumAverageRunLength(options: { k: number; h: number; shiftSigma: number }): number {
  const k = requireNotNegative('k', options.k)
  const h = requirePositive('h', options.h)
  const shift = requireFinite('shiftSigma', options.shiftSigma)
  return 1 / (1 / oneSidedRunLength(k, h, shift) + 1 / oneSidedRunLength(k, h, -shift))
}
