import { requireFinite, requireNotNegative, requirePositive, requireWhole } from './domain'

/** What a face of the slab meets: a fixed temperature, °C; air at `ambientC` through `hWPerM2K`; or nothing. */
export type Face = { tempC: number } | { hWPerM2K: number; ambientC: number } | 'insulated'

/** A slab of constant properties, SI units and °C. `nodes` include both faces. */
export type SlabInput = {
  thicknessM: number
  nodes: number
  conductivityWPerMK: number
  densityKgPerM3: number
  heatCapacityJPerKgK: number
  initialTempC: number
  hot: Face
  cold: Face
  durationS: number
  stepS: number
}

/** `depthM` counts from the hot face, 0 first; `heatInJPerM2` is what came in through each face since the start. */
export type SlabResult = { depthM: number[]; tempC: number[]; heatInJPerM2: { hot: number; cold: number } }

/** A face as the scheme sees it: a fixed node, or a conductance to `outsideC` (0 when insulated). */
type Boundary = { isFixed: boolean; outsideC: number; conductanceWPerM2K: number }

/** TR-BDF2 constants for γ = 2 − √2, where both stages share one matrix. */
const GAMMA = 2 - Math.SQRT2
const IMPLICIT_SHARE = GAMMA / 2
const EXPLICIT_SHARE = Math.SQRT2 / 4
const BDF_NEW = 1 / (GAMMA * (2 - GAMMA))
const BDF_OLD = ((1 - GAMMA) * (1 - GAMMA)) / (GAMMA * (2 - GAMMA))

function requireFace(name: string, face: Face): Boundary {
  if (face === 'insulated') return { isFixed: false, outsideC: 0, conductanceWPerM2K: 0 }
  if ('tempC' in face) {
    return { isFixed: true, outsideC: requireFinite(`${name}.tempC`, face.tempC), conductanceWPerM2K: 0 }
  }
  return {
    isFixed: false,
    outsideC: requireFinite(`${name}.ambientC`, face.ambientC),
    conductanceWPerM2K: requireNotNegative(`${name}.hWPerM2K`, face.hWPerM2K),
  }
}

/** Slab as a chain of cells: half cells at the faces, `innerWPerM2K` between neighbours. */
type Chain = {
  count: number
  innerWPerM2K: number
  cellJPerM2K: number
  hot: Boundary
  cold: Boundary
}

/** Heat that each cell gains, W/m²; 0 for a fixed node. */
function gainsAt(chain: Chain, tempC: Float64Array, gains: Float64Array): void {
  const last = chain.count - 1
  const { hot, cold, innerWPerM2K } = chain
  const at = (i: number) => tempC[i] ?? 0
  for (let i = 1; i < last; i += 1) {
    gains[i] = innerWPerM2K * ((tempC[i - 1] ?? 0) - 2 * (tempC[i] ?? 0) + (tempC[i + 1] ?? 0))
  }
  gains[0] = hot.isFixed
    ? 0
    : chain.innerWPerM2K * (at(1) - at(0)) + hot.conductanceWPerM2K * (hot.outsideC - at(0))
  gains[last] = cold.isFixed
    ? 0
    : chain.innerWPerM2K * (at(last - 1) - at(last)) + cold.conductanceWPerM2K * (cold.outsideC - at(last))
}

/** Heat flux into the slab through a face, W/m²: from outside, or into the next cell when the node is fixed. */
function fluxIn(chain: Chain, boundary: Boundary, faceC: number, nextC: number): number {
  return boundary.isFixed
    ? chain.innerWPerM2K * (faceC - nextC)
    : boundary.conductanceWPerM2K * (boundary.outsideC - faceC)
}

function capacityOf(chain: Chain, i: number): number {
  return i === 0 || i === chain.count - 1 ? chain.cellJPerM2K / 2 : chain.cellJPerM2K
}

/**
 * Solver of (C − w·A)·T = right side for the constant matrix of one step, w = γ/2·step, by Thomas's elimination with
 * the forward factors kept. The matrix is diagonally dominant, so it needs no pivots.
 */
function createStepSolver(chain: Chain, weightS: number): (right: Float64Array) => void {
  const { count, innerWPerM2K, hot, cold } = chain
  const last = count - 1
  const coupling = -weightS * innerWPerM2K
  const below = new Float64Array(count).fill(coupling)
  const above = new Float64Array(count).fill(coupling)
  below[0] = 0
  above[last] = 0
  if (hot.isFixed) above[0] = 0
  if (cold.isFixed) below[last] = 0
  const inversePivots = new Float64Array(count)
  const ratios = new Float64Array(count)
  for (let i = 0; i < count; i += 1) {
    const boundary = i === 0 ? hot : i === last ? cold : null
    const lower = below[i] ?? 0
    const upper = above[i] ?? 0
    const diagonal = boundary?.isFixed
      ? 1
      : capacityOf(chain, i) - lower - upper + weightS * (boundary?.conductanceWPerM2K ?? 0)
    const inverse = 1 / (diagonal - lower * (ratios[i - 1] ?? 0))
    inversePivots[i] = inverse
    ratios[i] = upper * inverse
  }
  return (right) => {
    let before = 0
    for (let i = 0; i < count; i += 1) {
      before = ((right[i] ?? 0) - (below[i] ?? 0) * before) * (inversePivots[i] ?? 0)
      right[i] = before
    }
    for (let i = last - 1; i >= 0; i -= 1) {
      before = (right[i] ?? 0) - (ratios[i] ?? 0) * before
      right[i] = before
    }
  }
}

