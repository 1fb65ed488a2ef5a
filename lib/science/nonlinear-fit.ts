import { Matrix, QrDecomposition } from 'ml-matrix'
import { requireEqualLength, requireNumbers } from './domain'

/** What `nonlinearLeastSquares` fits: the model's value at `x` for parameters `b`; x may be a number or a row of them. */
export type NonlinearFitInput<X> = {
  model: (b: readonly number[], x: X) => number
  start: readonly number[]
  x: readonly X[]
  y: readonly number[]
}

export type NonlinearFit = {
  parameters: number[]
  standardErrors: number[]
  residualSumOfSquares: number
  /** √(residual sum of squares / degrees of freedom). */
  residualSd: number
  degreesOfFreedom: number
  /** Covariance of the parameters, residual variance included: for intervals of a prediction. */
  covariance: number[][]
}

/** A fit as a search carries it. */
type State = { b: number[]; residuals: number[]; rss: number }

/** How one search behaves; several are run, because no one of them gets down from every start. */
type Search = {
  firstDamping: number
  keepsLargestScale: boolean
  /** Largest change of a parameter in one step, as a share of its size: keeps far starts from leaping away. */
  mostChange: number
}

const SEARCHES: readonly Search[] = [
  { firstDamping: 1e-3, keepsLargestScale: true, mostChange: Infinity },
  { firstDamping: 1e-3, keepsLargestScale: false, mostChange: Infinity },
  { firstDamping: 10, keepsLargestScale: true, mostChange: Infinity },
  { firstDamping: 1e-3, keepsLargestScale: true, mostChange: 0.1 },
  { firstDamping: 1e-3, keepsLargestScale: true, mostChange: 0.3 },
  { firstDamping: 1e-3, keepsLargestScale: false, mostChange: 0.5 },
]
const MOST_STEPS = 3000

function residualsAt<X>(input: NonlinearFitInput<X>, b: readonly number[]): State | null {
  const residuals: number[] = []
  let rss = 0
  for (let i = 0; i < input.x.length; i += 1) {
    const x = input.x[i]
    const y = input.y[i]
    if (x === undefined || y === undefined) return null
    const residual = y - input.model(b, x)
    residuals.push(residual)
    rss += residual * residual
  }
  return Number.isFinite(rss) ? { b: [...b], residuals, rss } : null
}

/** Width of a difference for a parameter: a share of the parameter, or of its start when it is near zero. */
function stepWidth(value: number, start: number, share: number): number {
  const size = Math.max(Math.abs(value), 1e-6 * Math.abs(start))
  return size === 0 ? share : size * share
}

/**
 * Jacobian of the model by central differences: error of order h² in a search, h⁴ (five-point formula) in the polish.
 * Null where the model has no finite value.
 */
function jacobianAt<X>(input: NonlinearFitInput<X>, b: readonly number[], isFine: boolean): Matrix | null {
  const share = isFine ? 1e-4 : 6e-6
  const jacobian = Matrix.zeros(input.x.length, b.length)
  const moved = [...b]
  for (let j = 0; j < b.length; j += 1) {
    const at = b[j] ?? 0
    const width = stepWidth(at, input.start[j] ?? 0, share)
    const valueAt = (x: X, offset: number) => {
      moved[j] = at + offset
      return input.model(moved, x)
    }
    for (let i = 0; i < input.x.length; i += 1) {
      const x = input.x[i]
      if (x === undefined) return null
      const near = valueAt(x, width) - valueAt(x, -width)
      const slope = isFine
        ? (8 * near - (valueAt(x, 2 * width) - valueAt(x, -2 * width))) / (12 * width)
        : near / (2 * width)
      if (!Number.isFinite(slope)) return null
      jacobian.set(i, j, slope)
    }
    moved[j] = at
  }
  return jacobian
}

function columnNorms(jacobian: Matrix): number[] {
  return Array.from({ length: jacobian.columns }, (_, j) => Math.hypot(...jacobian.getColumn(j)))
}

function withScaledColumns(jacobian: Matrix, scale: readonly number[]): Matrix {
  const scaled = jacobian.clone()
  scale.forEach((size, j) => scaled.mulColumn(j, 1 / size))
  return scaled
}

