import { LATENT_HEAT_J_PER_KG, STEFAN_BOLTZMANN_W_PER_M2K4, ZERO_CELSIUS_K } from './constants'
import { requireFinite, requireNotNegative, requirePositive, requireWithin } from './domain'
import { doseFactorFromOffset } from './dose-ratio'
import type { CurvePoint, DoseModel, SegmentDose } from './heat-dose'
import { createSegmentDose } from './heat-dose'
import { straightBetween } from './straight-line'
import {
  CONDUCTIVITY_MOISTURE_LIMIT_PERCENT,
  conductivityWPerMK,
  densityKgPerM3,
  heatCapacityJPerKgK,
  isConductivityOutsideFormula,
} from './wood'

/*
 * The stave model (SCIENCE §3): one-dimensional conduction through the thickness, depth x from the face.
 *
 *   C(T, M) ∂T/∂t = ∂/∂x (k(T, M) ∂T/∂x) − L ρ0 ∂(drying)/∂t
 *
 * Finite volumes about the nodes, backward Euler, tridiagonal solve: stable for any step. Heat capacity is taken at
 * the middle of the step's temperatures, which is exact because the handbook's formula is linear in T, and the drying
 * phase of each node is iterated, so what goes in is what is stored. Each node has its own moisture; it falls in proportion
 * as the node's highest temperature passes from 95 to 135 °C and never rises again, so that heat is charged once.
 *
 * Conductivity and heat capacity are the handbook's (wood.ts) with the stave's one specific gravity and each node's
 * moisture: k·(1 + 0.0025·(T − 24)) above 24 °C; at 25 % of moisture and more k stays what it is at 25 %, and the state
 * says so. The capacity is stated to 420 K and carried on to the hotter face as the straight line that it is. What the
 * water that leaves takes with it is its latent heat alone.
 *
 * With a probe, its reading is imposed at its depth and the wood behind it is solved. The layer in front, face to
 * probe, is an inverse problem that amplifies noise without bound when it is solved step by step (it is some
 * d²/α ≈ 25 s thick at 2 mm). It is therefore estimated quasi-steadily: flux at the probe (from the solved side) and
 * climb at the probe, both smoothed over 15 s, are marched outwards node by node, each node adding what it stores and
 * what it dries: q(x) = q(d) + ∫ C ∂T/∂t dx, T(x) = T(d) + ∫ q/k dx. Its range is that of the probe's depth.
 */

/** A depth with its range, mm from the face, not rounded: show to 0.5 mm with `roundDepthForShowMm`. */
export type DepthRangeMm = { low: number; value: number; high: number }

/** A temperature with its range, °C. */
export type TempRangeC = { low: number; value: number; high: number }

export type StaveOptions = {
  thicknessMm: number
  /** Depth of the lead probe, mm from the face; 0 is the face itself. */
  probeDepthMm: number
  /** At the start, % of dry mass. */
  moisturePercent: number
  startTempC: number
  /** Oven-dry specific gravity. */
  specificGravity: number
  roomTempC: number
  coldFaceHWPerM2K: number
  dose: DoseModel
  toastDepthDoseMin: number
  /** Half-width of the probe's depth, mm, k = 2. */
  probeDepthErrorMm: number
  /** Half-width of the wood's diffusivity as a share of it, k = 2 (judgement). */
  diffusivityErrorShare: number
  /** Temperature error of the probe as mounted, °C, k = 2; widens the range of the toast depth. Default 0. */
  probeErrorC?: number
  /** Width of the first cell behind the probe, mm; they widen towards the cold face. Default 0.2. */
  cellMm?: number
  /** A longer step is divided, s; default 2. */
  longestStepS?: number
  /** Constant properties instead of the handbook's, without drying: for checks against closed forms. */
  constantProperties?: { conductivityWPerMK: number; heatCapacityJPerM3K: number }
}

/** What acts at the face during a step: the probe's reading (imposed at its depth), a flux, or a fire. */
export type StaveBoundary =
  | number
  | { fluxWPerM2: number }
  | { gasTempC: number; hWPerM2K: number; radiantTempC: number; emissivity: number }