function requireSlab(input: SlabInput): Chain {
  requirePositive('thicknessM', input.thicknessM)
  requireWhole('nodes', input.nodes, 3)
  requirePositive('conductivityWPerMK', input.conductivityWPerMK)
  requirePositive('densityKgPerM3', input.densityKgPerM3)
  requirePositive('heatCapacityJPerKgK', input.heatCapacityJPerKgK)
  requireFinite('initialTempC', input.initialTempC)
  requireNotNegative('durationS', input.durationS)
  requirePositive('stepS', input.stepS)
  const cellM = input.thicknessM / (input.nodes - 1)
  return {
    count: input.nodes,
    innerWPerM2K: input.conductivityWPerMK / cellM,
    cellJPerM2K: input.densityKgPerM3 * input.heatCapacityJPerKgK * cellM,
    hot: requireFace('hot', input.hot),
    cold: requireFace('cold', input.cold),
  }
}

/**
 * Transient conduction through a slab of constant properties: ρ·c·∂T/∂t = k·∂²T/∂x², from one initial temperature,
 * each face at a fixed temperature, convecting, or insulated; temperatures after `durationS`.
 *
 * Finite volumes with half cells at the faces, in time TR-BDF2 (Bank et al. 1985): implicit, second order, stable for
 * any step and without the ringing that Crank–Nicolson shows after a sudden face. The step is `stepS` or a little less,
 * so that whole steps fill the duration. Held to the one-term and eigen-series wall solutions and to the erfc and
 * convective half-space (Incropera, chapter 5).
 *
 * @throws RangeError for a property, thickness or step not above 0, fewer than three nodes, a negative duration or
 *   heat transfer coefficient, or a value that is not finite
 */
export function conductSlab(input: SlabInput): SlabResult {
  const chain = requireSlab(input)
  const { count, hot, cold } = chain
  const last = count - 1
  const tempC = new Float64Array(count).fill(input.initialTempC)
  const heatIn = { hot: 0, cold: 0 }
  if (input.durationS > 0) {
    const faceStep = (boundary: Boundary, i: number) => {
      if (!boundary.isFixed) return 0
      tempC[i] = boundary.outsideC
      return capacityOf(chain, i) * (boundary.outsideC - input.initialTempC)
    }
    heatIn.hot += faceStep(hot, 0)
    heatIn.cold += faceStep(cold, last)
    advance(
      chain,
      tempC,
      heatIn,
      input.durationS,
      Math.max(1, Math.ceil(input.durationS / input.stepS - 1e-9)),
    )
  }
  return {
    depthM: Array.from({ length: count }, (_, i) => (input.thicknessM * i) / last),
    tempC: [...tempC],
    heatInJPerM2: heatIn,
  }
}

/** Takes `steps` equal steps over `durationS`, in place. */
function advance(
  chain: Chain,
  tempC: Float64Array,
  heatIn: { hot: number; cold: number },
  durationS: number,
  steps: number,
): void {
  const stepS = durationS / steps
  const weightS = IMPLICIT_SHARE * stepS
  const solve = createStepSolver(chain, weightS)
  const { count, hot, cold } = chain
  const last = count - 1
  const middle = new Float64Array(count)
  const gains = new Float64Array(count)
  const capacity = Float64Array.from({ length: count }, (_, i) => capacityOf(chain, i))
  /** Sets both faces of a right side: a fixed one to its temperature, an open one with what the outside drives in. */
  const closeFaces = (right: Float64Array) => {
    right[0] = hot.isFixed ? hot.outsideC : (right[0] ?? 0) + weightS * hot.conductanceWPerM2K * hot.outsideC
    right[last] = cold.isFixed
      ? cold.outsideC
      : (right[last] ?? 0) + weightS * cold.conductanceWPerM2K * cold.outsideC
  }
  const countFlux = (shareS: number, at: Float64Array) => {
    heatIn.hot += shareS * fluxIn(chain, hot, at[0] ?? 0, at[1] ?? 0)
    heatIn.cold += shareS * fluxIn(chain, cold, at[last] ?? 0, at[last - 1] ?? 0)
  }
  for (let step = 0; step < steps; step += 1) {
    gainsAt(chain, tempC, gains)
    countFlux(EXPLICIT_SHARE * stepS, tempC)
    for (let i = 0; i < count; i += 1) {
      middle[i] = (capacity[i] ?? 0) * (tempC[i] ?? 0) + weightS * (gains[i] ?? 0)
    }
    closeFaces(middle)
    solve(middle)
    countFlux(EXPLICIT_SHARE * stepS, middle)
    for (let i = 0; i < count; i += 1) {
      tempC[i] = (capacity[i] ?? 0) * (BDF_NEW * (middle[i] ?? 0) - BDF_OLD * (tempC[i] ?? 0))
    }
    closeFaces(tempC)
    solve(tempC)
    countFlux(IMPLICIT_SHARE * stepS, tempC)
  }
}