/** Damped step in scaled parameters: least squares of [J; √λ·I] against [r; 0] by QR, never the normal equations. */
function dampedStep(scaled: Matrix, residuals: readonly number[], damping: number): number[] | null {
  const { rows, columns } = scaled
  const stacked = Matrix.zeros(rows + columns, columns)
  stacked.setSubMatrix(scaled, 0, 0)
  const root = Math.sqrt(damping)
  for (let j = 0; j < columns; j += 1) stacked.set(rows + j, j, root)
  const right = Matrix.zeros(rows + columns, 1)
  residuals.forEach((residual, i) => right.set(i, 0, residual))
  const qr = new QrDecomposition(stacked)
  return qr.isFullRank() ? qr.solve(right).getColumn(0) : null
}

/** Fall of Σr² that the straight model promises for a scaled step: ‖r‖² − ‖r − J·s‖². */
function promisedFall(scaled: Matrix, state: State, step: readonly number[]): number {
  const change = scaled.mmul(Matrix.columnVector([...step])).getColumn(0)
  return change.reduce((sum, value, i) => sum + value * (2 * (state.residuals[i] ?? 0) - value), 0)
}

/** Shortens a scaled step so that no parameter changes by more than `mostChange` of its size. */
function limitStep(
  step: number[] | null,
  b: readonly number[],
  scale: readonly number[],
  mostChange: number,
): number[] | null {
  if (step === null || mostChange === Infinity) return step
  let share = 1
  step.forEach((move, j) => {
    const change = Math.abs(move / (scale[j] ?? 1))
    const size = Math.abs(b[j] ?? 0)
    if (size > 0 && change > mostChange * size) share = Math.min(share, (mostChange * size) / change)
  })
  return step.map((move) => move * share)
}

/** Levenberg–Marquardt with column scaling (Moré 1978) and Nielsen's damping rule (1999). */
function searchFrom<X>(input: NonlinearFitInput<X>, first: State, search: Search): State {
  let state = first
  let damping = search.firstDamping
  let growth = 2
  let scale = input.start.map(() => 0)
  let stalled = 0
  let jacobian = jacobianAt(input, state.b, false)
  for (let step = 0; step < MOST_STEPS && jacobian !== null && stalled < 5; step += 1) {
    const norms = columnNorms(jacobian)
    scale = norms.map((norm, j) => {
      const kept = search.keepsLargestScale ? Math.max(norm, scale[j] ?? 0) : norm
      return kept > 0 ? kept : 1
    })
    const scaled = withScaledColumns(jacobian, scale)
    const move = limitStep(dampedStep(scaled, state.residuals, damping), state.b, scale, search.mostChange)
    const trial =
      move &&
      residualsAt(
        input,
        state.b.map((value, j) => value + (move[j] ?? 0) / (scale[j] ?? 1)),
      )
    if (move && trial && trial.rss < state.rss) {
      const gain = (state.rss - trial.rss) / promisedFall(scaled, state, move)
      damping = Math.max(damping * Math.max(1 / 3, 1 - (2 * gain - 1) ** 3), 1e-18)
      growth = 2
      stalled = state.rss - trial.rss < 1e-14 * state.rss ? stalled + 1 : 0
      state = trial
      jacobian = jacobianAt(input, state.b, false)
    } else {
      damping *= growth
      growth *= 2
      if (damping > 1e20) break
    }
  }
  return state
}

/** Gauss–Newton with the fine Jacobian, which takes a good fit to the last digits; steps that worsen it are refused. */
function polish<X>(input: NonlinearFitInput<X>, found: State): State {
  let state = found
  let lastLength = Infinity
  for (let step = 0; step < 50; step += 1) {
    const jacobian = jacobianAt(input, state.b, true)
    if (jacobian === null) return state
    const scale = columnNorms(jacobian).map((norm) => (norm > 0 ? norm : 1))
    const move = dampedStep(withScaledColumns(jacobian, scale), state.residuals, 0)
    if (move === null) return state
    const length = Math.hypot(...move)
    const trial = residualsAt(
      input,
      state.b.map((value, j) => value + (move[j] ?? 0) / (scale[j] ?? 1)),
    )
    // At the bottom Σr² only shows rounding: there a step counts as long as it is shorter than the one before.
    const isLevel = trial !== null && trial.rss <= state.rss * (1 + 1e-10) && length < lastLength / 2
    if (trial === null || !(trial.rss < state.rss || isLevel)) return state
    state = trial
    lastLength = length
    if (length === 0) return state
  }
  return state
}