/** The state of one stave. Arrays are per node, face first. Read it freely; only `stepStave` writes it. */
export type StaveState = {
  readonly options: StaveOptions
  readonly depthMm: Float64Array
  /** Node at the probe's depth. */
  readonly probeNode: number
  /** Width of each node's volume and distance to the next node, m. */
  readonly volumeM: Float64Array
  readonly distanceM: Float64Array
  readonly tempC: Float64Array
  readonly moisturePercent: Float64Array
  /** Highest temperature that each node has had, °C. */
  readonly highestTempC: Float64Array
  /** Running dose, minutes at the reference temperature. */
  readonly doseMin: Float64Array
  /** Dose rate at the present temperature, 0 below the base. */
  readonly doseRate: Float64Array
  /** Volumetric heat capacity = capacityA + capacityB · (T in kelvin), J/(m³·K), at the node's moisture. */
  readonly capacityA: Float64Array
  readonly capacityB: Float64Array
  /** Conductivity at 24 °C and the node's moisture, W/(m·K). */
  readonly conductivity24: Float64Array
  timeS: number
  /** Heat through the face and out of the cold face so far, J/m². With a probe the first is the flux at its depth. */
  heatInJPerM2: number
  heatOutJPerM2: number
  /** Moisture of 25 % or more at the start lies outside the handbook's conductivity formula, which stops there. */
  isMoistureOutsideFormula: boolean
  /** Smoothed flux, W/m², and climb, °C/s, at the probe. */
  probeFluxWPerM2: number
  probeClimbCPerS: number
  readonly work: StaveWork
}

type StaveWork = {
  readonly oldTempC: Float64Array
  readonly conductanceWPerM2K: Float64Array
  readonly diagonal: Float64Array
  readonly right: Float64Array
  readonly factor: Float64Array
  readonly drying: Uint8Array
  readonly segment: SegmentDose
}

/** The span over which the heat of drying is charged, °C (SCIENCE §3). */
const DRYING_FROM_C = 95
const DRYING_TO_C = 135
/** k rises 2–3 % per 10 °C above 24 °C (Wood Handbook, FPL-GTR-282, chapter 4). */
const CONDUCTIVITY_RISE_PER_C = 0.0025
const CONDUCTIVITY_TABLE_TEMP_C = 24
const DEFAULT_LONGEST_STEP_S = 2
const FACE_SMOOTHING_S = 15
/** A step is solved when its last iteration moved no node by more than this. */
const SOLVED_TO_C = 1e-5
const ITERATIONS_MOST = 12
/** What a node does in a step: no drying; it ends inside the drying span; it dries out. */
const DRYING_NOT = 0
const DRYING_NOW = 1
const DRYING_DONE = 2
const CELL_GROWTH = 1.12
/** Widest cell, as a multiple of the first behind the probe. */
const WIDEST_CELL = 3
/** Cells in front of the probe are finer: what they dry moves the face estimate in steps. */
const FRONT_CELLS_PER_CELL = 2.5
const DEFAULT_CELL_MM = 0.2

/** Element of an array that is known to be there: the compiler cannot see array bounds. */
function at(values: ArrayLike<number>, index: number): number {
  return values[index] ?? NaN
}

/** Node depths, mm: even cells to the probe, then cells that widen towards the cold face. */
function gridMm(
  thicknessMm: number,
  probeDepthMm: number,
  cellMm: number,
): { depths: number[]; probeNode: number } {
  const front = Math.ceil((probeDepthMm * FRONT_CELLS_PER_CELL) / cellMm - 1e-9)
  const depths: number[] = []
  for (let i = 0; i < front; i += 1) depths.push((probeDepthMm * i) / front)
  depths.push(probeDepthMm)
  const restMm = thicknessMm - probeDepthMm
  const widths: number[] = []
  let sumMm = 0
  for (let widthMm = cellMm; sumMm < restMm - 1e-9;) {
    widths.push(widthMm)
    sumMm += widthMm
    widthMm = Math.min(widthMm * CELL_GROWTH, WIDEST_CELL * cellMm)
  }
  let depthMm = probeDepthMm
  widths.forEach((widthMm, i) => {
    depthMm = i === widths.length - 1 ? thicknessMm : depthMm + (widthMm * restMm) / sumMm
    depths.push(depthMm)
  })
  return { depths, probeNode: front }
}

function requireOptions(options: StaveOptions): void {
  requirePositive('thicknessMm', options.thicknessMm)
  requireWithin('probeDepthMm', options.probeDepthMm, 0, options.thicknessMm * 0.9)
  requireWithin('moisturePercent', options.moisturePercent, 0, 100)
  requireWithin('startTempC', options.startTempC, -60, 1400)
  requirePositive('specificGravity', options.specificGravity)
  requireFinite('roomTempC', options.roomTempC)
  requireNotNegative('coldFaceHWPerM2K', options.coldFaceHWPerM2K)
  requirePositive('toastDepthDoseMin', options.toastDepthDoseMin)
  requireNotNegative('probeDepthErrorMm', options.probeDepthErrorMm)
  requireNotNegative('diffusivityErrorShare', options.diffusivityErrorShare)
  requireNotNegative('probeErrorC', options.probeErrorC ?? 0)
  requireWithin('cellMm', options.cellMm ?? DEFAULT_CELL_MM, 0.02, 5)
  requirePositive('longestStepS', options.longestStepS ?? DEFAULT_LONGEST_STEP_S)
}

/**
 * A stave at one temperature and moisture throughout, at time 0.
 *
 * @throws RangeError for an option outside its domain (it is named), such as a probe in the last tenth of the stave
 */
export function createStave(options: StaveOptions): StaveState {
  requireOptions(options)
  const { depths, probeNode } = gridMm(
    options.thicknessMm,
    options.probeDepthMm,
    options.cellMm ?? DEFAULT_CELL_MM,
  )
  const count = depths.length
  const array = (value = 0) => new Float64Array(count).fill(value)
  const segment = createSegmentDose(options.dose)
  const depthMm = Float64Array.from(depths)
  const distanceM = Float64Array.from(
    { length: count - 1 },
    (_, i) => (at(depthMm, i + 1) - at(depthMm, i)) / 1000,
  )
  const volumeM = Float64Array.from({ length: count }, (_, i) => {
    const before = i === 0 ? 0 : at(distanceM, i - 1)
    const after = i === count - 1 ? 0 : at(distanceM, i)
    return (before + after) / 2
  })
  const state: StaveState = {
    options,
    depthMm,
    probeNode,
    volumeM,
    distanceM,
    tempC: array(options.startTempC),
    moisturePercent: array(options.startTempC >= DRYING_TO_C ? 0 : options.moisturePercent),
    highestTempC: array(options.startTempC),
    doseMin: array(),
    doseRate: array(segment.rateAt(options.startTempC)),
    capacityA: array(),
    capacityB: array(),
    conductivity24: array(),
    timeS: 0,
    heatInJPerM2: 0,
    heatOutJPerM2: 0,
    isMoistureOutsideFormula:
      options.constantProperties === undefined && isConductivityOutsideFormula(options.moisturePercent),
    probeFluxWPerM2: 0,
    probeClimbCPerS: 0,
    work: {
      oldTempC: array(),
      conductanceWPerM2K: new Float64Array(count - 1),
      diagonal: array(),
      right: array(),
      factor: array(),
      drying: new Uint8Array(count),
      segment,
    },
  }
  for (let i = 0; i < count; i += 1) updateProperties(state, i)
  return state
}

/** Properties at a node's moisture; called again only when it has changed. */
function updateProperties(state: StaveState, node: number): void {
  const { constantProperties, specificGravity } = state.options
  if (constantProperties !== undefined) {
    state.capacityA[node] = constantProperties.heatCapacityJPerM3K
    state.capacityB[node] = 0
    state.conductivity24[node] = constantProperties.conductivityWPerMK
    return
  }
  const moisturePercent = at(state.moisturePercent, node)
  const density = densityKgPerM3(specificGravity, moisturePercent)
  // Linear in T, so two points give the line (Wood Handbook Eqs. 4-16 to 4-18).
  const at300 = density * heatCapacityJPerKgK(300, moisturePercent)
  const at400 = density * heatCapacityJPerKgK(400, moisturePercent)
  const slope = (at400 - at300) / 100
  state.capacityA[node] = at300 - 300 * slope
  state.capacityB[node] = slope
  state.conductivity24[node] = conductivityWPerMK(
    specificGravity,
    Math.min(moisturePercent, CONDUCTIVITY_MOISTURE_LIMIT_PERCENT),
  )
}

/**
 * Advances the stave by `dtS` under what acts at its face. A reading is where the probe stands at the step's end;
 * within a step longer than `longestStepS` it is taken straight from the last one. Arrays are written in place.
 *
 * @throws RangeError when dtS is not finite and above 0, or a boundary value is not finite (no reading is never a
 *   number: skip the step, and give the next one the whole time)
 */
export function stepStave(state: StaveState, boundary: StaveBoundary, dtS: number): void {
  requirePositive('dtS', dtS)
  const parts = Math.ceil(dtS / (state.options.longestStepS ?? DEFAULT_LONGEST_STEP_S) - 1e-9)
  if (typeof boundary !== 'number') {
    requireBoundary(boundary)
    for (let part = 0; part < parts; part += 1) stepWithFire(state, boundary, dtS / parts)
    return
  }
  requireFinite('tempCAtProbe', boundary)
  const fromTempC = at(state.tempC, state.probeNode)
  for (let part = 1; part <= parts; part += 1) {
    stepWithProbe(state, fromTempC + ((boundary - fromTempC) * part) / parts, dtS / parts)
  }
}

function requireBoundary(boundary: Exclude<StaveBoundary, number>): void {
  if ('fluxWPerM2' in boundary) {
    requireFinite('fluxWPerM2', boundary.fluxWPerM2)
    return
  }
  requireFinite('gasTempC', boundary.gasTempC)
  requireNotNegative('hWPerM2K', boundary.hWPerM2K)
  requireWithin('radiantTempC', boundary.radiantTempC, -ZERO_CELSIUS_K, 2000)
  requireWithin('emissivity', boundary.emissivity, 0, 1)
}