function failFit(reason: string): never {
  const failure = new Error(reason)
  failure.name = 'FitError'
  throw failure
}

/**
 * Standard errors from s²·(JᵀJ)⁻¹ at the found fit, and the test that it is one: the part of the residuals that a
 * further step could still explain must be small beside the rest (relative offset, Bates and Watts 1981).
 */
function describeFit<X>(input: NonlinearFitInput<X>, state: State): NonlinearFit {
  const degreesOfFreedom = input.x.length - input.start.length
  const jacobian = jacobianAt(input, state.b, true)
  if (jacobian === null) return failFit('The model has no finite values around the fit.')
  const scale = columnNorms(jacobian)
  if (scale.some((norm) => norm === 0)) return failFit('The data say nothing about one of the parameters.')
  const scaled = withScaledColumns(jacobian, scale)
  const qr = new QrDecomposition(scaled)
  const upper = qr.upperTriangularMatrix
  const diagonal = upper.diagonal().map((value) => Math.abs(value))
  if (!(Math.min(...diagonal) > 1e-10 * Math.max(...diagonal))) {
    return failFit('The data do not determine all parameters: two of them do the same to the curve.')
  }
  const explained = qr.orthogonalMatrix
    .transpose()
    .mmul(Matrix.columnVector(state.residuals))
    .norm('frobenius')
  const sizeY = Math.hypot(...input.y)
  const isExact = Math.sqrt(state.rss) <= 1e-10 * sizeY
  if (!isExact && explained > 1e-4 * Math.sqrt(state.rss)) {
    return failFit('No best fit was reached from this start: give a start that is nearer.')
  }
  const residualVariance = state.rss / degreesOfFreedom
  const inverse = new QrDecomposition(upper).solve(Matrix.eye(scale.length))
  const covariance = inverse
    .mmul(inverse.transpose())
    .to2DArray()
    .map((row, i) => row.map((value, j) => (value * residualVariance) / ((scale[i] ?? 1) * (scale[j] ?? 1))))
  return {
    parameters: state.b,
    standardErrors: covariance.map((row, i) => Math.sqrt(row[i] ?? 0)),
    residualSumOfSquares: state.rss,
    residualSd: Math.sqrt(residualVariance),
    degreesOfFreedom,
    covariance,
  }
}

/**
 * Non-linear least squares: the parameters b that make Σ(y − model(b, x))² least, found downhill from `start`.
 * Levenberg–Marquardt with column scaling from several dampings, then Gauss–Newton; central differences; QR throughout.
 * Held to the certified values of the NIST StRD sets from both their starts. A fit is local: another start may find
 * another.
 *
 * @throws RangeError for no parameters, not more points than parameters, unequal lengths, a value that is not finite,
 *   or a start at which the model has no finite value
 * @throws Error named FitError when no best fit is reached, or the data do not determine the parameters
 */
export function nonlinearLeastSquares<X>(input: NonlinearFitInput<X>): NonlinearFit {
  requireNumbers('start', input.start)
  requireNumbers('y', input.y, input.start.length + 1)
  requireEqualLength('x', input.x, 'y', input.y)
  input.x.forEach((x, i) => {
    if (typeof x === 'number' && !Number.isFinite(x))
      throw new RangeError(`x[${i}] must be a finite number, not ${x}`)
  })
  const first = residualsAt(input, input.start)
  if (first === null) throw new RangeError('start must be where the model has finite values')
  let best = first
  for (const search of SEARCHES) {
    const found = polish(input, searchFrom(input, first, search))
    if (found.rss < best.rss) best = found
  }
  return describeFit(input, best)
}