/** Remembers the temperatures before the step and takes conductances from them. */
function beginStep(state: StaveState): void {
  const { tempC, conductivity24, distanceM } = state
  const { oldTempC, conductanceWPerM2K } = state.work
  const rise = state.options.constantProperties === undefined ? CONDUCTIVITY_RISE_PER_C : 0
  oldTempC.set(tempC)
  for (let i = 0; i < conductanceWPerM2K.length; i += 1) {
    const middleC = (at(tempC, i) + at(tempC, i + 1)) / 2
    const warm = 1 + rise * Math.max(0, middleC - CONDUCTIVITY_TABLE_TEMP_C)
    conductanceWPerM2K[i] =
      (((at(conductivity24, i) + at(conductivity24, i + 1)) / 2) * warm) / at(distanceM, i)
  }
}

/** Where drying begins at a node, °C: not before 95 °C, nor below its temperature at the start, which gave its moisture. */
function dryingFromC(state: StaveState): number {
  return Math.max(DRYING_FROM_C, Math.min(state.options.startTempC, DRYING_TO_C))
}

/** Latent heat that each °C inside the drying span costs, J/(m³·K). */
function latentCapacityJPerM3K(state: StaveState): number {
  const { moisturePercent, specificGravity, constantProperties } = state.options
  const spanC = DRYING_TO_C - dryingFromC(state)
  if (constantProperties !== undefined || spanC <= 0) return 0
  return (LATENT_HEAT_J_PER_KG * densityKgPerM3(specificGravity, 0) * (moisturePercent / 100)) / spanC
}

/** Heat into the face at a face temperature, W/m², and its slope, W/(m²·K). */
type FaceFlux = (tempC: number) => { flux: number; slope: number }

/**
 * Solves nodes `first` to the cold face for the step's end. Row `first` carries the boundary: either it is held at
 * its present value in `tempC`, or it takes the flux `faceFlux(T)` with its slope.
 */
function solveStep(state: StaveState, first: number, dtS: number, faceFlux: FaceFlux | null): void {
  guessDrying(state, first)
  for (let iteration = 0; iteration < ITERATIONS_MOST; iteration += 1) {
    assemble(state, first, dtS, faceFlux)
    const changeC = solveTridiagonal(state, first, faceFlux === null)
    const isSettled = correctDrying(state, first)
    if (isSettled && changeC < SOLVED_TO_C) return
  }
}

/** A node that was at its highest inside the drying span is taken to go on drying. */
function guessDrying(state: StaveState, first: number): void {
  const { tempC, highestTempC } = state
  const fromC = dryingFromC(state)
  for (let i = first; i < tempC.length; i += 1) {
    const nodeC = at(tempC, i)
    const isInside = nodeC >= fromC && nodeC < DRYING_TO_C && nodeC >= at(highestTempC, i)
    state.work.drying[i] = isInside ? DRYING_NOW : DRYING_NOT
  }
}

/**
 * Moves each node to the neighbouring phase when its solved temperature lies outside the present one. One phase at a
 * time, since a jump over the whole span (free, then fully charged) would swing for ever. True when none moved.
 */
function correctDrying(state: StaveState, first: number): boolean {
  const { tempC, highestTempC } = state
  const { drying } = state.work
  const fromC = dryingFromC(state)
  let isSettled = true
  for (let i = first; i < tempC.length; i += 1) {
    const solvedC = at(tempC, i)
    const dryFromC = Math.min(Math.max(at(highestTempC, i), fromC), DRYING_TO_C)
    if (dryFromC >= DRYING_TO_C) continue
    const before = drying[i]
    if (before === DRYING_NOT && solvedC > dryFromC) drying[i] = DRYING_NOW
    else if (before === DRYING_NOW && solvedC <= dryFromC) drying[i] = DRYING_NOT
    else if (before === DRYING_NOW && solvedC > DRYING_TO_C) drying[i] = DRYING_DONE
    else if (before === DRYING_DONE && solvedC < DRYING_TO_C) drying[i] = DRYING_NOW
    if (drying[i] !== before) isSettled = false
  }
  return isSettled
}

/** One row per node about the present guess in `tempC` and the present drying phases. */
function assemble(state: StaveState, first: number, dtS: number, faceFlux: FaceFlux | null): void {
  const { tempC, highestTempC, capacityA, capacityB, volumeM } = state
  const { oldTempC, conductanceWPerM2K, diagonal, right, drying } = state.work
  const last = tempC.length - 1
  const fromC = dryingFromC(state)
  const latent = latentCapacityJPerM3K(state)
  for (let i = first; i <= last; i += 1) {
    const guessC = at(tempC, i)
    const oldC = at(oldTempC, i)
    const capacity = at(capacityA, i) + at(capacityB, i) * ((guessC + oldC) / 2 + ZERO_CELSIUS_K)
    const perStep = at(volumeM, i) / dtS
    let onDiagonal = perStep * capacity
    let onRight = perStep * capacity * oldC
    if (latent > 0 && drying[i] !== DRYING_NOT) {
      const dryFromC = Math.min(Math.max(at(highestTempC, i), fromC), DRYING_TO_C)
      // Heat charged, latent·(T − dryFrom), as long as the node ends inside the span; the rest of it once beyond.
      if (drying[i] === DRYING_NOW) onDiagonal += perStep * latent
      onRight += perStep * latent * (drying[i] === DRYING_NOW ? dryFromC : dryFromC - DRYING_TO_C)
    }
    if (i > first) onDiagonal += at(conductanceWPerM2K, i - 1)
    if (i < last) onDiagonal += at(conductanceWPerM2K, i)
    if (i === last) {
      onDiagonal += state.options.coldFaceHWPerM2K
      onRight += state.options.coldFaceHWPerM2K * state.options.roomTempC
    }
    if (i === first && faceFlux !== null) {
      const { flux, slope } = faceFlux(guessC)
      onDiagonal -= slope
      onRight += flux - slope * guessC
    }
    diagonal[i] = onDiagonal
    right[i] = onRight
  }
  if (faceFlux === null) {
    diagonal[first] = 1
    right[first] = at(tempC, first)
  }
}

/**
 * Thomas's algorithm over `first` to the cold face; the matrix is diagonally dominant. A held first row has no
 * upper neighbour. Returns the largest change, °C.
 */
function solveTridiagonal(state: StaveState, first: number, isHeld: boolean): number {
  const { tempC } = state
  const { conductanceWPerM2K, diagonal, right, factor } = state.work
  const last = tempC.length - 1
  factor[first] = isHeld ? 0 : -at(conductanceWPerM2K, first) / at(diagonal, first)
  right[first] = at(right, first) / at(diagonal, first)
  for (let i = first + 1; i <= last; i += 1) {
    const lower = -at(conductanceWPerM2K, i - 1)
    const pivot = at(diagonal, i) - lower * at(factor, i - 1)
    factor[i] = i < last ? -at(conductanceWPerM2K, i) / pivot : 0
    right[i] = (at(right, i) - lower * at(right, i - 1)) / pivot
  }
  let changeC = 0
  let nextC = 0
  for (let i = last; i >= first; i -= 1) {
    const solvedC = i === last ? at(right, i) : at(right, i) - at(factor, i) * nextC
    changeC = Math.max(changeC, Math.abs(solvedC - at(tempC, i)))
    tempC[i] = solvedC
    nextC = solvedC
  }
  return changeC
}

function stepWithFire(state: StaveState, boundary: Exclude<StaveBoundary, number>, dtS: number): void {
  beginStep(state)
  const faceFlux = faceFluxOf(boundary)
  solveStep(state, 0, dtS, faceFlux)
  state.heatInJPerM2 += faceFlux(at(state.tempC, 0)).flux * dtS
  finishStep(state, dtS)
}

/** A fire at the face: gas that convects and coals that radiate. */
export type FaceFire = Extract<StaveBoundary, { gasTempC: number }>

/** Net flux of a fire into a face at `faceTempC`, W/m²: h(Tg − T) + εσ(Tr⁴ − T⁴), kelvin in the second. */
export function fireFluxWPerM2(fire: FaceFire, faceTempC: number): number {
  return faceFluxOf(fire)(faceTempC).flux
}

/** The flux with its slope in the face's temperature, which the implicit step needs. */
function faceFluxOf(boundary: Exclude<StaveBoundary, number>): FaceFlux {
  if ('fluxWPerM2' in boundary) return () => ({ flux: boundary.fluxWPerM2, slope: 0 })
  const { gasTempC, hWPerM2K, radiantTempC, emissivity } = boundary
  const strength = emissivity * STEFAN_BOLTZMANN_W_PER_M2K4
  const fromFire = strength * (radiantTempC + ZERO_CELSIUS_K) ** 4
  return (tempC) => {
    const tempK = tempC + ZERO_CELSIUS_K
    const flux = hWPerM2K * (gasTempC - tempC) + fromFire - strength * tempK ** 4
    return { flux, slope: -hWPerM2K - 4 * strength * tempK ** 3 }
  }
}

function stepWithProbe(state: StaveState, readingTempC: number, dtS: number): void {
  const { probeNode, tempC } = state
  beginStep(state)
  tempC[probeNode] = readingTempC
  solveStep(state, probeNode, dtS, null)
  const fluxWPerM2 =
    at(state.work.conductanceWPerM2K, probeNode) * (readingTempC - at(tempC, probeNode + 1)) +
    (storedJPerM2(state, probeNode) * innerShare(state)) / dtS
  smoothAtProbe(state, fluxWPerM2, (readingTempC - at(state.work.oldTempC, probeNode)) / dtS, dtS)
  estimateFront(state)
  state.heatInJPerM2 += fluxWPerM2 * dtS
  finishStep(state, dtS)
}

/** Share of the probe node's volume that lies behind the probe. */
function innerShare(state: StaveState): number {
  return at(state.distanceM, state.probeNode) / 2 / at(state.volumeM, state.probeNode)
}

/** What a node stored in this step, sensible and latent, J/m². */
function storedJPerM2(state: StaveState, node: number): number {
  const newC = at(state.tempC, node)
  const oldC = at(state.work.oldTempC, node)
  const capacity =
    at(state.capacityA, node) + at(state.capacityB, node) * ((newC + oldC) / 2 + ZERO_CELSIUS_K)
  const fromC = Math.min(Math.max(at(state.highestTempC, node), dryingFromC(state)), DRYING_TO_C)
  const dryingC = Math.min(Math.max(newC, fromC), DRYING_TO_C) - fromC
  return at(state.volumeM, node) * (capacity * (newC - oldC) + latentCapacityJPerM3K(state) * dryingC)
}

function smoothAtProbe(state: StaveState, fluxWPerM2: number, climbCPerS: number, dtS: number): void {
  const weight = 1 - Math.exp(-dtS / FACE_SMOOTHING_S)
  state.probeFluxWPerM2 += weight * (fluxWPerM2 - state.probeFluxWPerM2)
  state.probeClimbCPerS += weight * (climbCPerS - state.probeClimbCPerS)
}

/** Marches from the probe to the face: each node takes the flux behind it, and adds what it stores and dries. */
function estimateFront(state: StaveState): void {
  const { tempC, probeNode, capacityA, capacityB, volumeM } = state
  const latent = latentCapacityJPerM3K(state)
  let fluxWPerM2 = state.probeFluxWPerM2
  let climbing = at(volumeM, probeNode) * (1 - innerShare(state))
  for (let i = probeNode; i > 0; i -= 1) {
    const nodeC = at(tempC, i)
    const isDrying =
      nodeC > dryingFromC(state) && nodeC < DRYING_TO_C && nodeC >= at(state.highestTempC, i) && latent > 0
    const capacity = at(capacityA, i) + at(capacityB, i) * (nodeC + ZERO_CELSIUS_K) + (isDrying ? latent : 0)
    fluxWPerM2 += climbing * capacity * state.probeClimbCPerS
    tempC[i - 1] = nodeC + fluxWPerM2 / at(state.work.conductanceWPerM2K, i - 1)
    climbing = at(volumeM, i - 1)
  }
}

/** Moisture, dose, clock and ledger after the temperatures of a step are known. */
function finishStep(state: StaveState, dtS: number): void {
  const { tempC, highestTempC } = state
  const last = tempC.length - 1
  for (let i = 0; i <= last; i += 1) {
    const nodeC = at(tempC, i)
    if (nodeC > at(highestTempC, i)) {
      highestTempC[i] = nodeC
      if (nodeC > DRYING_FROM_C && at(state.moisturePercent, i) > 0) dryNode(state, i)
    }
    addDose(state, i, dtS)
  }
  const { coldFaceHWPerM2K, roomTempC } = state.options
  state.heatOutJPerM2 += coldFaceHWPerM2K * (at(tempC, last) - roomTempC) * dtS
  state.timeS += dtS
}

function dryNode(state: StaveState, node: number): void {
  const fromC = dryingFromC(state)
  if (state.options.constantProperties !== undefined || fromC >= DRYING_TO_C) return
  const share = Math.min(1, Math.max(0, (at(state.highestTempC, node) - fromC) / (DRYING_TO_C - fromC)))
  state.moisturePercent[node] = state.options.moisturePercent * (1 - share)
  updateProperties(state, node)
}

/** Exact dose of the straight segment from the old to the new temperature (SCIENCE §2), cut at the base. */
function addDose(state: StaveState, node: number, dtS: number): void {
  const { segment, oldTempC } = state.work
  const newC = at(state.tempC, node)
  const oldC = at(oldTempC, node)
  const baseC = state.options.dose.baseTempC ?? -Infinity
  if (newC < baseC && oldC < baseC) return
  const newRate = segment.rateAt(newC)
  const minutes = segment.minutes(dtS, oldC, at(state.doseRate, node), newC, newRate)
  state.doseMin[node] = at(state.doseMin, node) + minutes
  state.doseRate[node] = newRate
}

/** Index of the last node at or before a depth, so that the next one lies behind it. */
function nodeBefore(state: StaveState, depthMm: number): number {
  let node = 0
  while (node < state.depthMm.length - 2 && at(state.depthMm, node + 1) <= depthMm) node += 1
  return node
}

/**
 * Dose at a depth, minutes at the reference temperature: straight in log10 between nodes, since dose falls off
 * exponentially with depth; straight in dose where one of the two has none.
 *
 * @throws RangeError for a depth outside the stave
 */
export function doseAtDepth(state: StaveState, depthMm: number): number {
  requireWithin('depthMm', depthMm, 0, state.options.thicknessMm)
  const node = nodeBefore(state, depthMm)
  const share = (depthMm - at(state.depthMm, node)) / (at(state.depthMm, node + 1) - at(state.depthMm, node))
  const first = at(state.doseMin, node)
  const second = at(state.doseMin, node + 1)
  if (share === 0) return first
  if (first <= 0 || second <= 0) return first + share * (second - first)
  return Math.exp(Math.log(first) + share * (Math.log(second) - Math.log(first)))
}

/** Temperature at a depth, °C, straight between nodes. @throws RangeError for a depth outside the stave */
export function tempCAtDepth(state: StaveState, depthMm: number): number {
  requireWithin('depthMm', depthMm, 0, state.options.thicknessMm)
  const node = nodeBefore(state, depthMm)
  const { depthMm: depths, tempC } = state
  return straightBetween(
    at(depths, node),
    at(tempC, node),
    at(depths, node + 1),
    at(tempC, node + 1),
    depthMm,
  )
}

/** Estimated temperature of the face, °C, with the range that the probe's depth leaves. */
export function faceTempC(state: StaveState): TempRangeC {
  const value = at(state.tempC, 0)
  if (state.probeNode === 0) return { low: value, value, high: value }
  const probeC = at(state.tempC, state.probeNode)
  const halfC = Math.abs(value - probeC) * (state.options.probeDepthErrorMm / state.options.probeDepthMm)
  return { low: value - halfC, value, high: value + halfC }
}

/** Deepest point whose dose exceeds `doseMin`, mm; null when the face's does not. */
function deepestAboveMm(state: StaveState, doseMin: number): number | null {
  for (let i = state.doseMin.length - 1; i >= 0; i -= 1) {
    const here = at(state.doseMin, i)
    if (here <= doseMin) continue
    if (i === state.doseMin.length - 1) return at(state.depthMm, i)
    const next = at(state.doseMin, i + 1)
    const share =
      next > 0 ? Math.log(here / doseMin) / Math.log(here / next) : (here - doseMin) / (here - next)
    return at(state.depthMm, i) + share * (at(state.depthMm, i + 1) - at(state.depthMm, i))
  }
  return null
}

/**
 * Toast depth, mm from the face: the deepest point whose dose exceeds the toast-depth dose; 0 when none does.
 *
 * Range (k = 2), as squares: the probe's depth (moves the whole picture), its temperature error (dose × 10^(d/z)),
 * and the wood's diffusivity (a depth behind the probe goes with its square root).
 */
export function toastDepthMm(state: StaveState): DepthRangeMm {
  const { toastDepthDoseMin, probeErrorC, probeDepthErrorMm, diffusivityErrorShare, dose, thicknessMm } =
    state.options
  const factor = doseFactorFromOffset(dose, probeErrorC ?? 0)
  const value = deepestAboveMm(state, toastDepthDoseMin)
  const widest = deepestAboveMm(state, toastDepthDoseMin / factor)
  if (value === null) return { low: 0, value: 0, high: widest ?? 0 }
  const narrowest = deepestAboveMm(state, toastDepthDoseMin * factor) ?? 0
  const behindMm = Math.max(0, value - state.options.probeDepthMm)
  const woodMm = (diffusivityErrorShare / 2) * behindMm
  const half = (tempMm: number) => Math.hypot(probeDepthErrorMm, woodMm, tempMm)
  return {
    low: Math.max(0, value - half(value - narrowest)),
    value,
    high: Math.min(thicknessMm, value + half((widest ?? value) - value)),
  }
}

/** A depth as it is shown, to 0.5 mm: the model knows no better. */
export function roundDepthForShowMm(depthMm: number): number {
  return Math.round(depthMm * 2) / 2
}

/** Deepest point at or above a temperature now, mm from the face; null when there is none. */
export function isothermDepthMm(state: StaveState, tempC: number): number | null {
  requireFinite('tempC', tempC)
  for (let i = state.tempC.length - 1; i >= 0; i -= 1) {
    const here = at(state.tempC, i)
    if (here < tempC) continue
    if (i === state.tempC.length - 1) return at(state.depthMm, i)
    const next = at(state.tempC, i + 1)
    return straightBetween(here, at(state.depthMm, i), next, at(state.depthMm, i + 1), tempC)
  }
  return null
}

/** Depths of a drawn column, mm: 0, step, 2·step … up to the thickness. */
export function columnDepthsMm(thicknessMm: number, depthStepMm = 0.5): number[] {
  requirePositive('depthStepMm', depthStepMm)
  return Array.from({ length: Math.floor(thicknessMm / depthStepMm + 1e-9) + 1 }, (_, i) => i * depthStepMm)
}

/** log10 of the dose at each depth of `columnDepthsMm`, for drawing; −Infinity where nothing has counted. */
export function staveColumn(state: StaveState, depthStepMm = 0.5): Float32Array {
  return Float32Array.from(columnDepthsMm(state.options.thicknessMm, depthStepMm), (depthMm) =>
    Math.log10(doseAtDepth(state, depthMm)),
  )
}

export type StaveHistoryOptions = Omit<StaveOptions, 'startTempC'> & {
  /** The probe's curve, straight between points: a plan, or a firing's readings with its gaps joined. */
  points: readonly CurvePoint[]
  /** Default: the first point's. */
  startTempC?: number
  /** Pictures across the time axis, at least 2; default 240. */
  columns?: number
  /** Depth step of the picture, mm; default 0.5. */
  depthStepMm?: number
}

/** Depth × time picture: `log10Dose[column * depthsMm.length + depth]`; −Infinity where nothing has counted. */
export type StaveHistory = {
  timesS: number[]
  depthsMm: number[]
  log10Dose: Float32Array
  /** Deepest point at or above the isotherm per column, mm; null when none. */
  isotherm100Mm: (number | null)[]
  isotherm150Mm: (number | null)[]
  toastDepthMm: DepthRangeMm[]
  /** The stave at the last point. */
  final: StaveState
}

/** Readings closer than this are passed over: the wood does not move between them. */
const SHORTEST_HISTORY_STEP_S = 2

/**
 * The stave's whole history under a curve, for drawing and for the toast depth of a plan or a finished firing.
 *
 * @throws RangeError for fewer than two points, times that fall, values that are not finite, or as `createStave`
 */
export function staveHistory(options: StaveHistoryOptions): StaveHistory {
  const { points, columns = 240, depthStepMm = 0.5, startTempC, ...staveOptions } = options
  const first = points[0]
  const last = points.at(-1)
  if (first === undefined || last === undefined || points.length < 2 || !(last.timeS > first.timeS)) {
    throw new RangeError('points must hold at least two points that span some time')
  }
  requireWithin('columns', columns, 2, 10_000)
  const state = createStave({ ...staveOptions, startTempC: startTempC ?? first.tempC })
  const depthsMm = columnDepthsMm(options.thicknessMm, depthStepMm)
  const history: StaveHistory = {
    timesS: [],
    depthsMm,
    log10Dose: new Float32Array(columns * depthsMm.length),
    isotherm100Mm: [],
    isotherm150Mm: [],
    toastDepthMm: [],
    final: state,
  }
  const columnS = (last.timeS - first.timeS) / (columns - 1)
  let next = 1
  let timeS = first.timeS
  for (let column = 0; column < columns; column += 1) {
    const columnTimeS = column === columns - 1 ? last.timeS : first.timeS + column * columnS
    while (timeS < columnTimeS) {
      while (next < points.length - 1 && pointAt(points, next).timeS < timeS + SHORTEST_HISTORY_STEP_S)
        next += 1
      const goalS = Math.min(pointAt(points, next).timeS, columnTimeS)
      const toS = goalS > timeS ? goalS : columnTimeS
      stepStave(state, curveTempC(points, next, toS), toS - timeS)
      timeS = toS
    }
    addColumn(history, state, column, columnTimeS, depthStepMm)
  }
  return history
}

function pointAt(points: readonly CurvePoint[], index: number): CurvePoint {
  const point = points[index]
  if (point === undefined) throw new RangeError(`points[${index}] is missing`)
  return point
}

/** The curve at a time that lies at or before `points[next]`. */
function curveTempC(points: readonly CurvePoint[], next: number, timeS: number): number {
  let after = next
  while (after > 1 && pointAt(points, after - 1).timeS >= timeS) after -= 1
  const from = pointAt(points, after - 1)
  const to = pointAt(points, after)
  if (!(to.timeS > from.timeS) || timeS >= to.timeS) return to.tempC
  return straightBetween(from.timeS, from.tempC, to.timeS, to.tempC, timeS)
}

function addColumn(
  history: StaveHistory,
  state: StaveState,
  column: number,
  timeS: number,
  depthStepMm: number,
): void {
  history.timesS.push(timeS)
  history.log10Dose.set(staveColumn(state, depthStepMm), column * history.depthsMm.length)
  history.isotherm100Mm.push(isothermDepthMm(state, 100))
  history.isotherm150Mm.push(isothermDepthMm(state, 150))
  history.toastDepthMm.push(toastDepthMm(state))
}
